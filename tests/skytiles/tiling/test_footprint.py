import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from skytiles.errors import FootprintError
from skytiles.sphere.angles import separations_deg
from skytiles.sphere.solid_angle import SKY_DEG2, cap_area_deg2, rectangle_area_deg2
from skytiles.tiling.footprint import (
    circle_footprint,
    polygon_footprint,
    rectangle_footprint,
)
from skytiles.tiling.footprint_json import footprint_from_json

ANGLES = st.floats(0.0, 360.0)
DECS = st.floats(-90.0, 90.0)
SIDES = st.floats(0.01, 140.0)


@given(ANGLES, DECS, SIDES, SIDES, ANGLES)
def test_area_is_that_of_the_pyramid_wherever_it_stands(ra, dec, width, height, rotation):
    footprint = rectangle_footprint(
        ra_deg=ra, dec_deg=dec, width_deg=width, height_deg=height, rotation_deg=rotation
    )
    assert footprint.area_deg2 == pytest.approx(float(rectangle_area_deg2(width, height)), rel=1e-9)
    assert footprint.area_deg2 < SKY_DEG2 / 2.0


def test_corners_of_an_upright_frame_over_ra_0():
    found = rectangle_footprint(ra_deg=0.0, dec_deg=0.0, width_deg=90.0, height_deg=90.0)
    # Half sides of 45 degrees: tangents of 1, so corners at RA +-45 and tan(dec) = cos(45).
    dec = np.degrees(np.arctan(np.cos(np.pi / 4)))
    expected = {(315.0, -dec), (45.0, -dec), (45.0, dec), (315.0, dec)}
    assert {tuple(np.round(c, 9)) for c in found.corners_deg} == {
        tuple(np.round(c, 9)) for c in expected
    }


def test_rotation_turns_the_height_from_north_through_east():
    upright = {"ra_deg": 30.0, "dec_deg": 0.0, "width_deg": 0.2, "height_deg": 4.0}
    tilted = rectangle_footprint(**upright, rotation_deg=45.0)
    # The far ends now lie to the north-east and the south-west.
    ras, decs = tilted.corners_deg.T
    assert np.sign(ras - 30.0).tolist() == np.sign(decs).tolist()


@given(ANGLES, DECS, SIDES, SIDES, ANGLES)
def test_json_and_back(ra, dec, width, height, rotation):
    first = rectangle_footprint(
        ra_deg=ra, dec_deg=dec, width_deg=width, height_deg=height, rotation_deg=rotation
    )
    second = footprint_from_json(first.to_json())
    assert second.area_deg2 == pytest.approx(first.area_deg2, rel=1e-6)
    here, there = (
        (first.centre_ra_deg, first.centre_dec_deg),
        (second.centre_ra_deg, second.centre_dec_deg),
    )
    assert separations_deg(*here, *there) < 1e-6


def test_a_circle_and_back():
    circle = circle_footprint(ra_deg=12.0, dec_deg=-90.0, diameter_deg=7.0)
    again = footprint_from_json(circle.to_json())
    assert (again.centre_ra_deg, again.centre_dec_deg, again.diameter_deg) == (12.0, -90.0, 7.0)
    assert again.area_deg2 == pytest.approx(float(cap_area_deg2(3.5)))
    assert again.smallest_side_deg == 7.0


@pytest.mark.parametrize("order", [1, -1])
def test_either_winding_of_a_polygon_is_taken(order):
    corners = [[359.0, -1.0], [1.0, -1.0], [1.0, 1.0], [359.0, 1.0]][::order]
    footprint = polygon_footprint(corners)
    assert footprint.area_deg2 == pytest.approx(4.0, rel=1e-3)
    assert footprint.centre_ra_deg % 360 == pytest.approx(0.0, abs=1e-9)
    normals = np.cross(footprint.corners, np.roll(footprint.corners, -1, axis=0))
    assert (normals @ footprint.centre > 0).all()


def test_the_smallest_side_is_the_shortest():
    footprint = polygon_footprint([[0.0, 0.0], [3.0, 0.0], [0.0, 1.0]])
    assert footprint.smallest_side_deg == pytest.approx(1.0)


@pytest.mark.parametrize(
    "corners",
    [
        [[0, 0], [1, 0]],
        [[0, 0], [1, 0], [2, 0]],
        [[0, 0], [2, 0], [0.5, 0.5], [0, 2]],
        [[0, 0], [2, 2], [2, 0], [0, 2]],
        [[0, 0], [120, 0], [240, 0]],
        [[0, 0], [0, 0], [0, 0]],
        [[0, 0], [72 * 2, 60], [72 * 4, 60], [72, 60], [72 * 3, 60]],
        [[0, 91], [1, 0], [0, 1]],
        [[float("nan"), 0], [1, 0], [0, 1]],
        [1, 2, 3],
    ],
    ids=["two", "line", "notch", "bow", "equator", "point", "star", "beyond pole", "nan", "flat"],
)
def test_polygons_that_cannot_stand_are_refused(corners):
    with pytest.raises(FootprintError, match="cannot be used"):
        polygon_footprint(corners)


@pytest.mark.parametrize(
    ("name", "value"),
    [
        ("width_deg", 0.0),
        ("width_deg", 151.0),
        ("height_deg", float("nan")),
        ("dec_deg", 90.5),
        ("ra_deg", float("inf")),
        ("rotation_deg", float("nan")),
    ],
)
def test_frames_that_cannot_stand_are_refused(name, value):
    frame = {"ra_deg": 1.0, "dec_deg": 2.0, "width_deg": 3.0, "height_deg": 4.0}
    with pytest.raises(FootprintError) as refusal:
        rectangle_footprint(**(frame | {name: value}))
    assert refusal.value.code == "bad-footprint"
    assert refusal.value.advice


@pytest.mark.parametrize(
    "fields",
    [
        {},
        {"shape": "square"},
        {"shape": "circle", "ra_deg": 1.0},
        {"shape": "circle", "ra_deg": "x", "dec_deg": 0, "diameter_deg": 1},
        {"shape": "polygon", "corners_deg": "abc"},
        {"shape": "polygon", "corners_deg": [[1, 2], [3]]},
    ],
)
def test_garbled_footprints_are_refused(fields):
    with pytest.raises(FootprintError):
        footprint_from_json(fields)
