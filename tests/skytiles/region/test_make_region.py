import healpy
import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from skytiles.errors import RegionError
from skytiles.region import make_region as module
from skytiles.region import mesh
from skytiles.region.constraints import (
    ConeConstraint,
    EllipseConstraint,
    MapConstraint,
    radius_in_sigmas,
)
from skytiles.region.make_region import make_region, order_for_side
from skytiles.region.read_map import read_sky_map
from skytiles.region.region import describe_region
from skytiles.region.sky_map import SkyMap
from skytiles.sphere.angles import separations_deg
from skytiles.sphere.healpix_door import pixel_area_deg2, pixel_centres
from skytiles.sphere.solid_angle import SKY_DEG2


@pytest.fixture(scope="session")
def example(example_bytes):
    return MapConstraint(sky_map=read_sky_map(example_bytes), file="invented.fits")


def map_of(order, probabilities):
    """A map of all pixels of an order."""
    n = len(probabilities)
    return MapConstraint(
        sky_map=SkyMap(
            orders=np.full(n, order), pixels=np.arange(n), probabilities=np.array(probabilities)
        )
    )


def all_pixels(sky_map, order):
    """Probabilities on all pixels of an order by brute force: cells split or summed."""
    values = np.zeros(12 << 2 * order)
    for o, pixel, probability in zip(
        sky_map.orders, sky_map.pixels, sky_map.probabilities, strict=True
    ):
        if o >= order:
            values[pixel >> 2 * (o - order)] += probability
        else:
            n_parts = 4 ** (order - o)
            values[pixel * n_parts : (pixel + 1) * n_parts] += probability / n_parts
    return values


def test_a_radius_of_68_and_of_90_per_cent_in_sigmas():
    # 68 %: 1.515 sigma; 90 %: 2.146 sigma (integral of the Gaussian).
    assert radius_in_sigmas(0.68) == pytest.approx(1.515, abs=5e-4)
    assert radius_in_sigmas(0.6827) == pytest.approx(1.515, abs=5e-4)
    assert radius_in_sigmas(0.9) == pytest.approx(2.146, abs=5e-4)
    assert radius_in_sigmas(1 - np.exp(-2.0)) == pytest.approx(2.0)


@pytest.mark.parametrize("dec", [0.0, 89.5, -60.0])
def test_credible_areas_of_a_round_gaussian(authority, dec):
    # fixtures/authority, gauss_area: analytic; recomputed.
    row = authority["gauss_area"]
    sigma = row["inputs"]["sigma_deg"]
    cone = ConeConstraint(0.2, dec, sigma * radius_in_sigmas(0.68))
    areas = make_region([cone]).area_deg2
    expected = dict(zip(row["inputs"]["shares"], row["expected"], strict=True))
    assert areas["50"] == pytest.approx(expected[0.5], rel=row["tolerance"])
    assert areas["90"] == pytest.approx(expected[0.9], rel=row["tolerance"])


@pytest.mark.parametrize("containment", [0.5, 0.68, 0.9])
@pytest.mark.parametrize("radius", [0.3, 4.0, 25.0])
def test_a_cone_holds_what_it_states(radius, containment):
    cone = ConeConstraint(359.9, 30.0, radius, containment=containment)
    region = make_region([cone], order=9 if radius > 1 else 11)
    ras, decs = pixel_centres(region.order, region.pixels)
    is_inside = separations_deg(359.9, 30.0, ras, decs) <= radius
    stated = 0.6827 if containment == 0.68 else containment
    # Pixels on the circle count whole or not at all.
    assert region.probabilities[is_inside].sum() == pytest.approx(stated, abs=0.02)


def test_the_peak_of_a_cone_is_its_centre():
    region = make_region([ConeConstraint(123.4, -56.7, 3.0)])
    assert (region.peak_ra_deg, region.peak_dec_deg) == (123.4, -56.7)


def test_an_ellipse_has_its_axes_and_its_angle():
    # 2 : 1, longer towards the north-east; shares along the axes are equal at 2 a and 1 a.
    ellipse = EllipseConstraint(10.0, 0.0, 8.0, 4.0, position_angle_deg=45.0)
    at_major = ellipse.log_likelihoods(np.array([10.0 + 8.0 / 2**0.5]), np.array([8.0 / 2**0.5]))
    at_minor = ellipse.log_likelihoods(np.array([10.0 + 4.0 / 2**0.5]), np.array([-4.0 / 2**0.5]))
    expected = -0.5 * radius_in_sigmas(0.68) ** 2
    assert at_major[0] == pytest.approx(expected, rel=0.01)
    assert at_minor[0] == pytest.approx(expected, rel=0.01)
    area = make_region([ellipse]).area_deg2["90"]
    analytic = 2 * np.pi * 8.0 * 4.0 / radius_in_sigmas(0.68) ** 2 * np.log(10)
    assert area == pytest.approx(analytic, rel=0.01)


