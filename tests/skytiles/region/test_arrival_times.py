"""Arrival times against published geometry, brute force, astropy and random truths."""

import json
from pathlib import Path

import numpy as np
import pytest
from astropy import units as u
from astropy.coordinates import GCRS, ITRS, CartesianRepresentation, EarthLocation
from astropy.time import Time
from astropy.utils import iers
from scipy.integrate import quad
from scipy.stats import norm

from skytiles.region.arrival_times_json import arrival_times_from_json
from skytiles.region.mesh import product_map
from skytiles.region.nearest_direction import nearest_direction
from skytiles.sphere.angles import ras_decs_deg, unit_vectors
from skytiles.sphere.earth_places import (
    LIGHT_M_PER_S,
    WGS84_FLATTENING,
    WGS84_RADIUS_M,
    earth_to_icrs_matrix,
    place_vectors_m,
)
from skytiles.sphere.healpix_door import pixel_centres
from skytiles.sphere.solid_angle import SKY_DEG2
from tests.skytiles.region.bursts import PLACES, arrivals_s, burst, burst_json

FILE = Path(__file__).resolve().parents[3] / "fixtures" / "authority" / "arrival_times.json"
ROWS = {row["id"]: row for row in json.loads(FILE.read_text())["rows"]}
MS = 1e3


def vectors_of(sky_map):
    vectors = np.empty((sky_map.n_cells, 3))
    for order in np.unique(sky_map.orders):
        chosen = sky_map.orders == order
        vectors[chosen] = unit_vectors(*pixel_centres(int(order), sky_map.pixels[chosen]))
    return vectors


def pair_of_baseline(baseline_ms, dt_ms, sigma_ms):
    """Two stations on the equator, symmetric about Greenwich, dt = t_second - t_first."""
    half = np.rad2deg(np.arcsin(baseline_ms / MS * LIGHT_M_PER_S / 2.0 / WGS84_RADIUS_M))
    sigma_s = sigma_ms / MS / np.sqrt(2.0)
    places = {"west": (-half, 0.0), "east": (half, dt_ms / MS)}
    stations = [
        {
            "name": name,
            "longitude_deg": longitude,
            "latitude_deg": 0.0,
            "arrival_s": time_s,
            "sigma_s": sigma_s,
        }
        for name, (longitude, time_s) in places.items()
    ]
    return arrival_times_from_json(
        {
            "type": "arrival times",
            "reference_time": "2027-03-14T05:06:07Z",
            "stations": stations,
        }
    )


def test_light_across_the_earth_takes_43_ms():
    row = ROWS["earth_ms"]
    radii_m = [
        row["inputs"]["mean_radius_km"] * 1e3,
        WGS84_RADIUS_M,
        WGS84_RADIUS_M * (1.0 - WGS84_FLATTENING),
    ]
    assert [2.0 * r / LIGHT_M_PER_S * MS for r in radii_m] == pytest.approx(
        row["expected"], abs=row["tolerance"]
    )
    pole = place_vectors_m(0.0, 90.0, 0.0)
    assert 2.0 * pole[2] / LIGHT_M_PER_S * MS == pytest.approx(row["expected"][2], abs=1e-3)


def test_baselines_of_the_table():
    row = ROWS["baselines"]
    places = row["inputs"]["stations"]
    assert {name: tuple(place) for name, place in places.items()} == PLACES
    vectors = {name: place_vectors_m(*place, 0.0) for name, place in places.items()}
    found = [
        np.linalg.norm(vectors[pair[0]] - vectors[pair[1]]) / LIGHT_M_PER_S * MS
        for pair in row["inputs"]["pairs"]
    ]
    assert found == pytest.approx(row["expected"], abs=row["tolerance"])


def test_places_are_those_of_a_general_library():
    rng = np.random.default_rng(3)
    lons, lats = rng.uniform(-180, 180, 200), rng.uniform(-90, 90, 200)
    heights = rng.uniform(-3000, 9000, 200)
    peer = EarthLocation.from_geodetic(lons * u.deg, lats * u.deg, heights * u.m)
    expected = np.stack([peer.x.value, peer.y.value, peer.z.value], axis=-1)
    assert np.abs(place_vectors_m(lons, lats, heights) - expected).max() < 1e-5


