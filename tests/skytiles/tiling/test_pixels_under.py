import healpy
import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from skytiles.sphere.angles import ras_decs_deg, unit_vectors
from skytiles.sphere.healpix_door import n_pixels, pixel_area_deg2, pixel_vectors
from skytiles.tiling.footprint import (
    circle_footprint,
    polygon_footprint,
    rectangle_footprint,
)
from skytiles.tiling.pixels_under import (
    covered_pixels,
    pixels_under,
    pixels_under_many,
    pixels_under_tiles,
)

ANGLES = st.floats(0.0, 360.0)
DECS = st.one_of(st.floats(-90.0, 90.0), st.floats(89.0, 90.0), st.floats(-90.0, -89.0))
SIDES = st.floats(0.05, 60.0)


def random_rectangles(n, *, seed, widest):
    rng = np.random.default_rng(seed)
    return [
        rectangle_footprint(
            ra_deg=rng.uniform(0, 360),
            dec_deg=np.degrees(np.arcsin(rng.uniform(-1, 1))),
            width_deg=10 ** rng.uniform(-1, np.log10(widest)),
            height_deg=10 ** rng.uniform(-1, np.log10(widest)),
            rotation_deg=rng.uniform(0, 360),
        )
        for _ in range(n)
    ]


def healpy_pixels(footprint, order):
    if footprint.shape == "circle":
        radius = np.radians(footprint.diameter_deg / 2)
        found = healpy.query_disc(1 << order, footprint.centre, radius, nest=True)
    else:
        found = healpy.query_polygon(1 << order, footprint.corners, inclusive=False, nest=True)
    return np.sort(found)


def list_of(lists, j):
    return np.sort(lists.pixels[lists.starts[j] : lists.starts[j + 1]])


@pytest.mark.parametrize(
    ("order", "n", "widest"), [(3, 2000, 100.0), (6, 2000, 60.0), (9, 3000, 3.0), (10, 300, 10.0)]
)
def test_pixels_are_those_of_healpy(order, n, widest):
    footprints = random_rectangles(n, seed=order, widest=widest)
    lists = pixels_under_many(footprints, order)
    for j, footprint in enumerate(footprints):
        assert np.array_equal(list_of(lists, j), healpy_pixels(footprint, order))


@pytest.mark.parametrize("dec", [90.0, -90.0, 89.95, 88.0, -85.0])
@pytest.mark.parametrize("ra", [0.0, 0.01, 359.99, 123.4])
def test_frames_near_a_pole_have_the_pixels_of_healpy(ra, dec):
    for width, height, rotation in ((0.3, 0.2, 10.0), (5.0, 3.0, 33.0), (40.0, 20.0, 71.0)):
        footprint = rectangle_footprint(
            ra_deg=ra, dec_deg=dec, width_deg=width, height_deg=height, rotation_deg=rotation
        )
        assert np.array_equal(pixels_under(footprint, 8), healpy_pixels(footprint, 8))


@given(ANGLES, DECS, SIDES, SIDES, ANGLES)
def test_a_pixel_is_under_a_frame_when_its_centre_is_left_of_every_side(
    ra, dec, width, height, rotation
):
    footprint = rectangle_footprint(
        ra_deg=ra, dec_deg=dec, width_deg=width, height_deg=height, rotation_deg=rotation
    )
    corners = footprint.corners
    normals = np.cross(corners, np.roll(corners, -1, axis=0))
    normals /= np.linalg.norm(normals, axis=1, keepdims=True)
    heights = (pixel_vectors(5, np.arange(n_pixels(5))) @ normals.T).min(axis=1)
    is_under = np.zeros(n_pixels(5), dtype=bool)
    is_under[pixels_under(footprint, 5)] = True
    # A centre on a side to the last digits may fall on either side of it.
    is_clear = np.abs(heights) > 1e-12
    assert np.array_equal(is_under[is_clear], (heights > 0)[is_clear])


@given(ANGLES, DECS, st.floats(0.05, 140.0))
def test_a_pixel_is_under_a_circle_when_its_centre_is_near(ra, dec, diameter):
    circle = circle_footprint(ra_deg=ra, dec_deg=dec, diameter_deg=diameter)
    margins = pixel_vectors(5, np.arange(n_pixels(5))) @ circle.centre
    margins -= np.cos(np.radians(diameter / 2))
    is_under = np.zeros(n_pixels(5), dtype=bool)
    is_under[pixels_under(circle, 5)] = True
    is_clear = np.abs(margins) > 1e-12
    assert np.array_equal(is_under[is_clear], (margins > 0)[is_clear])


@given(ANGLES, ANGLES, st.floats(0.5, 20.0))
def test_turning_a_frame_half_round_changes_nothing(ra, rotation, width):
    turned = [
        rectangle_footprint(
            ra_deg=ra, dec_deg=-33.3, width_deg=width, height_deg=2.0, rotation_deg=angle
        )
        for angle in (rotation, rotation + 180.0)
    ]
    first, second = (set(pixels_under(footprint, 7).tolist()) for footprint in turned)
    assert len(first ^ second) <= 1


