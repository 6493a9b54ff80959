"""Distances and dust along lines of sight, against published curves and plain integrals."""

import numpy as np
import pytest

from skytiles.region.galactic_prior import GalacticPrior
from skytiles.region.sightlines import sightlines
from skytiles.sphere.galactic import galactic_lons_lats_deg
from skytiles.sphere.healpix_door import pixel_centres, pixels_at
from tests.skytiles.ledger.plain_galaxy import draw_disc_distances, draw_sources

ONLY_DISC = GalacticPrior(clouds=(), floor=0.0)


@pytest.fixture(scope="module")
def disc():
    """Lines within 12 degrees of the plane, each with what is in it."""
    ras, decs = pixel_centres(7, np.arange(12 << 14))
    _, latitudes = galactic_lons_lats_deg(ras, decs)
    near = np.abs(latitudes) < 12.0
    ras, decs = ras[near], decs[near]
    return sightlines(ONLY_DISC, ras, decs), ONLY_DISC.column_densities_kpc3(ras, decs)


def test_distances_of_galactic_core_collapses(authority, disc):
    # Adams et al. 2013, ApJ 778, 164, distance figure; published.
    row = authority["adams_cdf"]
    lines, columns = disc
    reached = np.cumsum(columns @ lines.shares) / columns.sum()
    ends_kpc = 10.0 ** ((lines.distance_moduli_mag + 0.05) / 5.0 - 2.0)
    found = np.interp(row["inputs"]["distances_kpc"], ends_kpc, reached)
    assert found == pytest.approx(row["expected"], abs=row["tolerance"])


def test_extinctions_of_galactic_core_collapses(authority, disc):
    # 40,000 draws of the same density and dust; recomputed.
    row = authority["model_av"]
    lines, columns = disc
    weights = (columns[:, None] * lines.shares).ravel()
    extinctions = lines.extinctions_mag.ravel()
    sequence = np.argsort(extinctions)
    reached = np.cumsum(weights[sequence]) / weights.sum()
    found = extinctions[sequence][np.searchsorted(reached, row["inputs"]["shares"])]
    tolerances = np.maximum(0.03 * np.array(row["expected"]), row["tolerance"])
    assert np.all(np.abs(found - row["expected"]) < tolerances)


def test_shares_of_a_line_sum_to_one_and_dust_only_grows(disc):
    lines, _ = disc
    np.testing.assert_allclose(lines.shares.sum(axis=1), 1.0, rtol=0, atol=1e-5)
    assert np.all(np.diff(lines.extinctions_mag, axis=1) >= 0.0)
    assert np.all(lines.extinctions_mag >= 0.0)


@pytest.mark.parametrize("place", [(266.4, -28.9), (283.0, 2.0), (83.0, 22.0), (190.0, 60.0)])
def test_a_line_agrees_with_drawn_sources(place):
    rng = np.random.default_rng(4)
    distances_kpc, extinctions = draw_sources(rng, *place, 100_000)
    lines = sightlines(GalacticPrior(clouds=()), [place[0]], [place[1]])
    reached = np.cumsum(lines.shares[0])
    ends_kpc = 10.0 ** ((lines.distance_moduli_mag + 0.05) / 5.0 - 2.0)
    for share in (0.1, 0.3, 0.5, 0.7, 0.9):
        found = np.interp(np.quantile(distances_kpc, share), ends_kpc, reached)
        # The oracle keeps 7 % for the clouds, which these directions do not have.
        assert found == pytest.approx(share, abs=0.012)
    mean = float(lines.shares[0] @ lines.extinctions_mag[0])
    assert mean == pytest.approx(extinctions.mean(), rel=0.02, abs=0.01)


def test_a_magellanic_cloud_is_as_far_as_it_is():
    # 50 and 62 kpc: distance moduli 18.49 and 18.96.
    lines = sightlines(GalacticPrior(), [80.9, 13.2], [-69.8, -72.8])
    medians = [
        lines.distance_moduli_mag[np.searchsorted(np.cumsum(shares), 0.5)]
        for shares in lines.shares
    ]
    assert medians == pytest.approx([18.49, 18.96], abs=0.06)


def test_off_the_plane_the_floor_has_the_distances_of_the_whole_disc():
    lines = sightlines(GalacticPrior(disc_height_kpc=0.02, clouds=()), [192.9], [27.1])
    far = lines.distance_moduli_mag > 13.0
    drawn = draw_disc_distances(np.random.default_rng(5), 200_000)
    expected = (5.0 * np.log10(100.0 * drawn) > 13.0).mean()
    floor = lines.shares[0][far].sum()
    assert 0.5 < floor <= expected + 0.01


def test_a_pixel_and_its_centre_are_one_line():
    pixel = pixels_at(8, [283.0], [2.0])
    ras, decs = pixel_centres(8, pixel)
    one, again = (sightlines(GalacticPrior(), ras, decs) for _ in range(2))
    np.testing.assert_array_equal(one.shares, again.shares)