def test_the_ring_of_the_table():
    row = ROWS["ring_basic"]
    burst_of_two = pair_of_baseline(*row["inputs"].values())
    theta, low, high, area_deg2, share = row["expected"]
    # East is reached later: the source is on the western side of the baseline.
    axis = burst_of_two.delays_s[0] - burst_of_two.delays_s[1]
    axis /= np.linalg.norm(axis)
    across = np.linalg.svd(axis[None])[2][1]

    def excess(angle_deg):
        angle = np.deg2rad(angle_deg)
        return burst_of_two.excess((np.cos(angle) * axis + np.sin(angle) * across)[None])[0]

    assert excess(theta) == pytest.approx(0.0, abs=1e-8)
    assert excess(low) == pytest.approx(1.0, abs=1e-4)
    assert excess(high) == pytest.approx(1.0, abs=1e-4)
    sky_map = product_map([burst_of_two], None)
    angles = np.rad2deg(np.arccos(vectors_of(sky_map) @ axis))
    is_inside = (angles >= low) & (angles <= high)
    # Cells of a third of the width end at the edge to 1 %.
    assert sky_map.probabilities[is_inside].sum() == pytest.approx(share, abs=0.01)
    areas = SKY_DEG2 / 12.0 * 4.0 ** -sky_map.orders[is_inside].astype(float)
    assert areas.sum() == pytest.approx(area_deg2, rel=0.01)


def test_the_times_of_the_table():
    row = ROWS["ring_truth"]
    inputs, expected = row["inputs"], row["expected"]
    matrix = earth_to_icrs_matrix(61478.0)
    over = unit_vectors(inputs["over_longitude_deg"], inputs["over_latitude_deg"])
    times_ms = {
        name: -(matrix @ over) @ (matrix @ place_vectors_m(*place, 0.0)) / LIGHT_M_PER_S * MS
        for name, place in PLACES.items()
    }
    times_ms["A-B"] = times_ms["A"] - times_ms["B"]
    assert times_ms == pytest.approx(expected, abs=row["tolerance"])
    a_to_b = place_vectors_m(*PLACES["B"], 0.0) - place_vectors_m(*PLACES["A"], 0.0)
    angle_deg = np.rad2deg(np.arccos(over @ a_to_b / np.linalg.norm(a_to_b)))
    assert angle_deg == pytest.approx(row["angle_to_ab_deg"], abs=1e-4)


@pytest.mark.parametrize(
    "iso", ["2018-06-01T03:00:00", "2021-12-31T23:59:00", "2024-03-14T20:00:00"]
)
def test_the_earth_stands_as_a_general_library_says(iso):
    time = Time(iso, scale="utc")
    with iers.conf.set_temp("auto_download", False):
        peer = [
            ITRS(CartesianRepresentation(*axis), obstime=time)
            .transform_to(GCRS(obstime=time))
            .cartesian.xyz.value
            for axis in np.eye(3)
        ]
    matrix = earth_to_icrs_matrix(time.mjd)
    # 0.05 s of the Earth's turn is 0.8 arcsec; polar motion 0.5 arcsec.
    assert np.rad2deg(np.abs(matrix - np.array(peer).T).max()) * 3600 < 1.5
    assert matrix @ matrix.T == pytest.approx(np.eye(3), abs=1e-12)


def test_the_true_direction_has_the_best_likelihood():
    for names in ("AB", "ABC", "ABCD"):
        found = burst(names, sigma_s=1e-3, ra_deg=250.0, dec_deg=-35.0)
        assert found.log_likelihoods(np.array([250.0]), np.array([-35.0])) == pytest.approx(
            0, abs=1e-6
        )


def test_t0_is_marginalised_as_an_integral_would():
    rng = np.random.default_rng(5)
    mixing = rng.normal(size=(4, 4)) * 1e-3
    covariance = mixing @ mixing.T + 1e-6 * np.eye(4)
    times_s = arrivals_s("ABCD", unit_vectors(30.0, 10.0)) + rng.normal(size=4) * 1e-3
    fields = burst_json("ABCD", times_s, covariance_s2=covariance.tolist())
    found = arrival_times_from_json(fields)
    inverse = np.linalg.inv(covariance)

    def likelihood(direction):
        def integrand(t0_s):
            misfit = times_s - t0_s - arrivals_s("ABCD", direction)
            return np.exp(-0.5 * misfit @ inverse @ misfit)

        return quad(integrand, -0.05, 0.05, points=[0.0], epsabs=0.0, epsrel=1e-10, limit=400)[0]

    places = [(30.0, 10.0), (32.0, 8.0), (27.0, 12.0)]
    logs = found.log_likelihoods(*np.array(places).T)
    brute = np.log([likelihood(unit_vectors(*place)) for place in places])
    assert np.diff(logs) == pytest.approx(np.diff(brute), abs=1e-6)