def test_polygons_of_any_number_of_corners_and_circles_may_be_mixed():
    footprints = [
        polygon_footprint([[10, 0], [12, 0], [11, 2]]),
        polygon_footprint([[190, 30], [195, 31], [191, 35]]),
        circle_footprint(ra_deg=0.0, dec_deg=90.0, diameter_deg=4.0),
        rectangle_footprint(ra_deg=0.0, dec_deg=0.0, width_deg=3.0, height_deg=2.0),
        polygon_footprint([[200, -60], [204, -60], [206, -58], [204, -56], [200, -56]]),
    ]
    lists = pixels_under_many(footprints, 8)
    for j, footprint in enumerate(footprints):
        assert np.array_equal(list_of(lists, j), healpy_pixels(footprint, 8))
        assert np.array_equal(pixels_under(footprint, 8), healpy_pixels(footprint, 8))


def test_no_footprints_have_no_pixels():
    lists = pixels_under_many([], 8)
    assert lists.starts.tolist() == [0]
    assert len(lists.pixels) == 0


def test_tiles_are_upright_rectangles():
    lists = pixels_under_tiles(
        [0.0, 90.0, 7.0], [0.0, 60.0, -89.0], width_deg=2.0, height_deg=3.0, order=8
    )
    for j, (ra, dec) in enumerate([(0.0, 0.0), (90.0, 60.0), (7.0, -89.0)]):
        tile = rectangle_footprint(ra_deg=ra, dec_deg=dec, width_deg=2.0, height_deg=3.0)
        assert np.array_equal(list_of(lists, j), pixels_under(tile, 8))


def test_a_large_frame_covers_whole_pixels():
    footprint = rectangle_footprint(ra_deg=0.0, dec_deg=0.0, width_deg=5.0, height_deg=4.0)
    region = np.arange(n_pixels(8))
    indices, fractions = covered_pixels(footprint, 8, region)
    assert np.array_equal(indices, pixels_under(footprint, 8))
    assert (fractions == 1.0).all()


def test_only_pixels_of_the_region_are_covered():
    footprint = rectangle_footprint(ra_deg=0.0, dec_deg=0.0, width_deg=5.0, height_deg=4.0)
    under = pixels_under(footprint, 8)
    region = np.sort(np.concatenate([under[::3], [0, 1, n_pixels(8) - 1]]))
    indices, _ = covered_pixels(footprint, 8, region)
    assert np.array_equal(region[indices], np.intersect1d(under, region))
    nowhere, fractions = covered_pixels(footprint, 8, np.zeros(0, dtype=np.int64))
    assert len(nowhere) == len(fractions) == 0


@given(ANGLES, st.floats(-89.0, 89.0), st.floats(0.02, 0.6), st.floats(0.02, 0.6), ANGLES)
def test_fractions_of_a_small_frame_add_up_to_its_area(ra, dec, width, height, rotation):
    footprint = rectangle_footprint(
        ra_deg=ra, dec_deg=dec, width_deg=width, height_deg=height, rotation_deg=rotation
    )
    indices, fractions = covered_pixels(footprint, 8, np.arange(n_pixels(8)))
    assert (np.diff(indices) > 0).all()
    assert ((fractions > 0.0) & (fractions <= 1.0)).all()
    # At least 4,096 parts: the border errs by a few per cent, less for compact frames.
    slimness = max(width, height) / min(width, height)
    covered = fractions.sum() * pixel_area_deg2(8)
    assert covered == pytest.approx(footprint.area_deg2, rel=0.02 * max(1.0, slimness**0.5))


def test_a_frame_inside_one_pixel_covers_its_share_of_it():
    vector = pixel_vectors(8, [123456])[0]
    ra, dec = ras_decs_deg(vector)
    side = 0.5 * np.sqrt(pixel_area_deg2(8)) * 0.5
    footprint = rectangle_footprint(
        ra_deg=float(ra), dec_deg=float(dec), width_deg=side, height_deg=side
    )
    indices, fractions = covered_pixels(footprint, 8, np.arange(n_pixels(8)))
    assert indices.tolist() == [123456]
    assert fractions[0] == pytest.approx(1.0 / 16.0, rel=0.02)


def test_many_footprints_hold_pixels_in_proportion_to_their_areas():
    footprints = random_rectangles(500, seed=5, widest=4.0)
    lists = pixels_under_many(footprints, 9)
    expected = np.array([f.area_deg2 for f in footprints]).sum() / pixel_area_deg2(9)
    assert lists.starts[-1] == pytest.approx(expected, rel=0.01)


def test_unit_vectors_of_corners_are_where_they_were_put():
    corners = [[359.0, -1.0], [1.0, -1.0], [1.0, 1.0], [359.0, 1.0]]
    found = polygon_footprint(corners).corners
    assert {tuple(np.round(v, 12)) for v in found} == {
        tuple(np.round(v, 12)) for v in unit_vectors(*np.transpose(corners))
    }