def test_a_systematic_error_adds_in_quadrature():
    with_it = make_region([ConeConstraint(10.0, 10.0, 3.0, systematic_deg=4.0)])
    alone = make_region([ConeConstraint(10.0, 10.0, 5.0)])
    assert with_it.area_deg2 == alone.area_deg2


def test_a_round_ellipse_is_a_cone():
    cone = make_region([ConeConstraint(10.0, 80.0, 5.0)])
    ellipse = make_region([EllipseConstraint(10.0, 80.0, 5.0, 5.0, 77.0)])
    assert ellipse.area_deg2["90"] == pytest.approx(cone.area_deg2["90"], rel=1e-6)
    assert np.array_equal(ellipse.pixels, cone.pixels)


@pytest.mark.parametrize("order", [6, 7, 8])
def test_a_map_is_split_and_summed_as_by_brute_force(example, order):
    region = make_region([example], order=order)
    expected = all_pixels(example.sky_map, order)
    assert region.order == order
    assert region.probabilities == pytest.approx(expected[region.pixels], rel=1e-12)
    # No pixel outside is denser than any inside, beyond those of the cell on the border.
    outside = np.delete(expected, region.pixels)
    assert outside.max() <= region.probabilities.min() * (1 + 1e-9)
    assert region.outside == pytest.approx(outside.sum(), abs=1e-12)
    assert 0.0 < region.outside <= 0.001


def test_areas_and_peak_of_a_map_come_from_its_own_cells(example):
    # By hand: sort the cells by density, add up areas until the share is reached.
    sky_map = example.sky_map
    densities = sky_map.probabilities * 4.0**sky_map.orders
    sequence = np.argsort(-densities)
    reached = np.cumsum(sky_map.probabilities[sequence])
    areas = np.cumsum(SKY_DEG2 / 12 / 4.0 ** sky_map.orders[sequence])
    for order in (6, 9):
        region = make_region([example], order=order)
        for key, share in (("50", 0.5), ("90", 0.9), ("99", 0.99)):
            last = int(np.searchsorted(reached, share))
            assert areas[last - 1] <= region.area_deg2[key] <= areas[last]
        best = sequence[0]
        lon, lat = healpy.pix2ang(
            1 << sky_map.orders[best], sky_map.pixels[best], nest=True, lonlat=True
        )
        assert separations_deg(region.peak_ra_deg, region.peak_dec_deg, lon, lat) < 1e-9


def test_the_working_order_is_lowered_and_said():
    wide = ConeConstraint(0.0, 0.0, 40.0)
    region = make_region([wide])
    assert region.order == 7
    assert region.n_pixels <= module.MOST_PIXELS
    assert "lowered from 8 to 7" in region.notes[0]


@pytest.mark.parametrize(
    ("side", "order"), [(None, 8), (5.0, 8), (0.92, 8), (0.9, 9), (0.4, 10), (0.01, 10)]
)
def test_pixels_are_a_quarter_of_the_smallest_side(side, order):
    # Sides of pixels: 13.74, 6.871, 3.435 arcmin (Gorski et al. 2005, Table 1).
    assert order_for_side(side) == order


def test_frames_smaller_than_four_pixels_are_mentioned():
    region = make_region([ConeConstraint(0.0, 0.0, 1.0)], smallest_side_deg=0.01)
    assert region.order == 10
    assert "fraction" in region.notes[0]


@settings(max_examples=40, deadline=None)
@given(
    st.floats(0, 360),
    st.floats(-90, 90),
    st.floats(1e-4, 90),
    st.floats(0.05, 0.99),
    st.floats(0, 50),
)
def test_what_is_inside_and_outside_adds_up(ra, dec, radius, containment, systematic):
    cone = ConeConstraint(ra, dec, radius, containment=containment, systematic_deg=systematic)
    region = make_region([cone])
    assert region.probabilities.sum() + region.outside == pytest.approx(1.0, abs=1e-9)
    assert 0.0 <= region.outside <= 0.001 + 1e-9
    assert (np.diff(region.pixels) > 0).all()
    assert (region.probabilities >= 0).all()
    assert 1 <= region.n_pixels <= module.MOST_PIXELS
    assert region.area_deg2["50"] <= region.area_deg2["90"] <= region.area_deg2["99"] <= SKY_DEG2


