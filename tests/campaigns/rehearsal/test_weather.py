"""Seeded weather."""

import numpy as np
import pytest

from campaigns.rehearsal.weather import Weather, draw_weather

WEATHER = Weather(is_clear_first=True, changes_s=(100.0, 300.0))


@pytest.mark.parametrize(
    "time_s, is_clear", [(0, True), (99, True), (100, False), (299, False), (300, True)]
)
def test_clear_and_clouded_swap_at_each_change(time_s, is_clear):
    assert WEATHER.is_clear(time_s) is is_clear


@pytest.mark.parametrize(
    "start_s, end_s, was_clear",
    [(0, 90, True), (50, 150, False), (150, 200, False), (50, 350, False)],
)
def test_a_series_is_clear_only_when_no_cloud_came(start_s, end_s, was_clear):
    assert WEATHER.was_clear(start_s, end_s) is was_clear


def test_the_clear_share_is_the_chance_in_the_long_run():
    rng = np.random.default_rng(2)
    weather = draw_weather(rng, clear_chance=0.3, clear_spell_mean_h=2.0, hours=20_000.0)
    times_s = np.arange(0.0, 20_000.0 * 3600.0, 1800.0)
    assert np.mean([weather.is_clear(t) for t in times_s]) == pytest.approx(0.3, abs=0.03)


def test_the_same_seed_gives_the_same_weather():
    drawn = [
        draw_weather(np.random.default_rng(9), clear_chance=0.5, clear_spell_mean_h=3.0, hours=48.0)
        for _ in range(2)
    ]
    assert drawn[0] == drawn[1]
