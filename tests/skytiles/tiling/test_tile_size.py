import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from skytiles.errors import FootprintError
from skytiles.tiling.footprint import rectangle_footprint
from skytiles.tiling.tile_size import ladder_side_deg, tile_size_deg

SIDES = st.floats(0.05, 60.0)


@given(st.floats(1e-3, 170.0))
def test_the_ladder_goes_down_by_at_most_a_tenth(side):
    rung = ladder_side_deg(side)
    assert side / 1.1 <= rung <= side * (1.0 + 1e-9)
    assert ladder_side_deg(rung) == rung


def test_like_gear_shares_a_rung():
    assert ladder_side_deg(1.02) == ladder_side_deg(1.08) == 1.0


def test_a_known_upright_camera_keeps_its_field_less_the_margin():
    width, height = tile_size_deg(2.0, 1.0, shape="rectangle", rotation_deg=0.0)
    assert 1.9 / 1.1 <= width <= 1.9
    assert 0.95 / 1.1 <= height <= 0.95
    turned = tile_size_deg(2.0, 1.0, shape="rectangle", rotation_deg=90.0)
    assert turned == (height, width)


def test_an_unknown_camera_angle_leaves_the_square_inside_at_any_angle():
    width, height = tile_size_deg(3.0, 1.0, shape="rectangle", rotation_deg=None)
    assert width == height == ladder_side_deg(0.95 / math.sqrt(2.0))


def test_a_circular_field_leaves_its_inscribed_square():
    width, height = tile_size_deg(7.0, 7.0, shape="circle", rotation_deg=None, margin=0.0)
    assert width == height == ladder_side_deg(7.0 / math.sqrt(2.0))


@given(SIDES, SIDES, st.floats(0.0, 360.0))
def test_the_tile_lies_inside_the_frame(width, height, rotation):
    tile = tile_size_deg(width, height, shape="rectangle", rotation_deg=rotation)
    corners = rectangle_footprint(ra_deg=50.0, dec_deg=20.0, width_deg=tile[0], height_deg=tile[1])
    frame = rectangle_footprint(
        ra_deg=50.0, dec_deg=20.0, width_deg=width, height_deg=height, rotation_deg=rotation
    )
    normals = np.cross(frame.corners, np.roll(frame.corners, -1, axis=0))
    assert (corners.corners @ normals.T > 0.0).all()


@given(SIDES, SIDES)
def test_the_tile_lies_inside_the_frame_at_every_angle(width, height):
    tile = tile_size_deg(width, height, shape="rectangle", rotation_deg=None)
    corner = math.hypot(*(math.tan(math.radians(side) / 2.0) for side in tile))
    assert corner <= math.tan(math.radians(min(width, height)) / 2.0)


@pytest.mark.parametrize("side", [0.0, -1.0, 200.0, float("nan")])
def test_impossible_fields_are_refused(side):
    with pytest.raises(FootprintError, match="field of view"):
        tile_size_deg(side, 1.0, shape="rectangle", rotation_deg=None)
