import numpy as np
import pytest

from skytiles.depth.air_extinction import extinction_mag, rayleigh_mag
from skytiles.depth.bands import BANDS, nearest_band
from skytiles.depth.depth_error import DepthError

POGSON = 2.5 / np.log(10.0)


def test_molecules_scatter_as_another_formula_says(authority):
    # Hansen & Travis 1974 (from memory), against Hayes & Latham 1975 in the code.
    row = authority["rayleigh_ht74"]
    found = [rayleigh_mag(wavelength_um) for wavelength_um in row["inputs"]["wavelengths_um"]]
    assert found == pytest.approx(POGSON * np.array(row["expected"]), rel=row["tolerance"])


def test_extinction_of_a_mountain_that_was_measured(authority):
    # ESO quality control; Patat 2003 (from memory).
    row = authority["extinction_paranal"]
    found = [
        extinction_mag(band, height_m=row["inputs"]["height_m"]) for band in row["inputs"]["bands"]
    ]
    assert found == pytest.approx(row["expected"], abs=row["tolerance"])


def test_the_air_gets_clearer_with_height_and_towards_the_red():
    for band in BANDS:
        heights = [extinction_mag(band, height_m=height_m) for height_m in (0.0, 1e3, 3e3, 5e3)]
        assert heights == sorted(heights, reverse=True)
    reds = [extinction_mag(band) for band in "UBVI"]
    assert reds == sorted(reds, reverse=True)


def test_an_unknown_band_is_refused():
    with pytest.raises(DepthError, match="clear"):
        extinction_mag("purple")


@pytest.mark.parametrize(
    ("written", "band"),
    [
        ("V", "V"),
        ("g'", "g"),
        ("r-band", "r"),
        ("SDSS i", "i"),
        ("Johnson B", "B"),
        ("Luminance", "clear"),
        ("Red", "R"),
        ("Ha", "clear"),
        ("", "clear"),
    ],
)
def test_filters_as_people_write_them(written, band):
    assert nearest_band(written) == band
