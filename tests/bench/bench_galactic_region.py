"""A 1,500 deg2 region with the Galactic prior and its offsets per pixel: cold, and kept."""

import tempfile
import time
from pathlib import Path

from django.test import override_settings

from campaigns.actions.source_to_launch import source_to_launch
from campaigns.ingest.kept_region import kept_region
from campaigns.ingest.placed_source import placed_source
from campaigns.models import Campaign, RegionRevision
from skytiles.region.constraints import EllipseConstraint
from skytiles.region.galactic_prior import GalacticPrior
from skytiles.sphere.healpix_door import pixel_area_deg2

# Along the plane and wider than the disc: with the prior it still has 1,500 square degrees.
ELLIPSE = EllipseConstraint(285.0, 3.0, 28.0, 11.0, position_angle_deg=30.0)


def bench_galactic_region():
    """From a constraint to region and ledger weights; the second time they are read from disc."""
    with tempfile.TemporaryDirectory() as folder, override_settings(COMPUTED=Path(folder)):
        cold_s, region, placed = _region_and_offsets()
        kept = [_region_and_offsets() for _ in range(3)]
        megabytes = sum(file.stat().st_size for file in Path(folder).glob("*.npz")) / 1e6
    kept_s = min(seconds for seconds, _, _ in kept)
    is_same = all((again.offset_weights == placed.offset_weights).all() for _, _, again in kept)
    return {
        "ours_s": kept_s,
        "peer": "our own computation of the same (cold)",
        "peer_s": cold_s,
        "ratio": cold_s / kept_s,
        "error": "identical arrays" if is_same else "arrays differ",
        "area_deg2": round(region.n_pixels * pixel_area_deg2(region.order)),
        "n_pixels": region.n_pixels,
        "n_nodes": placed.offset_weights.shape[1],
        "kept_mb": round(megabytes),
    }


def _region_and_offsets():
    source = source_to_launch("core collapse", prior="", constraints=[ELLIPSE])
    started = time.perf_counter()
    region = kept_region([ELLIPSE], smallest_side_deg=None, galaxy=GalacticPrior())
    row = RegionRevision(
        order=region.order,
        pixels=region.pixels.tobytes(),
        probabilities=region.probabilities.tobytes(),
    )
    placed = placed_source(Campaign(source_model=source), row)
    return time.perf_counter() - started, region, placed
