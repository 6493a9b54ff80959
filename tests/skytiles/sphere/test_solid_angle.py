import numpy as np
import pytest

from skytiles.sphere.angles import unit_vectors
from skytiles.sphere.solid_angle import (
    SKY_DEG2,
    STERADIAN_DEG2,
    cap_area_deg2,
    polygon_area_deg2,
    rectangle_area_deg2,
)


def test_whole_sky_steradian_and_hemisphere(authority):
    # fixtures/authority, sky: definition; recomputed.
    row = authority["sky"]
    found = [SKY_DEG2, STERADIAN_DEG2, float(cap_area_deg2(90.0))]
    assert found == pytest.approx(row["expected"], rel=row["tolerance"])


def test_pyramids(authority):
    # fixtures/authority, pyramid: solid angle of a pyramid; recomputed.
    row = authority["pyramid"]
    widths, heights = np.transpose(row["inputs"]["sides_deg"])
    found = rectangle_area_deg2(widths, heights)
    assert found == pytest.approx(row["expected"], abs=row["tolerance"])


def test_caps(authority):
    # fixtures/authority, cap: definition; recomputed.
    row = authority["cap"]
    found = cap_area_deg2(row["inputs"]["radii_deg"])
    assert found == pytest.approx(row["expected"], abs=row["tolerance"])


def test_an_octant_is_an_eighth_of_the_sky():
    corners = unit_vectors([0.0, 90.0, 0.0], [0.0, 0.0, 90.0])
    assert polygon_area_deg2(corners) == pytest.approx(SKY_DEG2 / 8.0, rel=1e-14)


def test_a_polygon_counts_the_same_in_either_winding():
    corners = unit_vectors([359.0, 1.0, 1.0, 359.0], [-1.0, -1.0, 1.0, 1.0])
    assert polygon_area_deg2(corners) == pytest.approx(polygon_area_deg2(corners[::-1]))