def test_a_product_is_that_of_the_densities():
    # Two Gaussians of equal width: half the variance, in the middle.
    first, second = ConeConstraint(99.0, 0.0, 4.0), ConeConstraint(101.0, 0.0, 4.0)
    region = make_region([first, second], order=9)
    single = make_region([ConeConstraint(100.0, 0.0, 4.0 / 2**0.5)], order=9)
    assert region.area_deg2["90"] == pytest.approx(single.area_deg2["90"], rel=0.01)
    assert separations_deg(region.peak_ra_deg, region.peak_dec_deg, 100.0, 0.0) < 0.3


def test_a_map_times_a_cone_as_by_brute_force(example):
    ra, dec = make_region([example]).peak_ra_deg, make_region([example]).peak_dec_deg
    cone = ConeConstraint(ra, dec, 10.0)
    region = make_region([example, cone], order=8)
    pixels = np.arange(12 << 16)
    ras, decs = healpy.pix2ang(256, pixels, nest=True, lonlat=True)
    chords = 2 * np.sin(np.radians(separations_deg(ra, dec, ras, decs)) / 2)
    sigma = 2 * np.sin(np.radians(10.0) / 2) / radius_in_sigmas(0.68)
    expected = all_pixels(example.sky_map, 8) * np.exp(-0.5 * (chords / sigma) ** 2)
    expected /= expected.sum()
    # The mesh follows the Gaussian in steps of a twelfth of its sigma.
    assert np.abs(region.probabilities - expected[region.pixels]).sum() < 0.05
    assert region.total_probability == example.sky_map.total_probability


def test_a_huge_map_is_multiplied_at_a_coarser_order_and_said(monkeypatch, example):
    cone = ConeConstraint(10.0, 20.0, 30.0)
    fine = make_region([example, cone])
    monkeypatch.setattr(mesh, "_MANY_CELLS", 100)
    monkeypatch.setattr(mesh, "COARSER_ORDER", 7)
    coarse = make_region([example, cone])
    assert "order" in coarse.notes[-1]
    assert coarse.area_deg2["90"] == pytest.approx(fine.area_deg2["90"], rel=0.02)
    assert make_region([example]).notes == ()


def test_constraints_that_contradict_each_other_still_give_a_region():
    region = make_region([ConeConstraint(0.0, 0.0, 0.5), ConeConstraint(180.0, 0.0, 0.5)])
    ras, _ = pixel_centres(region.order, region.pixels)
    near_first = region.probabilities[np.cos(np.radians(ras)) > 0.9].sum()
    near_second = region.probabilities[np.cos(np.radians(ras)) < -0.9].sum()
    assert near_first == pytest.approx(near_second, rel=0.05)
    assert near_first > 0.3


def test_no_constraint_is_a_hard_zero():
    # A map with nothing in half of the sky, and a narrow cone there.
    half = map_of(0, [0.25] * 4 + [0.0] * 8)
    region = make_region([half, ConeConstraint(45.0, -80.0, 0.5)])
    assert region.peak_dec_deg < -70.0


def test_a_flat_map_gives_the_whole_sky():
    region = make_region([map_of(0, [1 / 12] * 12)])
    assert region.area_deg2["90"] == pytest.approx(0.9 * SKY_DEG2)
    assert region.n_pixels * pixel_area_deg2(region.order) == pytest.approx(SKY_DEG2)


def test_a_map_with_one_cell_gives_that_cell():
    sky_map = SkyMap(orders=np.array([3]), pixels=np.array([100]), probabilities=np.array([1.0]))
    region = make_region([MapConstraint(sky_map=sky_map)])
    assert region.n_pixels == 4**5
    assert region.outside == pytest.approx(0.0, abs=1e-12)


def test_the_description_is_what_the_command_prints(example):
    described = describe_region(make_region([example]))
    assert {"area_deg2", "peak", "order", "n_pixels", "total_probability"} <= set(described)
    assert set(described["area_deg2"]) == {"50", "90", "99"}
    assert set(described["peak"]) == {"ra_deg", "dec_deg"}


@pytest.mark.parametrize(
    "wrong", [{"prior": "bulge"}, {"order": 14}, {"order": -1}, {"constraints": []}]
)
def test_impossible_requests_are_refused(wrong):
    request = {"constraints": [ConeConstraint(0.0, 0.0, 1.0)]} | wrong
    with pytest.raises(RegionError) as refusal:
        make_region(request.pop("constraints"), **request)
    assert refusal.value.advice
