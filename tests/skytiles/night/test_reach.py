import astropy.units as u
import numpy as np
import pytest
from astropy.coordinates import AltAz, EarthLocation, HADec, SkyCoord
from astropy.time import Time

from skytiles.night.horizon_mask import skyline_altitudes_deg
from skytiles.night.mount_limits import NO_LIMITS, MountLimits
from skytiles.night.night_error import NightError
from skytiles.night.place import Place
from skytiles.night.reach import local_directions, reach_mask, reach_problems, reach_windows
from skytiles.night.solar_rating import SolarRating
from skytiles.night.windows import observable_mask, tile_windows

pytestmark = pytest.mark.usefixtures("astropy_oracle")
MINUTE = 1.0 / 1440.0
# An evening of spring in central Europe.
START = 60383.8
HOUSES = ((30.0, 5.0), (100.0, 35.0), (180.0, 12.0), (260.0, 40.0), (330.0, 0.0))
GARDEN = Place(48.1, 11.6, 500.0, min_altitude_deg=10.0, horizon=HOUSES)
OPEN = Place(48.1, 11.6, 500.0, min_altitude_deg=10.0)
EYE = SolarRating("eye")
TURNING = MountLimits(crosses_meridian=False)


def random_sky(n, *, seed=7):
    rng = np.random.default_rng(seed)
    return rng.uniform(0.0, 360.0, n), np.degrees(np.arcsin(rng.uniform(-1.0, 1.0, n)))


def astropy_frames(place, mjds):
    where = EarthLocation.from_geodetic(place.longitude_deg, place.latitude_deg, 500 * u.m)
    times = Time(mjds, format="mjd")
    return AltAz(obstime=times, location=where), HADec(obstime=times, location=where)


# The skyline.


def test_a_skyline_runs_straight_from_point_to_point_and_round_north():
    points = ((0.0, 10.0), (90.0, 20.0), (270.0, 0.0))
    found = skyline_altitudes_deg(points, np.array([0.0, 45.0, 90.0, 180.0, 315.0, 359.999, 405.0]))
    assert found == pytest.approx([10.0, 15.0, 20.0, 10.0, 5.0, 10.0, 15.0], abs=1e-3)


def test_one_point_is_the_same_all_round_and_none_hides_nothing():
    azimuths = np.arange(0.0, 360.0, 7.0)
    assert (skyline_altitudes_deg(((120.0, 17.0),), azimuths) == 17.0).all()
    assert (skyline_altitudes_deg((), azimuths) == -90.0).all()


def test_the_order_of_the_points_does_not_matter():
    azimuths = np.arange(0.0, 360.0, 3.0)
    assert skyline_altitudes_deg(HOUSES, azimuths) == pytest.approx(
        skyline_altitudes_deg(HOUSES[::-1], azimuths)
    )


@pytest.mark.parametrize(
    "points",
    [
        ((361.0, 10.0),),
        ((0.0, 91.0),),
        ((float("nan"), 10.0),),
        ((0.0, float("inf")),),
        ((0.0, 10.0), (360.0, 20.0)),
        tuple((azimuth / 2.0, 1.0) for azimuth in range(400)),
    ],
)
def test_a_skyline_that_cannot_be_drawn_is_refused(points):
    with pytest.raises(NightError, match="horizon mask"):
        Place(0.0, 0.0, horizon=points)


@pytest.mark.parametrize(
    "limits",
    [
        {"min_altitude_deg": 50.0, "max_altitude_deg": 40.0},
        {"max_hour_angle_h": 13.0},
        {"min_dec_deg": float("nan")},
        {"min_dec_deg": 10.0, "max_dec_deg": 10.0},
    ],
)
def test_mount_limits_that_leave_nothing_are_refused(limits):
    with pytest.raises(NightError, match="mount"):
        MountLimits(**limits)


# astropy as oracle.


def test_hour_angles_and_azimuths_of_another_program():
    # 10 arcsec over the cosine: without IERS tables astropy's UT1 and ours differ a little.
    ras, decs = random_sky(40)
    mjds = START + np.arange(0.0, 1.0, 0.09)
    found = local_directions(OPEN, ras, decs, mjds)
    stars = SkyCoord(ras[:, None] * u.deg, decs[:, None] * u.deg)
    horizontal, equatorial = (stars.transform_to(frame) for frame in astropy_frames(OPEN, mjds))
    slack = 0.003
    assert found.altitudes_deg == pytest.approx(horizontal.alt.deg, abs=slack)
    turns = (found.azimuths_deg - horizontal.az.deg + 180.0) % 360.0 - 180.0
    assert (np.abs(turns) * np.cos(horizontal.alt.rad) < slack).all()
    turns = (found.hour_angles_deg - equatorial.ha.deg + 180.0) % 360.0 - 180.0
    assert (np.abs(turns) * np.cos(equatorial.dec.rad) < slack).all()


