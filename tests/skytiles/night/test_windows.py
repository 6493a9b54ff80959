import numpy as np
import pytest

from skytiles.night.altitude import altitudes_deg, sun_altitudes_deg
from skytiles.night.intervals import common_intervals, intervals_below_zero
from skytiles.night.night_error import NightError
from skytiles.night.place import Place
from skytiles.night.solar_rating import SolarRating
from skytiles.night.twilight import TWILIGHTS, dark_intervals
from skytiles.night.windows import observable_mask, tile_windows

START = 61375.5
UTRECHT = Place(52.1, 5.2)
TROMSO = Place(69.7, 19.0)
SOUTH_POLE = Place(-90.0, 0.0, 2800.0)
CAMERA = SolarRating("camera")


def test_dark_intervals_end_where_astropy_has_the_sun_at_the_limit(astropy_oracle, no_network):
    for name, limit_deg in TWILIGHTS.items():
        ((dusk, dawn),) = dark_intervals(
            UTRECHT, start_mjd=START, hours=24.0, sun_below_deg=limit_deg
        )
        found = astropy_oracle.body_altitudes_deg("sun", UTRECHT, [dusk, dawn])
        assert found == pytest.approx(limit_deg, abs=0.003), name


def test_deeper_twilights_lie_inside_each_other():
    bounds = [
        dark_intervals(UTRECHT, start_mjd=START, hours=24.0, sun_below_deg=limit_deg)[0]
        for limit_deg in sorted(TWILIGHTS.values())
    ]
    dusks, dawns = zip(*bounds, strict=True)
    assert list(dusks) == sorted(dusks, reverse=True)
    assert list(dawns) == sorted(dawns)


def test_polar_night_and_polar_day():
    assert dark_intervals(TROMSO, start_mjd=61390.0, hours=24.0, sun_below_deg=-1.0) == [
        (61390.0, 61391.0)
    ]
    assert dark_intervals(SOUTH_POLE, start_mjd=START, hours=24.0) == []


@pytest.mark.parametrize("hours", [0.0, -1.0, float("nan"), float("inf"), 24.0 * 41])
def test_a_stretch_that_cannot_be_searched_is_refused(hours):
    with pytest.raises(NightError, match="hours"):
        dark_intervals(UTRECHT, start_mjd=START, hours=hours)


def test_tile_windows_are_up_and_dark_inside_and_not_just_outside():
    windows = tile_windows(UTRECHT, 83.6, 22.0, start_mjd=START, hours=48.0)
    assert windows
    for start, end in windows:
        inside = np.linspace(start + 1e-4, end - 1e-4, 50)
        assert (altitudes_deg([UTRECHT], 83.6, 22.0, inside) >= 20.0).all()
        assert (sun_altitudes_deg([UTRECHT], inside) < -12.0).all()
        outside = np.array([start - 1e-4, end + 1e-4])
        is_open = (altitudes_deg([UTRECHT], 83.6, 22.0, outside)[0, 0] >= 20.0) & (
            sun_altitudes_deg([UTRECHT], outside)[0] < -12.0
        )
        assert not is_open.any()


def test_a_tile_that_never_rises_has_no_window():
    assert tile_windows(UTRECHT, 83.6, -60.0, start_mjd=START, hours=24.0) == []


def test_mask_agrees_with_the_windows():
    ras_deg, decs_deg = np.array([83.6, 10.0, 250.0]), np.array([22.0, 41.0, -25.0])
    starts = START + np.arange(0.0, 1.0, 1.0 / 96.0)
    mask = observable_mask(UTRECHT, CAMERA, ras_deg, decs_deg, starts, duration_s=600.0)
    for tile in range(3):
        windows = tile_windows(
            UTRECHT, ras_deg[tile], decs_deg[tile], start_mjd=START, hours=25.0, solar=CAMERA
        )
        fits = [
            any(first <= start and start + 600.0 / 86400.0 <= last for first, last in windows)
            for start in starts
        ]
        assert mask[tile].tolist() == fits


def test_interval_search_finds_every_stretch():
    found = intervals_below_zero(np.sin, start_mjd=0.0, end_mjd=20.0, step_d=0.1)
    expected = [(np.pi * n, min(np.pi * (n + 1), 20.0)) for n in (1, 3, 5)]
    assert np.array(found) == pytest.approx(np.array(expected), abs=1e-6)


def test_common_intervals():
    first, second = [(0.0, 2.0), (3.0, 5.0)], [(1.0, 3.5), (4.0, 6.0)]
    assert common_intervals(first, second) == [(1.0, 2.0), (3.0, 3.5), (4.0, 5.0)]
    assert common_intervals(first, []) == []
