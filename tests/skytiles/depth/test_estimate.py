import math

import numpy as np
import pytest

from skytiles.depth.camera import CameraOptics, camera_limit_mag, saturation_mag
from skytiles.depth.depth_error import DepthError
from skytiles.depth.estimate import DARK_SKY_ERROR_MAG, estimate_limit
from skytiles.depth.gear import Gear
from skytiles.depth.visual import eye_threshold_mag, visual_limit_mag
from skytiles.night.altitude import zenith_radec_deg
from skytiles.night.place import Place

PLACE = Place(48.1, 11.6, 500.0)
# New Moon of 2024-03-10: a dark night.
NIGHT = 60379.95
CAMERA = Gear("camera", 200.0, pixel_arcsec=1.5, obstruction=0.3, exposure_s=60.0)


def estimate(gear=CAMERA, *, mid_mjd=NIGHT, duration_s=240.0, zenith_mag=20.5, **changes):
    ra_deg, dec_deg = zenith_radec_deg(PLACE, mid_mjd)
    values = {"ra_deg": ra_deg, "dec_deg": dec_deg, "duration_s": duration_s, **changes}
    return estimate_limit(gear, place=PLACE, zenith_mag=zenith_mag, mid_mjd=mid_mjd, **values)


# Camera: dark current and the well.


def test_dark_current_is_noise_like_sky():
    # Twice the sky and a dark current as strong as the sky are the same noise.
    quiet = CameraOptics(200.0, 1.5, band="V", read_noise_e=0.0)
    sky_e_per_s = quiet.electrons_per_s * 10.0 ** (-0.4 * 20.0) * 1.5**2
    warm = CameraOptics(200.0, 1.5, band="V", read_noise_e=0.0, dark_e_per_s=sky_e_per_s)
    case = {"exposure_s": 60.0, "n_exposures": 3, "airmass": 1.0, "seeing_arcsec": 3.0}
    brighter = 20.0 - 2.5 * math.log10(2.0)
    assert camera_limit_mag(warm, sky_mag=20.0, **case) == pytest.approx(
        camera_limit_mag(quiet, sky_mag=brighter, **case)
    )


def test_the_sky_takes_its_part_of_the_well():
    optics = CameraOptics(200.0, 1.5, band="V")
    sky_e_per_s = optics.electrons_per_s * 10.0 ** (-0.4 * 18.0) * 1.5**2
    full_well_e = 2.0 * sky_e_per_s * 100.0
    case = {"exposure_s": 100.0, "seeing_arcsec": 3.0, "full_well_e": full_well_e}
    # Half of the well is sky: stars of half the light fill the rest.
    found = saturation_mag(optics, sky_mag=18.0, **case)
    assert found - saturation_mag(optics, **case) == pytest.approx(2.5 * math.log10(2.0))
    assert saturation_mag(optics, sky_mag=17.0, **case) == math.inf


# Eyes behind optics.


def test_more_power_darkens_the_sky_until_only_the_aperture_counts():
    powers = [40.0, 80.0, 160.0, 320.0]
    found = [
        float(visual_limit_mag("eyepiece", 200.0, 19.0, 1.0, magnification=power))
        for power in powers
    ]
    assert found == sorted(found)
    # Against a black background the threshold is 10^-9.80 footcandle (Schaefer 1990).
    black = float(eye_threshold_mag(60.0)) + 2.5 * math.log10(0.75 * (200.0 / 7.0) ** 2)
    assert found[-1] < black
    assert black - found[-1] < 0.6


def test_an_exit_pupil_wider_than_the_eye_wastes_the_rim():
    # 70 mm at power 5: 14 mm leave the eyepiece, 7 enter the eye: as 35 mm at power 5.
    wide = visual_limit_mag("binoculars", 70.0, 20.0, 1.0, magnification=5.0)
    assert wide == pytest.approx(visual_limit_mag("binoculars", 35.0, 20.0, 1.0, magnification=5.0))


