"""Pixels under 10,000 one-degree squares, against a loop over healpy.query_polygon."""

import time

import healpy
import numpy as np

from skytiles.tiling.footprint import rectangle_footprint
from skytiles.tiling.pixels_under import pixels_under_many

N_FOOTPRINTS = 10_000
ORDER = 9


def bench_footprints():
    """Identical pixels, both sides given the corners that they need."""
    rng = np.random.default_rng(1)
    footprints = [
        rectangle_footprint(
            ra_deg=float(ra_deg),
            dec_deg=float(dec_deg),
            width_deg=1.0,
            height_deg=1.0,
            rotation_deg=float(rotation_deg),
        )
        for ra_deg, dec_deg, rotation_deg in zip(
            rng.uniform(0, 360, N_FOOTPRINTS),
            np.degrees(np.arcsin(rng.uniform(-1, 1, N_FOOTPRINTS))),
            rng.uniform(0, 90, N_FOOTPRINTS),
            strict=True,
        )
    ]
    pixels_under_many(footprints[:100], ORDER)
    ours, ours_s = _timed(lambda: pixels_under_many(footprints, ORDER))
    corners = [footprint.corners for footprint in footprints]
    theirs, peer_s = _timed(
        lambda: [healpy.query_polygon(1 << ORDER, each, nest=True) for each in corners]
    )
    n_different = sum(
        not np.array_equal(np.sort(ours.pixels[first:last]), np.sort(pixels))
        for first, last, pixels in zip(ours.starts[:-1], ours.starts[1:], theirs, strict=True)
    )
    return {
        "ours_s": ours_s,
        "peer": f"healpy {healpy.__version__} query_polygon in a loop",
        "peer_s": peer_s,
        "ratio": peer_s / ours_s,
        "error": f"{n_different} footprints with other pixels",
    }


def _timed(work):
    """What it gives, and the median of five times: the first one pays for fresh memory."""
    seconds = []
    for _ in range(5):
        started = time.perf_counter()
        found = work()
        seconds.append(time.perf_counter() - started)
    return found, float(np.median(seconds))
