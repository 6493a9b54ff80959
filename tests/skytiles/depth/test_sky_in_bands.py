import numpy as np
import pytest

from skytiles.depth.air_extinction import extinction_mag
from skytiles.depth.bands import BANDS
from skytiles.depth.depth_error import DepthError
from skytiles.depth.sky_brightness import sky_brightness_mag, twilight_nl
from skytiles.depth.sky_over_place import sky_over_place_mag
from skytiles.depth.twilight_colour import measured_twilight_mag, twilight_colour_mag
from skytiles.night.altitude import altitudes_deg
from skytiles.night.place import Place

DARK = {
    "sun_altitudes_deg": -40.0,
    "moon_altitudes_deg": -30.0,
    "moon_separations_deg": 90.0,
    "moon_phase_angles_deg": 90.0,
}
MOONLIT = DARK | {
    "moon_altitudes_deg": 40.0,
    "moon_separations_deg": 60.0,
    "moon_phase_angles_deg": 0.0,
}


def test_twilight_that_was_measured_in_five_bands(authority):
    # Patat et al. 2006, Table 1 (published, in part from memory).
    row = authority["twilight_patat_bands"]
    suns = np.array(row["inputs"]["sun_altitudes_deg"], dtype=float)
    assert measured_twilight_mag(suns, "V") == pytest.approx(row["expected"], abs=row["tolerance"])
    for band, coefficients in row["inputs"]["coefficients"].items():
        parabola = np.polynomial.Polynomial(coefficients)(90.0 - suns - 95.0)
        assert measured_twilight_mag(suns, band) == pytest.approx(parabola)
        assert twilight_colour_mag(suns, band) == pytest.approx(
            parabola - np.array(row["expected"]), abs=row["tolerance"]
        )


def test_twilight_in_a_band_that_nobody_measured():
    with pytest.raises(DepthError, match="nearest"):
        measured_twilight_mag(-10.0, "J")
    assert twilight_colour_mag(-10.0, "i") == twilight_colour_mag(-10.0, "I")


@pytest.mark.parametrize("band", BANDS)
def test_a_dark_zenith_has_the_colour_of_the_dark_sky(band):
    found = sky_brightness_mag(21.0, 90.0, **DARK, band=band)
    assert found == pytest.approx(21.0 + BANDS[band].sky_colour_mag, abs=1e-6)


def test_moonlight_costs_more_in_the_blue_than_in_the_red():
    lost = [
        sky_brightness_mag(21.5, 60.0, **DARK, band=band)
        - sky_brightness_mag(21.5, 60.0, **MOONLIT, band=band)
        for band in "BVRI"
    ]
    assert lost == sorted(lost, reverse=True)
    # Krisciunas & Schaefer 1991: a full Moon takes about three magnitudes from a dark V sky.
    assert lost[1] == pytest.approx(3.0, abs=0.6)


def test_a_moonlit_sky_has_the_colour_of_the_moon_and_of_the_air():
    # By hand: a full Moon alone over a black sky, Krisciunas & Schaefer 1991, eq. 15, in two bands.
    masses = (1.0 - 0.96 * np.cos(np.radians([40.0, 60.0])) ** 2) ** -0.5
    brightness = {}
    for band in "BV":
        k = extinction_mag(band)
        brightness[band] = 10.0 ** (-0.4 * k * masses[0]) * (1.0 - 10.0 ** (-0.4 * k * masses[1]))
    expected = 0.9 - 2.5 * np.log10(brightness["B"] / brightness["V"])
    found = [
        sky_brightness_mag(30.0, 60.0, **MOONLIT, band=band, extinction_mag=extinction_mag(band))
        for band in "BV"
    ]
    assert found[0] - found[1] == pytest.approx(expected, abs=1e-3)


def test_lamps_do_not_brighten_twilight():
    added = [
        float(
            10.0
            ** (-0.4 * sky_brightness_mag(zenith_mag, 50.0, **DARK | {"sun_altitudes_deg": -10.0}))
        )
        - float(10.0 ** (-0.4 * sky_brightness_mag(zenith_mag, 50.0, **DARK)))
        for zenith_mag in (22.0, 18.0)
    ]
    assert added[0] == pytest.approx(added[1], rel=1e-4)
    assert twilight_nl(-30.0, 50.0) == 0.0


def test_the_sky_over_a_place_follows_its_moon():
    # Full Moon on 2024-03-25 07:00 UT (almanac); a direction opposite the Moon and one near it.
    place = Place(48.1, 11.6, 500.0)
    full, new = np.array([60393.95]), np.array([60379.95])
    ras, decs = np.array([190.0, 250.0]), np.array([20.0, 60.0])

    def sky(mjds, band):
        heights = altitudes_deg([place], ras, decs, mjds)[0]
        return sky_over_place_mag(
            place, 21.5, ras_deg=ras, decs_deg=decs, mjds=mjds, altitudes_deg=heights, band=band
        )[:, 0]

    assert (sky(full, "V") < sky(new, "V") - 1.5).all()
    assert sky(full, "V")[0] < sky(full, "V")[1]
    assert (sky(new, "B") > sky(new, "V")).all()
