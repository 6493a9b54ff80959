"""The source model of a campaign on the pixels of its region."""

from dataclasses import replace

import campaigns.bridge as bridge
from campaigns.ingest.kept_arrays import Arrays, hash_of, kept_arrays
from campaigns.models import Campaign, RegionRevision
from skytiles.source.galactic_offsets import PlacedSource

# Raised whenever the numbers would come out otherwise.
_EDITION = 1


def placed_source(campaign: Campaign, region: RegionRevision) -> PlacedSource | None:
    """Offsets per pixel; None for a model that is the same everywhere."""
    model = bridge.source_of(campaign)
    if model.placement == "apparent":
        return None

    def compute() -> Arrays:
        placed = bridge.place_source_of(campaign, region)
        extinctions_mag = placed.model.extinctions_mag
        assert extinctions_mag is not None, "a model in the Galaxy has dust before it"
        return {
            "offsets_mag": placed.model.offsets_mag,
            "extinctions_mag": extinctions_mag,
            "mean_weights": placed.model.offset_weights,
            "offset_weights": placed.offset_weights,
        }

    sha256 = hash_of(
        _EDITION,
        "offsets",
        dict(model.parameters),
        region.order,
        bytes(region.pixels),
        bytes(region.probabilities),
    )
    arrays = kept_arrays(sha256, compute=compute)
    placed_model = replace(
        model,
        offsets_mag=arrays["offsets_mag"],
        extinctions_mag=arrays["extinctions_mag"],
        offset_weights=arrays["mean_weights"],
        placement="apparent",
    )
    return PlacedSource(placed_model, arrays["offset_weights"])
