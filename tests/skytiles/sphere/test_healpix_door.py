import healpy
import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from skytiles.sphere import healpix_door as door
from skytiles.sphere.angles import separations_deg, unit_vectors

ORDERS = [0, 1, 2, 5, 9, 13, 20, 29]


def some_pixels(order, n=2000):
    rng = np.random.default_rng(order)
    edges = [0, 1, 3, door.n_pixels(order) - 1, door.n_pixels(order) // 2]
    return np.concatenate([rng.integers(0, door.n_pixels(order), n), edges]).clip(0)


def test_numbers_areas_and_sides_of_pixels(authority):
    # Gorski et al. 2005, ApJ 622, 759, Table 1; published.
    counts, areas = authority["hp_table_npix"], authority["hp_table_area"]
    sides = authority["hp_table_resolution"]
    orders = counts["inputs"]["orders"]
    assert [door.n_pixels(order) for order in orders] == counts["expected"]
    found = [door.pixel_area_deg2(order) for order in orders]
    assert found == pytest.approx(areas["expected"], rel=areas["tolerance"])
    found = [door.pixel_side_deg(order) for order in orders]
    assert found == pytest.approx(sides["expected"], rel=sides["tolerance"])


def test_centres_of_nside_1(authority):
    # Gorski et al. 2005, eq. 4 and 8; recomputed.
    row = authority["hp_centers1"]
    found = np.transpose(door.pixel_centres(0, row["inputs"]["pixels"]))
    assert found == pytest.approx(np.array(row["expected"]), abs=row["tolerance"])


def test_ring_centres_of_nside_4(authority):
    # Gorski et al. 2005; recomputed.
    row = authority["hp_centers4"]
    pixels = door.ring_to_nest(2, row["inputs"]["pixels"])
    found = np.transpose(door.pixel_centres(2, pixels))
    assert found == pytest.approx(np.array(row["expected"]), abs=row["tolerance"])


def test_nested_to_ring_of_nside_2(authority):
    # Gorski et al. 2005; recomputed.
    row = authority["hp_nest2ring"]
    assert door.nest_to_ring(1, row["inputs"]["pixels"]).tolist() == row["expected"]


@pytest.mark.parametrize("order", ORDERS)
def test_ring_and_nested_agree_with_healpy(order):
    pixels = some_pixels(order)
    rings = door.nest_to_ring(order, pixels)
    assert np.array_equal(rings, healpy.nest2ring(1 << order, pixels))
    assert np.array_equal(door.ring_to_nest(order, rings), pixels)


def test_the_ends_of_long_rings_are_told_apart():
    # At order 29 a float's root of a pixel number rounds across the border of two rings.
    rings = np.array([2**28 + 1, 2**29 - 1, 94_906_267, 300_000_007])
    starts = 2 * rings * (rings - 1)
    pixels = np.concatenate([starts - 1, starts, door.n_pixels(29) - starts])
    assert np.array_equal(door.ring_to_nest(29, pixels), healpy.ring2nest(2**29, pixels))
    assert np.array_equal(door.nest_to_ring(29, door.ring_to_nest(29, pixels)), pixels)


@pytest.mark.parametrize("order", ORDERS)
def test_vectors_agree_with_healpy(order):
    pixels = some_pixels(order)
    expected = np.transpose(healpy.pix2vec(1 << order, pixels, nest=True))
    assert np.abs(door.pixel_vectors(order, pixels) - expected).max() < 1e-14


@pytest.mark.parametrize("order", ORDERS)
def test_positions_fall_into_the_pixels_of_healpy(order):
    rng = np.random.default_rng(order)
    ras, decs = rng.uniform(0, 360, 5000), np.degrees(np.arcsin(rng.uniform(-1, 1, 5000)))
    if order < 20:  # Finer, the two round differently near borders and near the poles.
        decs[:500] = 90.0 - 10.0 ** rng.uniform(-4, 1, 500)
    expected = healpy.ang2pix(1 << order, ras, decs, nest=True, lonlat=True)
    is_same = door.pixels_at(order, ras, decs) == expected
    # A pixel of order 29 is 0.4 milliarcsec wide, a thousand times the rounding of an angle.
    assert is_same.mean() > (0.99 if order > 20 else 0.9999)


@given(st.integers(0, 29), st.data())
def test_a_pixel_holds_its_centre(order, data):
    pixel = data.draw(st.integers(0, door.n_pixels(order) - 1))
    ra, dec = door.pixel_centres(order, [pixel])
    assert door.pixels_at(order, ra, dec).tolist() == [pixel] or order > 26


@given(st.floats(-720, 720), st.floats(-90, 90))
def test_any_position_has_a_pixel_near_it(ra, dec):
    centre_ra, centre_dec = door.pixel_centres(8, door.pixels_at(8, [ra], [dec]))
    assert separations_deg(ra, dec, centre_ra, centre_dec) < 1.1 * door.pixel_side_deg(8)


@pytest.mark.parametrize("dec", [-90.0, -89.9, 0.0, 41.8, 90.0])
def test_disc_agrees_with_healpy(dec):
    for radius in (0.3, 5.0, 60.0, 120.0):
        found = door.pixels_in_disc(6, ra_deg=0.05, dec_deg=dec, radius_deg=radius)
        centre = unit_vectors(0.05, dec)
        expected = healpy.query_disc(64, centre, np.radians(radius), nest=True)
        assert np.array_equal(found, np.sort(expected))


def test_warming_is_quick_and_silent():
    door.warm()
