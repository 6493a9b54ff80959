"""Brightness of one hypothesis against time."""

import math

import numpy as np
import pytest

from skytiles.errors import SourceError
from skytiles.source.hypothesis import ALWAYS_D, Hypothesis, magnitudes

RISING = Hypothesis("rising", 1.0, 0.8, 12.0, 8.0, 10.0, 0.05)


def test_there_is_no_light_before_first_light():
    assert np.all(np.isinf(magnitudes(RISING, [-5.0, 0.0, 0.7999], "V")))


def test_the_first_hundredth_of_a_day_is_a_plateau():
    np.testing.assert_array_equal(magnitudes(RISING, [0.8, 0.805, 0.81], "V"), 12.0)


def test_the_rise_is_linear_in_the_logarithm_of_time():
    # Halfway in log10 between 0.01 and 10 d is sqrt(0.1) d.
    at_d = 0.8 + math.sqrt(0.01 * 10.0)
    assert magnitudes(RISING, [at_d], "V")[0] == pytest.approx(10.0, abs=1e-12)


def test_the_peak_is_followed_by_the_slope():
    assert magnitudes(RISING, [10.8, 20.8], "V").tolist() == pytest.approx([8.0, 8.5])


def test_a_light_that_always_shone_is_constant():
    steady = Hypothesis("steady", 1.0, ALWAYS_D, 12.0, 12.0, 1.0)
    np.testing.assert_array_equal(magnitudes(steady, [-3.0, 0.0, 400.0], "R"), 12.0)


def test_array_equals_scalars():
    times_d = np.linspace(0.0, 60.0, 40)
    one_by_one = [magnitudes(RISING, [t], "V")[0] for t in times_d]
    np.testing.assert_array_equal(magnitudes(RISING, times_d, "V"), one_by_one)


@pytest.mark.parametrize(
    "changes",
    [{"weight": -0.1}, {"weight": 1.1}, {"rise_d": 0.01}, {"m_peak": math.nan}, {"rise_d": 0.0}],
)
def test_numbers_that_make_no_sense_are_refused(changes):
    values = {"weight": 1.0, "first_light_d": 0.0, "m_first": 12.0, "m_peak": 8.0, "rise_d": 1.0}
    with pytest.raises(SourceError) as refusal:
        Hypothesis(label="odd", **(values | changes))
    assert refusal.value.code == "bad-source-model"
