"""The working region: fine enough for the smallest frame of the network."""

from collections.abc import Sequence

from campaigns.ingest.kept_region import kept_region
from observers.models import Instrument
from skytiles.region.constraints import AnyConstraint
from skytiles.region.galactic_prior import GalacticPrior
from skytiles.region.make_region import make_region
from skytiles.region.region import Region


def working_region(
    constraints: Sequence[AnyConstraint],
    instruments: Sequence[Instrument],
    *,
    galaxy: GalacticPrior | None = None,
) -> Region:
    """The product of constraints and prior on pixels of the order that the network needs.

    Without `galaxy` the prior is flat.
    """
    sides_deg = [min(one.width_deg, one.height_deg) for one in instruments]
    smallest_side_deg = min(sides_deg) if sides_deg else None
    if galaxy is None:
        return make_region(constraints, smallest_side_deg=smallest_side_deg)
    return kept_region(constraints, smallest_side_deg=smallest_side_deg, galaxy=galaxy)
