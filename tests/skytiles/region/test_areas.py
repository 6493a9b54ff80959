"""Constraints that are flat inside an area: mocpy as the oracle of polygons."""

import astropy.units as u
import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from mocpy import MOC

from skytiles.region.areas import MocConstraint, PolygonConstraint
from skytiles.region.constraints import ConeConstraint
from skytiles.region.make_region import MOST_PIXELS, make_region
from skytiles.region.polygon import polygon_moc
from skytiles.region.read_moc import moc_from_ascii
from skytiles.sphere.healpix_door import MAX_ORDER, pixels_at
from skytiles.sphere.solid_angle import SKY_DEG2

SHAPES = {
    "at RA 0": [(355.0, -3.0), (4.0, -4.0), (6.0, 5.0), (357.0, 6.0)],
    "around the north pole": [(10.0, 80.0), (100.0, 82.0), (200.0, 75.0), (300.0, 85.0)],
    "around the south pole": [(0.0, -60.0), (120.0, -70.0), (240.0, -65.0)],
    "not convex": [(40.0, 20.0), (60.0, 20.0), (60.0, 40.0), (50.0, 25.0), (40.0, 40.0)],
    "larger than a face": [(0.0, -30.0), (100.0, -40.0), (110.0, 50.0), (350.0, 45.0)],
    "tiny": [(150.0, 2.0), (150.02, 2.0), (150.02, 2.02), (150.0, 2.02)],
    "thin": [(80.0, -10.0), (120.0, -10.5), (120.0, -10.0)],
}


def is_inside(moc, ras_deg, decs_deg):
    places = pixels_at(MAX_ORDER, ras_deg, decs_deg)
    ranges = np.searchsorted(moc.ranges[:, 0], places, side="right") - 1
    return (ranges >= 0) & (places < moc.ranges[np.maximum(ranges, 0), 1])


@pytest.mark.parametrize("name", SHAPES)
def test_polygons_agree_with_mocpy(name):
    corners = SHAPES[name]
    ours = polygon_moc(corners)
    ras, decs = np.array(corners).T
    # mocpy keeps every cell that the edge touches: the truth is between it without and with them.
    theirs = MOC.from_polygon(ras * u.deg, decs * u.deg, max_depth=min(ours.order, 12))
    touching = theirs.sky_fraction * SKY_DEG2
    edge = MOC.from_polygon(ras * u.deg, decs * u.deg, max_depth=min(ours.order, 12) - 1)
    border = edge.sky_fraction * SKY_DEG2 - touching
    assert touching - 2.0 * border - 1e-9 <= ours.area_deg2 <= touching * (1.0 + 1e-9)
    inside = MOC.from_depth29_ranges(max_depth=MAX_ORDER, ranges=ours.ranges.astype(np.uint64))
    lost = inside.difference(theirs.degrade_to_order(max(theirs.max_order - 2, 0)))
    assert lost.sky_fraction == 0.0


@pytest.mark.parametrize("name", SHAPES)
def test_either_way_round_and_any_first_corner_is_the_same_polygon(name):
    corners = SHAPES[name]
    reference = polygon_moc(corners).ranges
    assert np.array_equal(polygon_moc(corners[::-1]).ranges, reference)
    assert np.array_equal(polygon_moc(corners[1:] + corners[:1]).ranges, reference)


@settings(deadline=None, max_examples=25)
@given(st.floats(0.0, 360.0), st.floats(-89.0, 89.0), st.floats(0.01, 40.0), st.integers(3, 12))
def test_a_regular_polygon_holds_its_centre_and_has_its_area(ra, dec, radius, n_corners):
    turns = 2.0 * np.pi * np.arange(n_corners) / n_corners
    corners = [around(ra, dec, radius, turn) for turn in turns]
    moc = polygon_moc(corners)
    assert is_inside(moc, [ra], [dec])[0]
    # Girard: each corner of a regular spherical polygon.
    half = np.pi / n_corners
    corner = 2.0 * np.arctan2(np.cos(half), np.sin(half) * np.cos(np.deg2rad(radius)))
    exact = np.rad2deg(np.rad2deg(n_corners * corner - (n_corners - 2) * np.pi))
    assert moc.area_deg2 == pytest.approx(exact, rel=6e-3)


def around(ra_deg, dec_deg, radius_deg, turn_rad):
    """A point at a distance and position angle from another."""
    dec, radius = np.deg2rad(dec_deg), np.deg2rad(radius_deg)
    sine = np.sin(dec) * np.cos(radius) + np.cos(dec) * np.sin(radius) * np.cos(turn_rad)
    east = np.sin(turn_rad) * np.sin(radius) * np.cos(dec)
    north = np.cos(radius) - np.sin(dec) * sine
    ra = ra_deg + np.rad2deg(np.arctan2(east, north))
    return float(ra % 360.0), float(np.rad2deg(np.arcsin(np.clip(sine, -1.0, 1.0))))


@pytest.mark.parametrize("containment", [0.5, 0.9, 0.99])
def test_an_area_holds_its_containment_evenly(containment):
    moc = moc_from_ascii("4/1210 1211 5/4848-4850")
    sky_map = MocConstraint(moc, containment).sky_map
    centres = sky_map.starts + (sky_map.ends - sky_map.starts) // 2
    ranges = np.searchsorted(moc.ranges[:, 0], centres, side="right") - 1
    inner = (ranges >= 0) & (centres < moc.ranges[np.maximum(ranges, 0), 1])
    assert sky_map.probabilities[inner].sum() == pytest.approx(containment)
    assert sky_map.probabilities.sum() == pytest.approx(1.0)
    assert np.ptp(sky_map.densities[inner]) < 1e-9 * sky_map.densities.max()
    assert np.ptp(sky_map.densities[~inner]) < 1e-9
    assert (sky_map.ends[:-1] == sky_map.starts[1:]).all()


def test_the_region_of_an_area_keeps_its_resolution_and_says_what_is_outside():
    region = make_region([MocConstraint(moc_from_ascii("4/1210 1211"))], order=9)
    assert region.order == 9
    assert region.n_pixels == 2 * 4**5
    assert region.outside == pytest.approx(0.1)
    assert region.area_deg2["90"] == pytest.approx(2 * SKY_DEG2 / 3072)
    assert "10.0 %" in " ".join(region.notes)


def test_an_area_that_holds_all_has_no_rest():
    whole = make_region([MocConstraint(moc_from_ascii("0/0-11"))])
    assert whole.n_pixels <= MOST_PIXELS
    assert whole.area_deg2["50"] == pytest.approx(SKY_DEG2 / 2.0)


def test_areas_multiply_with_other_constraints():
    square = PolygonConstraint(((10.0, 0.0), (20.0, 0.0), (20.0, 10.0), (10.0, 10.0)))
    cone = ConeConstraint(10.0, 5.0, 3.0, containment=0.9)
    region = make_region([square, cone])
    alone = make_region([cone])
    # Half of the cone is inside; there the odds are those of the flat area against its rest.
    assert region.area_deg2["90"] == pytest.approx(alone.area_deg2["90"] / 2.0, rel=0.05)
    assert region.peak_ra_deg >= 10.0
    assert region.probabilities.sum() + region.outside == pytest.approx(1.0)


def test_a_polygon_far_from_the_cone_still_gives_a_region():
    square = PolygonConstraint(((10.0, 0.0), (20.0, 0.0), (20.0, 10.0), (10.0, 10.0)))
    region = make_region([square, ConeConstraint(200.0, -50.0, 2.0)])
    assert region.probabilities.sum() > 0.9
