import numpy as np
import pytest
from scipy.stats import norm

from skytiles.depth.camera import magnitude_error_mag
from skytiles.depth.detection_chance import five_sigma_efficiency
from skytiles.depth.luminance import bortle_class, luminances_cd_m2
from skytiles.depth.sky_brightness import nanolamberts
from skytiles.ledger.ledger_frame import detection_efficiency


def test_luminance_of_a_sky(authority):
    # Common practice (from memory).
    row = authority["luminance"]
    assert luminances_cd_m2(row["inputs"]["sky_mags"]) == pytest.approx(
        row["expected"], rel=row["tolerance"]
    )


def test_candela_and_nanolambert_are_one_unit():
    # One nanolambert is 1e-5 / pi candela per square metre; Krisciunas & Schaefer 1991, eq. 1.
    mags = np.arange(15.0, 22.5, 0.5)
    assert luminances_cd_m2(mags) == pytest.approx(nanolamberts(mags) * 1e-5 / np.pi, rel=5e-3)


def test_bortle_classes(authority):
    # Bortle 2001; columns in magnitudes by common practice.
    row = authority["bortle"]
    found = [bortle_class(sky_mag) for sky_mag in row["inputs"]["sky_mags"]]
    assert [name for name, _ in found] == row["expected"]
    assert [list(eyes) for _, eyes in found] == row["naked_eye_mag"]


def test_error_of_a_magnitude(authority):
    # Howell, Handbook of CCD Astronomy, sec. 4.4 (recomputed).
    row = authority["mag_err"]
    assert magnitude_error_mag(row["inputs"]["signals_to_noise"]) == pytest.approx(
        row["expected"], abs=row["tolerance"]
    )


def test_share_found_by_a_pure_cut(authority):
    # Definition of a 5 sigma limit (recomputed), and scipy's normal distribution.
    row = authority["gauss_eff"]
    steps = np.array(row["inputs"]["steps_mag"])
    found = five_sigma_efficiency(18.0 + steps, 18.0)
    assert found == pytest.approx(row["expected"], abs=row["tolerance"])
    assert found == pytest.approx(norm.cdf(5.0 * 10.0 ** (-0.4 * steps) - 5.0))


def test_the_curve_of_the_ledger_is_near_the_pure_cut():
    mags = np.arange(17.0, 18.5, 0.05)
    ledger = detection_efficiency(mags, 18.0, s=0.2)
    assert np.abs(ledger - five_sigma_efficiency(mags, 18.0)).max() < 0.13
