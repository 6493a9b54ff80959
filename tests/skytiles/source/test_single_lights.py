"""Afterglow, red transient and nova, by hand-sized examples."""

import numpy as np
import pytest

from skytiles.source.light_curves import light_curves
from skytiles.source.presets import PRESETS


def test_an_afterglow_is_seventeen_after_an_hour_and_falls_as_time():
    model = PRESETS["afterglow"]()
    found = model.magnitudes(np.array([0.1, 1.0, 10.0, 100.0]) / 24.0, "R")[0]
    np.testing.assert_allclose(found, [14.5, 17.0, 19.5, 22.0], atol=1e-9)
    assert np.isinf(model.magnitudes([-0.001], "R")[0, 0])
    # Constant in its first half minute.
    early = model.magnitudes(np.array([0.0, 15.0, 30.0]) / 86400.0, "R")[0]
    np.testing.assert_allclose(early, early[0], atol=1e-9)


def test_an_afterglow_may_fall_faster():
    model = PRESETS["afterglow"](decay_index=2.0)
    assert model.magnitudes([10.0 / 24.0], "R")[0, 0] == pytest.approx(22.0)


def test_a_red_transient_fades_three_times_faster_in_g_than_in_i():
    model = PRESETS["red transient"](distance_mpc=10.0)
    # Distance modulus 30.
    times = [0.5, 1.0, 2.0, 3.0]
    red, blue = (model.magnitudes(times, band)[0] for band in ("i", "g"))
    np.testing.assert_allclose(red, [14.5, 14.5, 14.9, 15.3], atol=1e-9)
    np.testing.assert_allclose(blue, [14.5, 14.5, 15.7, 16.9], atol=1e-9)


def test_between_g_and_i_the_slope_is_linear_in_wavelength_and_beyond_it_is_constant():
    one = PRESETS["red transient"]().hypotheses[0]
    share = (0.6261 - 0.4825) / (0.7672 - 0.4825)
    assert one.slope_in("r") == pytest.approx(1.2 - 0.8 * share)
    assert one.slope_in("K") == 0.4
    assert one.slope_in("U") == 1.2


def test_the_spread_of_the_distance_joins_that_of_the_light():
    model = PRESETS["red transient"](sigma_mag=0.3, distance_factor=10.0**0.08)
    variance = model.offset_weights @ model.offsets_mag**2
    assert variance == pytest.approx(0.3**2 + 0.4**2, rel=0.05)


def test_a_nova_rises_to_its_peak_in_three_days():
    model = PRESETS["nova"]()
    assert model.placement == "galactic"
    found = model.magnitudes([-0.1, 0.0, 3.0, 13.0], "V")[0]
    np.testing.assert_allclose(found, [np.inf, -2.5, -7.5, -6.5], atol=1e-9)


@pytest.mark.parametrize("name", PRESETS)
def test_curves_show_every_kind_of_light_once(name):
    model = PRESETS[name]()
    curves = light_curves(model)
    assert {curve["label"] for curve in curves} == {one.label for one in model.hypotheses}
    assert sum(curve["weight"] for curve in curves) == pytest.approx(1.0)
    for curve in curves:
        assert len(curve["ts_d"]) == len(curve["magnitudes"])
        shown = [m for m in curve["magnitudes"] if m is not None]
        assert np.all(np.isfinite(shown))
