"""Many frames at once give what each gives alone."""

import numpy as np
import pytest

from skytiles.sphere.healpix_door import pixels_in_disc
from skytiles.tiling.covered_many import covered_pixels_many
from skytiles.tiling.footprint import circle_footprint, rectangle_footprint
from skytiles.tiling.pixels_under import covered_pixels

REGION = np.sort(pixels_in_disc(8, ra_deg=359.0, dec_deg=60.0, radius_deg=6.0))


def test_many_frames_give_what_each_gives_alone():
    rng = np.random.default_rng(3)
    frames = [
        rectangle_footprint(
            ra_deg=float(rng.uniform(350, 370)) % 360,
            dec_deg=float(rng.uniform(50, 70)),
            width_deg=float(rng.uniform(0.1, 4.0)),
            height_deg=float(rng.uniform(0.1, 4.0)),
            rotation_deg=float(rng.uniform(0, 180)),
        )
        for _ in range(60)
    ]
    # One far away, one tiny, one round.
    frames.append(rectangle_footprint(ra_deg=10, dec_deg=-60, width_deg=2, height_deg=2))
    frames.append(circle_footprint(ra_deg=0.5, dec_deg=60, diameter_deg=0.05))
    frames.append(circle_footprint(ra_deg=0.5, dec_deg=60, diameter_deg=3.0))
    together = covered_pixels_many(frames, 8, REGION)
    assert len(together) == len(frames)
    for frame, (places, shares) in zip(frames, together, strict=True):
        alone_places, alone_shares = covered_pixels(frame, 8, REGION)
        np.testing.assert_array_equal(places, alone_places)
        assert shares == pytest.approx(alone_shares)


def test_no_frames_give_nothing():
    assert covered_pixels_many([], 8, REGION) == []
