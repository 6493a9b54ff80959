import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from skytiles.depth.depth_error import DepthError
from skytiles.depth.limit_kinds import (
    default_s_mag,
    effective_limit_mag,
    limit_from_star_mag,
    m50_mag,
)


@pytest.mark.parametrize(
    ("kind", "s", "m50"),
    [
        ("50 %", 0.2, 18.0),
        ("5 sigma", 0.2, 18.0),
        ("3 sigma", 0.2, 17.45),
        ("90 %", 0.2, 18.0 + 0.2 * math.log(9.0)),
        ("90 %", 0.4, 18.0 + 0.4 * math.log(9.0)),
        ("faintest star seen", 0.4, 17.5),
        ("estimate", 0.2, 17.5),
    ],
)
def test_m50_follows_from_the_kind_of_limit(kind, s, m50):
    assert m50_mag(18.0, kind, s=s) == pytest.approx(m50)


def test_three_sigma_is_two_and_a_half_log_five_thirds_too_deep():
    assert m50_mag(0.0, "3 sigma") == pytest.approx(-2.5 * math.log10(5.0 / 3.0), abs=0.01)


def test_nine_in_ten_are_seen_at_a_ninety_percent_limit():
    m50 = m50_mag(18.0, "90 %", s=0.3)
    assert 1.0 / (1.0 + math.exp((18.0 - m50) / 0.3)) == pytest.approx(0.9)


def test_unknown_kinds_are_refused_with_what_is_allowed():
    with pytest.raises(DepthError, match="faintest star seen"):
        m50_mag(18.0, "about")
    with pytest.raises(DepthError):
        default_s_mag("about")


def test_eyes_and_faintest_stars_are_soft_limits():
    assert default_s_mag("5 sigma") == 0.2
    assert default_s_mag("faintest star seen") == 0.4
    assert default_s_mag("5 sigma", examined_way="eyepiece") == 0.4
    assert default_s_mag("5 sigma", examined_way="image by eye") == 0.2


@given(m50=st.floats(-5.0, 25.0), reference=st.floats(-5.0, 25.0))
def test_a_reference_never_deepens_a_frame(m50, reference):
    assert effective_limit_mag(m50, reference) == min(m50, reference)
    assert effective_limit_mag(m50, None) == m50
    assert effective_limit_mag(m50) == m50


def test_limit_from_one_star():
    assert limit_from_star_mag(15.0, signal_to_noise=5.0) == 15.0
    assert limit_from_star_mag(15.0, signal_to_noise=50.0) == pytest.approx(17.5)
    for broken in (0.0, -1.0, float("nan")):
        with pytest.raises(DepthError):
            limit_from_star_mag(15.0, signal_to_noise=broken)
