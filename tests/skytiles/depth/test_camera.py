import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from skytiles.depth.air_extinction import extinction_mag
from skytiles.depth.bands import BANDS, band_named
from skytiles.depth.camera import (
    CameraOptics,
    camera_limit_mag,
    saturation_mag,
    signal_to_noise,
)
from skytiles.depth.depth_error import DepthError
from skytiles.depth.forecast import forecast_limit_mag
from skytiles.depth.gear import Gear

GARDEN = CameraOptics(aperture_mm=200.0, pixel_arcsec=1.5, band="V", read_noise_e=5.0)
SKY_LIMITED = {"sky_mag": 15.0, "read_noise_e": 0.0, "snr": 5.0}
READ_LIMITED = {"sky_mag": 60.0, "read_noise_e": 2000.0, "snr": 5.0}
SOURCE_LIMITED = {"sky_mag": 60.0, "read_noise_e": 0.0, "snr": 5000.0}
REGIMES = {"sky": SKY_LIMITED, "read": READ_LIMITED, "source": SOURCE_LIMITED}


def limit(*, aperture_mm=200.0, exposure_s=60.0, sky_mag, read_noise_e, snr, n_exposures=1):
    optics = CameraOptics(aperture_mm, 1.5, read_noise_e=read_noise_e, band="V")
    return float(
        camera_limit_mag(
            optics,
            exposure_s=exposure_s,
            n_exposures=n_exposures,
            sky_mag=sky_mag,
            airmass=1.0,
            seeing_arcsec=3.0,
            snr=snr,
        )
    )


def test_signal_to_noise_of_howell(authority):
    # Howell, Handbook of CCD Astronomy, sec. 4.4; Merline & Howell 1995 (from memory).
    row = authority["ccd_howell"]
    case = row["inputs"]
    found = signal_to_noise(
        case["star_e"],
        n_pixels=case["n_pixels"],
        sky_e=case["sky_e"],
        read_noise_e=case["read_noise_e"],
        dark_e=case["dark_e"],
    )
    assert found == pytest.approx(row["expected"], abs=row["tolerance"])


def test_zero_points_of_bessell(authority):
    # Bessell 1979, PASP 91, 589 (published, as tabulated in J. Huchra's notes).
    row = authority["zp_bessell79"]
    bands = [BANDS[name] for name in row["inputs"]["bands"]]
    fluxes, wavelengths, widths = row["expected"]
    assert [band.zero_flux_jy for band in bands] == fluxes
    assert [band.wavelength_um for band in bands] == wavelengths
    assert [band.relative_width for band in bands] == widths


def test_zero_points_of_the_other_bands(authority):
    # Campins et al. 1985; Schneider et al. 1983 (published, same notes).
    row = authority["zp_jhk_griz"]
    assert [BANDS[name].zero_flux_jy for name in row["inputs"]["bands"]] == row["expected"]


def test_photons_of_the_worked_example(authority):
    # J. Huchra's notes: 2.42 photons per second and square metre from V = 23.90 (published).
    row = authority["photons_v2390"]
    found = BANDS["V"].zero_photons_per_s_m2 * 10.0 ** (-0.4 * row["inputs"]["mag"])
    assert found == pytest.approx(row["expected"], abs=row["tolerance"])


def test_photons_of_magnitude_zero(authority):
    # Bessell 1979; Bessell, Castelli & Plez 1998, Table A2 (from memory).
    row = authority["photons_v0"]
    width_angstrom = BANDS["V"].relative_width * row["inputs"]["wavelength_angstrom"]
    found = BANDS["V"].zero_photons_per_s_m2 / 1e4 / width_angstrom
    assert found == pytest.approx(row["expected"], rel=row["tolerance"])


@pytest.mark.parametrize("regime", REGIMES)
def test_limits_that_any_depth_code_must_meet(authority, regime):
    # Analytic (recomputed): four times the time, a brighter sky, four times the area.
    row = authority["depth_limits"]
    case = REGIMES[regime]
    before = limit(**case)
    changes = [
        limit(**case, exposure_s=240.0),
        limit(**{**case, "sky_mag": case["sky_mag"] - 1.0}),
        limit(**case, aperture_mm=400.0),
    ]
    assert np.array(changes) - before == pytest.approx(
        np.array(row["expected"][regime]), abs=row["tolerance"]
    )


