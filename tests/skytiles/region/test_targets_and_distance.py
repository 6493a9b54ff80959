"""Target lists, and what is known of the distance."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from skytiles.errors import MapFileError, RegionError
from skytiles.region.constraint_json import constraint_from_json
from skytiles.region.constraints import ConeConstraint
from skytiles.region.distance import DistanceConstraint, distance_moduli_mag, pixel_distances
from skytiles.region.galactic_prior import GalacticPrior
from skytiles.region.make_region import make_region
from skytiles.region.mesh import product_map
from skytiles.region.sky_map import SkyMap
from skytiles.region.targets import Target, TargetListConstraint
from skytiles.sphere.angles import separations_deg, unit_vectors
from skytiles.sphere.healpix_door import pixel_centres

CONE = ConeConstraint(100.0, 10.0, 5.0, containment=0.9)
PAIR = (
    Target(99.0, 11.0, weight=3.0, radius_deg=0.05, distance_mpc=40.0),
    Target(101.0, 9.0, weight=1.0, radius_deg=0.05, distance_mpc=160.0),
)


def held(sky_map, target, *, radius_deg=0.5):
    """Probability within a radius of a target."""
    total = 0.0
    for order in np.unique(sky_map.orders):
        chosen = sky_map.orders == order
        ras, decs = pixel_centres(int(order), sky_map.pixels[chosen])
        is_near = separations_deg(target.ra_deg, target.dec_deg, ras, decs) < radius_deg
        total += float(sky_map.probabilities[chosen][is_near].sum())
    return total


@pytest.mark.parametrize("completeness", [0.0, 0.3, 0.8, 1.0])
@pytest.mark.parametrize("constraints", [(), (CONE,)])
def test_a_list_holds_its_completeness(completeness, constraints):
    listed = TargetListConstraint(PAIR, completeness=completeness)
    sky_map = product_map([*constraints, listed], None)
    smooth = product_map([*constraints, TargetListConstraint(PAIR, completeness=0.0)], None)
    beside = sum(held(smooth, target) for target in PAIR)
    total = sum(held(sky_map, target) for target in PAIR)
    assert total == pytest.approx(completeness + (1.0 - completeness) * beside, abs=2e-3)
    assert sky_map.probabilities.sum() == pytest.approx(1.0)


def test_targets_alone_are_a_density_of_mean_one():
    targets = (Target(10.0, 20.0, radius_deg=5.0), Target(90.0, -80.0, 2.0, radius_deg=3.0))
    ras, decs = pixel_centres(7, np.arange(12 << 14))
    densities = TargetListConstraint(targets).densities(unit_vectors(ras, decs))
    assert densities.mean() == pytest.approx(1.0, abs=1e-3)


def test_targets_share_by_their_weights():
    sky_map = product_map([TargetListConstraint(PAIR, completeness=1.0)], None)
    assert held(sky_map, PAIR[0]) / held(sky_map, PAIR[1]) == pytest.approx(3.0, rel=1e-3)


def test_a_target_far_from_the_cone_holds_next_to_nothing():
    far = TargetListConstraint((Target(280.0, -10.0, radius_deg=0.05),), completeness=0.9)
    sky_map = product_map([CONE, far], None)
    assert held(sky_map, far.targets[0]) < 0.01
    assert make_region([CONE, far]).probabilities.sum() > 0.9


def test_an_even_list_over_the_whole_sky_is_worth_its_completeness():
    rng = np.random.default_rng(3)
    ras, decs = rng.uniform(0, 360, 1500), np.rad2deg(np.arcsin(rng.uniform(-1, 1, 1500)))
    wide = ConeConstraint(100.0, 10.0, 30.0, containment=0.9)
    targets = tuple(Target(ra, dec, radius_deg=0.3) for ra, dec in zip(ras, decs, strict=True))
    blended = product_map([wide, TargetListConstraint(targets, completeness=0.6)], None)
    alone = product_map([wide], None)
    inside = Target(100.0, 10.0)
    # Within the cone the list has Poisson noise: some 60 targets.
    near = held(blended, inside, radius_deg=30.0)
    assert near == pytest.approx(held(alone, inside, radius_deg=30.0), abs=0.06)


def test_a_radius_holds_its_containment():
    for containment, radius_deg in ((0.68, 1.0), (0.9, 4.0)):
        target = Target(10.0, -89.0, radius_deg=radius_deg)
        listed = TargetListConstraint((target,), completeness=1.0, containment=containment)
        share = held(product_map([listed], None), target, radius_deg=radius_deg)
        assert share == pytest.approx(containment, abs=0.02)


def test_the_smooth_part_follows_the_prior():
    listed = TargetListConstraint(PAIR, completeness=0.5)
    galactic = product_map([listed], GalacticPrior())
    towards, away = Target(266.4, -29.0), Target(192.9, 27.1)
    assert held(galactic, towards, radius_deg=10.0) > 10 * held(galactic, away, radius_deg=10.0)
    assert sum(held(galactic, target) for target in PAIR) == pytest.approx(0.5, abs=0.01)


def test_a_distance_weighs_the_targets_that_have_one():
    near = DistanceConstraint(median_mpc=40.0, factor=1.25)
    listed = TargetListConstraint((*PAIR, Target(103.0, 8.0)), completeness=1.0)
    weights = listed.weights((near,))
    # ln 4 / ln 1.25 = 6.21 sigma away: exp(-19.3).
    assert weights[1] / weights[0] == pytest.approx(np.exp(-0.5 * 6.2126**2) / 3.0, rel=1e-3)
    assert weights[2] / weights[0] == pytest.approx(1.0 / 3.0)
    sky_map = product_map([listed, near], None)
    assert held(sky_map, PAIR[1]) < 1e-4


def test_a_distance_says_nothing_of_the_direction():
    with_distance = make_region([CONE, DistanceConstraint(10.0, 2.0)])
    alone = make_region([CONE])
    assert np.array_equal(with_distance.probabilities, alone.probabilities)
    assert with_distance.peak_ra_deg == alone.peak_ra_deg
    with pytest.raises(RegionError, match="direction"):
        make_region([DistanceConstraint(10.0, 2.0)])


def test_a_distance_as_a_modulus():
    # 10 pc is modulus 0, and a factor of 10 is 5 magnitudes.
    assert distance_moduli_mag([1e-5, 1e-4, 0.01]) == pytest.approx([0.0, 5.0, 15.0])
    distance = DistanceConstraint(median_mpc=0.01, factor=10.0**0.2)
    assert (distance.modulus_mag, distance.modulus_sigma_mag) == pytest.approx((15.0, 1.0))
    assert distance.likelihoods([0.01, 0.01 * 10.0**0.2, np.nan]) == pytest.approx(
        [1.0, np.exp(-0.5), np.nan], nan_ok=True
    )


def distance_map(mus, sigmas):
    n = len(mus)
    return SkyMap(
        orders=np.zeros(n, dtype=np.int64),
        pixels=np.arange(n),
        probabilities=np.full(n, 1.0 / n),
        distances={
            "DISTMU": np.array(mus, dtype=float),
            "DISTSIGMA": np.array(sigmas, dtype=float),
        },
    )


def test_pixels_have_the_mean_and_spread_of_their_column():
    mus, sigmas = [100.0, 40.0, 5.0, -30.0], [5.0, 10.0, 20.0, 40.0]
    found = pixel_distances(distance_map(mus, sigmas), 2, 16 * np.arange(4) + 3)
    for mu, sigma, median, factor in zip(mus, sigmas, *found, strict=True):
        grid = np.linspace(0.0, max(mu, 0.0) + 12.0 * sigma, 200_001)
        shares = grid**2 * np.exp(-0.5 * ((grid - mu) / sigma) ** 2)
        mean = (shares * grid).sum() / shares.sum()
        spread = np.sqrt((shares * (grid - mean) ** 2).sum() / shares.sum())
        # Mean and spread of a log-normal.
        width = np.log(factor)
        assert median * np.exp(width**2 / 2.0) == pytest.approx(mean, rel=1e-4)
        assert mean * np.sqrt(np.expm1(width**2)) == pytest.approx(spread, rel=1e-3)


def test_pixels_of_which_a_map_says_nothing_have_no_distance():
    sky_map = distance_map([np.inf, np.nan, 40.0], [1.0, 1.0, 0.0])
    medians, factors = pixel_distances(sky_map, 0, [0, 1, 2, 11])
    assert np.isnan(medians).all()
    assert np.isnan(factors).all()
    with pytest.raises(MapFileError, match="no distances"):
        pixel_distances(SkyMap(np.array([0]), np.array([0]), np.array([1.0])), 0, [0])


@settings(deadline=None, max_examples=40)
@given(
    st.lists(
        st.fixed_dictionaries(
            {"ra_deg": st.floats(0, 360), "dec_deg": st.floats(-90, 90)},
            optional={
                "weight": st.floats(1e-6, 1e6),
                "radius_deg": st.floats(0.005, 30),
                "distance_mpc": st.floats(1e-3, 1e4),
            },
        ),
        min_size=1,
        max_size=6,
    )
)
def test_any_list_gives_a_map_of_the_whole_sky(targets):
    listed = constraint_from_json({"type": "targets", "targets": targets, "completeness": 0.7})
    assert constraint_from_json(listed.to_json()) == listed
    sky_map = product_map([listed], None)
    assert sky_map.probabilities.sum() == pytest.approx(1.0)
    assert (sky_map.probabilities > 0.0).all()