def test_an_obstruction_dims_star_and_sky():
    free = visual_limit_mag("eyepiece", 200.0, 60.0, 1.0)
    blocked = visual_limit_mag("eyepiece", 200.0, 60.0, 1.0, obstruction=0.5)
    assert free - blocked == pytest.approx(-2.5 * math.log10(0.75), abs=1e-3)


@pytest.mark.parametrize("broken", [{"magnification": 0.5}, {"obstruction": 1.0}])
def test_eyepieces_that_cannot_be_are_refused(broken):
    with pytest.raises(DepthError, match="magnification"):
        visual_limit_mag("eyepiece", 100.0, 20.0, 1.0, **broken)


# The estimate.


def test_four_times_the_exposure_goes_three_quarters_of_a_magnitude_deeper():
    # Sky-limited: 2.5 log10(2), more exposures of the same length.
    deeper = estimate(duration_s=960.0).limit_mag - estimate(duration_s=240.0).limit_mag
    assert deeper == pytest.approx(2.5 * math.log10(2.0), abs=0.02)


def test_an_estimate_is_wide_enough_for_what_is_not_known():
    found = estimate()
    # A factor 1.5 of light is 0.22 magnitudes under a sky limit, seeing 0.28, sky 0.15, haze 0.1.
    expected = math.hypot(1.25 * math.log10(1.5), 2.5 * math.log10(1.3) * 0.97, 0.15, 0.1)
    assert found.uncertainty_mag == pytest.approx(expected, abs=0.04)
    assert any("factor" in sentence for sentence in found.assumptions)


def test_the_sky_is_taken_as_no_surer_than_the_moonlight_model(authority):
    # Krisciunas & Schaefer 1991, abstract: 8 to 23 % (published); 0.25 mag against measured skies.
    row = authority["ks91_accuracy"]
    assert row["tolerance"] <= DARK_SKY_ERROR_MAG
    assert 2.5 * math.log10(1.0 + max(row["expected"])) <= DARK_SKY_ERROR_MAG


def test_twilight_is_less_sure_than_night_and_people_less_than_cameras():
    # The Sun stands 12 degrees below the horizon of the place at this time (test_windows).
    dusk = 60379.76
    assert estimate(mid_mjd=dusk).uncertainty_mag > estimate().uncertainty_mag
    eyes = Gear("eyepiece", 200.0)
    assert estimate(eyes).uncertainty_mag > estimate().uncertainty_mag
    assert estimate(Gear("eye", 7.0)).uncertainty_mag < estimate(eyes).uncertainty_mag
    assert estimate(eyes).saturation_mag is None


def test_draws_of_the_unknowns_scatter_as_the_estimate_says():
    # The same question with everything drawn at random; the estimate adds in quadrature.
    rng = np.random.default_rng(4)
    drawn = []
    for _ in range(400):
        light, blur = 1.5 ** rng.normal(), 1.3 ** rng.normal()
        optics = CameraOptics(200.0, 1.5, obstruction=0.3, throughput=0.4 * light, height_m=500.0)
        limit = camera_limit_mag(
            optics,
            exposure_s=60.0,
            n_exposures=4,
            sky_mag=estimate().sky_mag + 0.3 * rng.normal(),
            airmass=1.0,
            seeing_arcsec=3.0 * blur,
        )
        drawn.append(float(limit) + 0.1 * rng.normal())
    found = estimate()
    assert np.mean(drawn) == pytest.approx(found.limit_mag, abs=0.06)
    assert np.std(drawn) == pytest.approx(found.uncertainty_mag, rel=0.15)


@pytest.mark.parametrize("changes", [{"duration_s": 0.0}, {"dec_deg": -80.0}])
def test_a_frame_that_cannot_be_has_no_estimate(changes):
    with pytest.raises(DepthError, match="horizon"):
        estimate(**changes)
