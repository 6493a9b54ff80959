import numpy as np
import pytest

from skytiles.region.constraints import ConeConstraint
from skytiles.region.galactic_prior import GalacticPrior
from skytiles.region.make_region import make_region
from skytiles.sphere.galactic import galactic_lons_lats_deg
from skytiles.sphere.healpix_door import n_pixels, pixel_centres


@pytest.fixture(scope="module")
def sky():
    """Galactic directions with their solid angles: fine near the plane."""
    lons = np.radians(np.arange(1.0, 360.0, 2.0))
    sines = np.sinh(np.linspace(-8, 8, 401)) / np.sinh(8.0)
    middles, steps = 0.5 * (sines[1:] + sines[:-1]), np.diff(sines)
    lon, z = (part.ravel() for part in np.meshgrid(lons, middles))
    cosines = np.sqrt(1 - z * z)
    vectors = np.stack([cosines * np.cos(lon), cosines * np.sin(lon), z], axis=-1)
    return vectors, np.repeat(steps, len(lons)) * np.radians(2.0)


def shares_nearer_than(prior, sky, limits_kpc):
    vectors, areas = sky
    edges = np.linspace(0.0, 24.0, 121)
    middles = 0.5 * (edges[1:] + edges[:-1])
    per_shell = np.zeros(len(middles))
    for j, distance in enumerate(middles):
        distances = np.full((len(vectors), 1), distance)
        densities = prior.densities_at(vectors, distances)[:, 0]
        per_shell[j] = (densities * areas).sum() * distance**2 * 0.2
    reached = np.concatenate([[0.0], np.cumsum(per_shell)])
    return np.interp(limits_kpc, edges, reached / reached[-1]), reached[-1]


def test_distances_of_galactic_core_collapses(authority, sky):
    # Adams et al. 2013, ApJ 778, 164, distance figure; published.
    row = authority["adams_cdf"]
    found, total = shares_nearer_than(GalacticPrior(), sky, row["inputs"]["distances_kpc"])
    assert found == pytest.approx(row["expected"], abs=row["tolerance"])
    assert total == pytest.approx(GalacticPrior().disc_integral_kpc3(), rel=0.01)


def test_columns_integrate_to_the_whole_disc(sky):
    prior = GalacticPrior()
    vectors, areas = sky
    total = (prior._columns(vectors) * areas).sum()
    assert total == pytest.approx(prior.disc_integral_kpc3(), rel=0.002)


def test_shares_near_the_plane_and_the_centre(authority, sky):
    # 40,000 draws of the same density model; recomputed.
    row = authority["model_sky"]
    vectors, areas = sky
    weights = GalacticPrior()._columns(vectors) * areas
    weights /= weights.sum()
    latitudes = np.degrees(np.arcsin(vectors[:, 2]))
    longitudes = np.degrees(np.arctan2(vectors[:, 1], vectors[:, 0]))
    found = [weights[np.abs(latitudes) < b].sum() for b in row["inputs"]["b_below_deg"]]
    found += [weights[np.abs(longitudes) < lon].sum() for lon in row["inputs"]["l_below_deg"]]
    assert found == pytest.approx(row["expected"], abs=row["tolerance"])


def test_a_column_agrees_with_a_fine_sum():
    prior = GalacticPrior()
    ras, decs = pixel_centres(2, np.arange(n_pixels(2)))
    found = prior.column_densities_kpc3(ras, decs)
    lons, lats = (np.radians(part) for part in galactic_lons_lats_deg(ras, decs))
    cosines = np.cos(lats)
    vectors = np.stack([cosines * np.cos(lons), cosines * np.sin(lons), np.sin(lats)], axis=-1)
    distances = np.linspace(0.0, 24.0, 240_001)
    for j in range(0, len(ras), 7):
        densities = prior.densities_at(vectors[j : j + 1], distances[None])[0]
        expected = np.trapezoid(densities * distances**2, distances)
        assert found[j] == pytest.approx(expected, rel=1e-3)


def test_the_mean_over_the_sky_is_one():
    ras, decs = pixel_centres(7, np.arange(n_pixels(7)))
    assert GalacticPrior().densities(ras, decs).mean() == pytest.approx(1.0, abs=0.02)


def test_the_floor_leaves_no_direction_out():
    ras, decs = np.array([192.9, 12.9]), np.array([27.1, -27.1])
    assert (GalacticPrior().densities(ras, decs) >= 0.01).all()


def test_the_prior_pulls_a_wide_cone_into_the_plane():
    cone = ConeConstraint(283.0, 5.0, 8.0)
    flat, galactic = make_region([cone]), make_region([cone], prior="galactic")
    _, latitude = galactic_lons_lats_deg([galactic.peak_ra_deg], [galactic.peak_dec_deg])
    assert abs(latitude[0]) < 1.0
    assert galactic.area_deg2["90"] < 0.5 * flat.area_deg2["90"]
    assert "dust" in galactic.notes[-1]