def test_a_common_delay_and_a_common_error_change_nothing():
    times_s = arrivals_s("ABCD", unit_vectors(100.0, 20.0))
    ras, decs = np.array([100.0, 103.0, 200.0]), np.array([20.0, 15.0, -60.0])
    plain = burst_json("ABCD", times_s, covariance_s2=(1e-6 * np.eye(4)).tolist())
    common = (1e-6 * np.eye(4) + 25e-6 * np.ones((4, 4))).tolist()
    expected = arrival_times_from_json(plain).log_likelihoods(ras, decs)
    for fields in (
        burst_json("ABCD", times_s + 0.3, covariance_s2=plain["covariance_s2"]),
        burst_json("ABCD", times_s, covariance_s2=common),
        burst_json("DCBA", times_s[::-1], covariance_s2=plain["covariance_s2"]),
    ):
        found = arrival_times_from_json(fields).log_likelihoods(ras, decs)
        assert found == pytest.approx(expected, rel=1e-8)


def test_a_bias_adds_to_the_variance_of_its_station_alone():
    times_s = arrivals_s("ABC", unit_vectors(100.0, 20.0))
    with_bias = burst_json("ABC", times_s, sigma_s=1e-3)
    with_bias["stations"][1]["bias_s"] = 2e-3
    summed = burst_json("ABC", times_s, covariance_s2=np.diag([1e-6, 5e-6, 1e-6]).tolist())
    places = np.array([100.0, 90.0, 40.0]), np.array([20.0, 25.0, 70.0])
    first = arrival_times_from_json(with_bias).log_likelihoods(*places)
    assert first == pytest.approx(arrival_times_from_json(summed).log_likelihoods(*places))


def test_turning_the_stations_turns_the_answer():
    times_s = arrivals_s("ABC", unit_vectors(100.0, 20.0))
    fields = burst_json("ABC", times_s, sigma_s=1e-3)
    turned = json.loads(json.dumps(fields))
    for station in turned["stations"]:
        station["longitude_deg"] = (station["longitude_deg"] + 40.0 + 180.0) % 360.0 - 180.0
    before, after = arrival_times_from_json(fields), arrival_times_from_json(turned)
    matrix = earth_to_icrs_matrix(before.reference_mjd)
    c, s = np.cos(np.deg2rad(40.0)), np.sin(np.deg2rad(40.0))
    turn = matrix @ np.array([[c, -s, 0], [s, c, 0], [0, 0, 1]]) @ matrix.T
    vectors = unit_vectors([100.0, 90.0, 300.0], [20.0, 25.0, -70.0])
    assert after.excess(vectors @ turn.T) == pytest.approx(
        before.excess(vectors), rel=1e-9, abs=1e-6
    )


def test_three_stations_give_two_mirror_spots_of_equal_weight():
    found = burst("ABC", sigma_s=2e-4)
    sky_map = product_map([found], None)
    vectors = vectors_of(sky_map)
    one, two = found.delays_s[1] - found.delays_s[0], found.delays_s[2] - found.delays_s[0]
    normal = np.cross(one, two) / np.linalg.norm(np.cross(one, two))
    truth = unit_vectors(100.0, 20.0)
    mirror = truth - 2.0 * (truth @ normal) * normal
    near = [
        np.arccos(np.clip(vectors @ spot, -1, 1)) < np.deg2rad(10.0) for spot in (truth, mirror)
    ]
    shares = [sky_map.probabilities[is_near].sum() for is_near in near]
    assert shares == pytest.approx([0.5, 0.5], abs=5e-3)


@pytest.mark.parametrize("sigma_s", [3e-3, 1e-3, 1e-4, 2e-5])
def test_a_ring_of_any_width_keeps_its_probability(sigma_s):
    # Two stations: dt is Gaussian, so shares and areas of bands are those of the normal law.
    found = burst("AB", sigma_s=sigma_s)
    sky_map = product_map([found], None)
    root = np.sqrt(found.excess(vectors_of(sky_map)))
    assert sky_map.probabilities[root < 5.0].sum() == pytest.approx(1.0, abs=1e-4)
    # The cells add up to what the integral of the Gaussian over the sphere is.
    baseline_s = np.linalg.norm(found.delays_s[0] - found.delays_s[1])
    sigmas = baseline_s / (np.sqrt(2.0) * sigma_s)
    dt_sigmas = (found.stations[0].arrival_s - found.stations[1].arrival_s) / (np.sqrt(2) * sigma_s)
    inside = norm.cdf(sigmas - abs(dt_sigmas)) - norm.cdf(-sigmas - abs(dt_sigmas))
    integral = np.sqrt(2.0 * np.pi) / sigmas / 2.0 * inside
    shares = 4.0 ** -sky_map.orders.astype(float) / 12.0
    values = np.exp(-0.5 * found.excess(vectors_of(sky_map)))
    assert (values * shares).sum() == pytest.approx(integral, rel=2e-3)