def test_the_mask_hides_what_another_program_finds_behind_the_skyline():
    ras, decs = random_sky(120, seed=3)
    mjds = START + np.arange(0.0, 0.4, 0.03)
    seen = SkyCoord(ras[:, None] * u.deg, decs[:, None] * u.deg).transform_to(
        astropy_frames(GARDEN, mjds)[0]
    )
    azimuths, altitudes = np.transpose(sorted(HOUSES))
    around = np.concatenate([azimuths - 360.0, azimuths, azimuths + 360.0])
    floors = np.maximum(np.interp(seen.az.deg, around, np.tile(altitudes, 3)), 10.0)
    found = reach_mask(GARDEN, NO_LIMITS, ras, decs, mjds, duration_s=0.0)
    is_clear = np.abs(seen.alt.deg - floors) > 0.02
    assert is_clear.mean() > 0.99
    assert (found == (seen.alt.deg > floors))[is_clear].all()


# Windows, masks and sentences are one rule.


@pytest.mark.parametrize("place", [OPEN, GARDEN])
@pytest.mark.parametrize(
    "mount",
    [
        NO_LIMITS,
        TURNING,
        MountLimits(max_altitude_deg=60.0),
        MountLimits(min_hour_angle_h=-4.0, max_hour_angle_h=0.5),
        MountLimits(min_dec_deg=-20.0, max_dec_deg=50.0, crosses_meridian=False),
    ],
)
def test_windows_masks_and_sentences_agree(place, mount):
    ras, decs = random_sky(25, seed=11)
    minutes = np.arange(0.0, 600.0, 7.0)
    series = 9.0
    mask = reach_mask(place, mount, ras, decs, START + minutes * MINUTE, duration_s=60.0 * series)
    for tile, (ra, dec) in enumerate(zip(ras, decs, strict=True)):
        windows = reach_windows(place, mount, ra, dec, start_mjd=START, end_mjd=START + 1.0)
        edges = np.array(windows).ravel()
        for column, minute in enumerate(minutes):
            start, end = START + minute * MINUTE, START + (minute + series) * MINUTE
            if np.abs(np.subtract.outer([start, end], edges)).min(initial=1.0) < 0.2 * MINUTE:
                continue
            is_inside = any(a <= start and end <= b for a, b in windows)
            assert mask[tile, column] == is_inside
            problems = reach_problems(place, mount, ra, dec, start_mjd=start, end_mjd=end)
            assert (problems == []) == is_inside


def test_a_mount_that_turns_over_gets_a_window_on_each_side_of_the_meridian():
    # Culmination when the sidereal time is the right ascension, by astropy.
    mjds = START + np.arange(0.0, 0.4, 0.2 * MINUTE)
    star = SkyCoord(140.0 * u.deg, 30.0 * u.deg)
    hours = star.transform_to(astropy_frames(OPEN, mjds)[1]).ha.wrap_at(180 * u.deg).hour
    culmination = float(np.interp(0.0, hours, mjds))
    windows = reach_windows(OPEN, TURNING, 140.0, 30.0, start_mjd=START, end_mjd=START + 0.5)
    assert len(windows) == 2
    assert windows[0][1] == windows[1][0]
    assert windows[0][1] == pytest.approx(culmination, abs=0.1 * MINUTE)
    found = reach_problems(
        OPEN, TURNING, 140.0, 30.0, start_mjd=culmination - MINUTE, end_mjd=culmination + MINUTE
    )
    assert len(found) == 1
    assert "meridian" in found[0]


def test_a_circumpolar_star_below_the_pole_does_not_turn_the_mount_over():
    pole_star = reach_windows(OPEN, TURNING, 38.0, 89.3, start_mjd=START, end_mjd=START + 1.0)
    assert sum(end - start for start, end in pole_star) == pytest.approx(1.0)
    assert len(pole_star) == 2


def test_a_limit_at_the_end_of_its_range_is_none():
    ras, decs = random_sky(30)
    mjds = START + np.arange(0.0, 1.0, 0.05)
    free = reach_mask(OPEN, NO_LIMITS, ras, decs, mjds, duration_s=600.0)
    told = MountLimits(-90.0, 90.0, -12.0, 12.0, -90.0, 90.0)
    assert (reach_mask(OPEN, told, ras, decs, mjds, duration_s=600.0) == free).all()


def test_the_planner_mask_and_tile_windows_heed_skyline_and_mount():
    ras, decs = random_sky(60, seed=5)
    mjds = START + np.arange(0.0, 0.4, 0.02)
    whole = observable_mask(OPEN, EYE, ras, decs, mjds, duration_s=300.0)
    masked = observable_mask(GARDEN, EYE, ras, decs, mjds, duration_s=300.0, mount=TURNING)
    assert (masked <= whole).all()
    assert 0 < masked.sum() < whole.sum()
    tile = int(np.argmax(masked.any(axis=1)))
    first = mjds[np.argmax(masked[tile])]
    windows = tile_windows(
        GARDEN, ras[tile], decs[tile], start_mjd=START, hours=10.0, solar=EYE, mount=TURNING
    )
    assert any(a <= first and first + 300.0 / 86400.0 <= b for a, b in windows)
