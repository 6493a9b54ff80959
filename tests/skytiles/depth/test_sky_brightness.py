import numpy as np
import pytest

from skytiles.depth.sky_brightness import (
    dark_sky_nl,
    moon_illuminance,
    moon_v_mag,
    moonlight_nl,
    nanolamberts,
    scattering,
    sky_brightness_mag,
    sky_mags,
    twilight_brightening_mag,
)

NO_MOON = {
    "moon_altitudes_deg": -30.0,
    "moon_separations_deg": 90.0,
    "moon_phase_angles_deg": 90.0,
}


def test_nanolamberts_of_krisciunas_and_schaefer(authority):
    # Krisciunas & Schaefer 1991, PASP 103, 1033, eq. 1 (published).
    row = authority["ks91_nl"]
    assert nanolamberts(row["inputs"]["sky_mags"]) == pytest.approx(
        row["expected"], abs=row["tolerance"]
    )


def test_magnitude_of_the_moon(authority):
    # Krisciunas & Schaefer 1991 (number of the equation from memory); Allen 1973.
    row = authority["ks91_moonmag"]
    assert moon_v_mag(row["inputs"]["phase_angles_deg"]) == pytest.approx(
        row["expected"], abs=row["tolerance"]
    )


def test_illuminance_of_the_moon(authority):
    # Krisciunas & Schaefer 1991, eq. 8 and 20 (published).
    row = authority["ks91_istar"]
    assert moon_illuminance(row["inputs"]["phase_angles_deg"]) == pytest.approx(
        row["expected"], rel=row["tolerance"]
    )


def test_scattering_function(authority):
    # Krisciunas & Schaefer 1991, eq. 16 to 21 (published).
    row = authority["ks91_frho"]
    assert scattering(row["inputs"]["separations_deg"]) == pytest.approx(
        row["expected"], rel=row["tolerance"]
    )


def test_sky_under_a_full_moon(authority):
    # Krisciunas & Schaefer 1991, eq. 15, 2 and 22 (published).
    row = authority["ks91_bmoon"]
    case = row["inputs"]
    moon_nl = moonlight_nl(
        case["separation_deg"],
        case["altitude_deg"],
        moon_altitudes_deg=case["moon_altitude_deg"],
        moon_phase_angles_deg=case["phase_angle_deg"],
    )
    total = sky_brightness_mag(
        sky_mags(case["zenith_nl"]),
        case["altitude_deg"],
        sun_altitudes_deg=-40.0,
        moon_altitudes_deg=case["moon_altitude_deg"],
        moon_separations_deg=case["separation_deg"],
        moon_phase_angles_deg=case["phase_angle_deg"],
    )
    expected_nl, expected_mag = row["expected"]
    assert moon_nl == pytest.approx(expected_nl, abs=row["tolerance"][0])
    assert total == pytest.approx(expected_mag, abs=row["tolerance"][1])


def test_twilight_of_meinel(authority):
    # Polynomial by J. Thorstensen after Meinel & Meinel 1983, p. 38 (published).
    row = authority["twilight_meinel"]
    assert twilight_brightening_mag(row["inputs"]["sun_altitudes_deg"]) == pytest.approx(
        row["expected"], abs=row["tolerance"]
    )


def test_twilight_is_never_darker_than_another_author_measured(authority):
    # Patat et al. 2006, A&A 455, 385, Table 1 (in part from memory). The two authors differ by
    # up to 1.4 magnitudes; ours is the brighter one, which errs on the side of caution.
    row = authority["twilight_patat"]
    suns = np.array(row["inputs"]["sun_altitudes_deg"], dtype=float)
    dark_mag = row["inputs"]["dark_zenith_mag"]
    found = sky_brightness_mag(dark_mag, 90.0, sun_altitudes_deg=suns, **NO_MOON)
    darker_mag, brighter_mag = row["tolerance"]
    assert (found <= np.array(row["expected"]) + darker_mag).all()
    assert (found >= np.array(row["expected"]) - brighter_mag).all()


def test_magnitudes_and_nanolamberts_undo_each_other():
    mags = np.arange(5.0, 23.0, 0.5)
    assert sky_mags(nanolamberts(mags)) == pytest.approx(mags)


def test_a_dark_zenith_is_what_the_site_says():
    found = sky_brightness_mag(21.3, 90.0, sun_altitudes_deg=-40.0, **NO_MOON)
    assert found == pytest.approx(21.3)


def test_the_dark_sky_brightens_towards_the_horizon():
    assert (np.diff(dark_sky_nl(21.5, np.arange(90.0, 0.0, -1.0))) > 0.0).all()


def test_the_sky_darkens_steadily_as_the_sun_goes_down():
    suns = np.arange(20.0, -40.0, -0.05)
    brightening = twilight_brightening_mag(suns)
    assert (np.diff(brightening) <= 0.0).all()
    assert (brightening >= 0.0).all()
    assert brightening[-1] == 0.0


def test_a_moon_below_the_horizon_adds_nothing():
    assert moonlight_nl(50.0, 40.0, moon_altitudes_deg=-0.1, moon_phase_angles_deg=0.0) == 0.0


def test_moonlight_grows_towards_the_moon_and_stays_finite():
    separations = np.array([0.0, 0.1, 1.0, 5.0, 20.0, 60.0])
    found = moonlight_nl(separations, 45.0, moon_altitudes_deg=45.0, moon_phase_angles_deg=0.0)
    assert np.isfinite(found).all()
    assert (np.diff(found) <= 0.0).all()