def test_a_ring_close_to_the_baseline_is_a_spot_that_is_followed_too():
    # 29.1873 of 30.177 ms: the ring closes in on the end of the baseline.
    truth = earth_to_icrs_matrix(61478.212581) @ unit_vectors(-60.0, 20.0)
    ra_deg, dec_deg = ras_decs_deg(truth)
    found = burst("AB", sigma_s=1e-4, ra_deg=float(ra_deg), dec_deg=float(dec_deg))
    sky_map = product_map([found], None)
    values = np.exp(-0.5 * found.excess(vectors_of(sky_map)))
    shares = 4.0 ** -sky_map.orders.astype(float) / 12.0
    sigmas = np.linalg.norm(found.delays_s[0] - found.delays_s[1]) / (np.sqrt(2.0) * 1e-4)
    assert (values * shares).sum() == pytest.approx(np.sqrt(2 * np.pi) / sigmas / 2, rel=2e-3)


def test_inconsistent_times_still_point_and_say_so():
    found = burst("AB", sigma_s=1e-3, errors_s=np.array([0.05, 0.0]))
    assert len(found.notes) == 1
    assert "A and B differ by" in found.notes[0]
    assert "light needs 30.18 ms" in found.notes[0]
    axis = found.delays_s[1] - found.delays_s[0]
    # A is late beyond reason: the source stands where A is reached last.
    assert found.best_direction @ axis / np.linalg.norm(axis) == pytest.approx(1.0)
    sky_map = product_map([found], None)
    assert sky_map.probabilities.sum() == pytest.approx(1.0)
    best = vectors_of(sky_map)[np.argmax(sky_map.densities)]
    assert best @ found.best_direction > np.cos(np.deg2rad(1.0))
    assert burst("AB", sigma_s=1e-3).notes == ()


def test_four_stations_test_themselves():
    fitting = burst("ABCD", sigma_s=1e-3, ra_deg=200.0, dec_deg=40.0)
    errors_s = np.array([0.0, 0.0, 0.0, 0.012])
    missing = burst("ABCD", sigma_s=1e-3, ra_deg=200.0, dec_deg=40.0, errors_s=errors_s)
    assert fitting.notes == ()
    assert any("Inconsistent times" in note for note in missing.notes)


def test_the_best_direction_is_the_best_of_many():
    rng = np.random.default_rng(11)
    vectors = rng.normal(size=(20_000, 3))
    vectors /= np.linalg.norm(vectors, axis=1)[:, None]
    for n_rows in (1, 2, 3, 5):
        for scale in (0.3, 1.0, 30.0):
            slopes, targets = rng.normal(size=(n_rows, 3)), scale * rng.normal(size=n_rows)
            best = nearest_direction(slopes, targets)
            assert np.linalg.norm(best) == pytest.approx(1.0)
            least = np.linalg.norm(slopes @ best - targets)
            others = np.linalg.norm(vectors @ slopes.T - targets, axis=1).min()
            assert least <= others + 1e-12


@pytest.mark.parametrize(("names", "sigma_s"), [("AB", 4e-3), ("ABC", 4e-3), ("ABCD", 3e-3)])
def test_the_true_direction_is_in_the_90_per_cent_area_90_per_cent_of_the_time(names, sigma_s):
    rng = np.random.default_rng(17)
    n_trials = 250
    levels = np.empty(n_trials)
    for trial in range(n_trials):
        ra, dec = ras_decs_deg(rng.normal(size=3))
        errors_s = sigma_s * rng.normal(size=len(names))
        found = burst(
            names, sigma_s=sigma_s, ra_deg=float(ra), dec_deg=float(dec), errors_s=errors_s
        )
        sky_map = product_map([found], None)
        is_better = found.excess(vectors_of(sky_map)) < found.excess(unit_vectors(ra, dec)[None])[0]
        levels[trial] = sky_map.probabilities[is_better].sum()
    # Three sigma of the binomial, plus half a cell's share at the edge.
    for level in (0.5, 0.9):
        slack = 3.0 * np.sqrt(level * (1.0 - level) / n_trials) + 0.01
        assert np.mean(levels <= level) == pytest.approx(level, abs=slack)