def test_the_limit_has_the_signal_to_noise_that_was_asked_for():
    found = limit(sky_mag=20.0, read_noise_e=5.0, snr=5.0, n_exposures=4)
    optics = GARDEN
    extinguished = found + extinction_mag("V")
    star_e = optics.electrons_per_s * 240.0 * 10.0 ** (-0.4 * extinguished)
    sky_e = optics.electrons_per_s * 60.0 * 10.0 ** (-0.4 * 20.0) * 1.5**2
    n_pixels = 4.0 * np.pi * ((3.0 / 2.3548) ** 2 + 1.5**2 / 12.0) / 1.5**2
    stack = signal_to_noise(star_e, n_pixels=4.0 * n_pixels, sky_e=sky_e, read_noise_e=5.0)
    assert stack == pytest.approx(5.0, rel=1e-3)


@given(
    sky_mag=st.floats(14.0, 22.0),
    n_exposures=st.integers(1, 50),
    exposure_s=st.floats(1.0, 600.0),
    read_noise_e=st.floats(0.0, 20.0),
)
def test_stacking_is_never_better_than_one_long_exposure(
    sky_mag, n_exposures, exposure_s, read_noise_e
):
    case = {"sky_mag": sky_mag, "read_noise_e": read_noise_e, "snr": 5.0}
    stacked = limit(**case, exposure_s=exposure_s, n_exposures=n_exposures)
    single = limit(**case, exposure_s=exposure_s * n_exposures)
    assert stacked <= single + 1e-9
    assert stacked >= limit(**case, exposure_s=exposure_s) - 1e-9


def test_a_low_field_goes_less_deep_and_below_the_horizon_nothing_is_seen():
    masses = np.array([1.0, 1.5, 2.0, 3.0, np.inf])
    found = camera_limit_mag(
        GARDEN, exposure_s=60.0, n_exposures=1, sky_mag=20.5, airmass=masses, seeing_arcsec=3.0
    )
    assert (np.diff(found[:-1]) < 0.0).all()
    assert found[-1] == -np.inf


def test_an_obstruction_costs_its_area():
    clear = CameraOptics(200.0, 1.5, obstruction=0.0)
    blocked = CameraOptics(200.0, 1.5, obstruction=0.5)
    assert blocked.electrons_per_s == pytest.approx(0.75 * clear.electrons_per_s)


def test_a_longer_exposure_saturates_fainter_stars():
    short = saturation_mag(GARDEN, exposure_s=10.0, seeing_arcsec=3.0)
    long = saturation_mag(GARDEN, exposure_s=100.0, seeing_arcsec=3.0)
    assert long - short == pytest.approx(2.5)


def test_a_star_wholly_inside_a_pixel_fills_it_with_all_its_light():
    coarse = CameraOptics(200.0, 100.0, band="V")
    found = saturation_mag(coarse, exposure_s=10.0, seeing_arcsec=2.0)
    electrons = coarse.electrons_per_s * 10.0 * 10.0 ** (-0.4 * found)
    assert electrons == pytest.approx(50000.0)


@pytest.mark.parametrize(
    "broken",
    [
        {"aperture_mm": 0.0},
        {"aperture_mm": float("nan")},
        {"pixel_arcsec": -1.0},
        {"obstruction": 1.0},
        {"throughput": 0.0},
        {"read_noise_e": -1.0},
    ],
)
def test_optics_that_cannot_be_are_refused(broken):
    with pytest.raises(DepthError, match="Correct the instrument"):
        CameraOptics(**{"aperture_mm": 100.0, "pixel_arcsec": 2.0, **broken})


def test_unknown_bands_are_refused_with_the_known_ones():
    with pytest.raises(DepthError, match="clear"):
        band_named("purple")


@pytest.mark.parametrize(
    "broken", [{"exposure_s": 0.0}, {"n_exposures": 0}, {"seeing_arcsec": 0.0}]
)
def test_exposures_that_cannot_be_are_refused(broken):
    usual = {"exposure_s": 60.0, "n_exposures": 1, "seeing_arcsec": 3.0}
    with pytest.raises(DepthError):
        camera_limit_mag(GARDEN, sky_mag=20.0, airmass=1.0, **{**usual, **broken})


def test_a_garden_telescope_reaches_what_people_report():
    # A 20 cm telescope, 4 x 60 s, suburban sky: a limit that owners of such gear would believe.
    gear = Gear("camera", 200.0, pixel_arcsec=1.5, obstruction=0.3)
    found = forecast_limit_mag(gear, sky_mag=20.0, altitudes_deg=np.array([60.0]))
    assert 17.0 < found[0] < 20.0


def test_forecasts_of_all_kinds_of_gear_are_ordered():
    altitudes, sky = np.array([60.0]), 20.5
    kinds = [
        Gear("eye", 7.0),
        Gear("binoculars", 50.0),
        Gear("eyepiece", 200.0),
        Gear("camera", 200.0),
    ]
    found = [forecast_limit_mag(gear, sky_mag=sky, altitudes_deg=altitudes)[0] for gear in kinds]
    assert found == sorted(found)
