from pathlib import Path

import astropy.wcs
import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from skytiles.errors import HeaderError, SkytilesError
from skytiles.sphere.angles import separations_deg
from skytiles.sphere.calendar import mjd_from_iso
from skytiles.tiling.frame_header import plate_scale_arcsec, read_frame_header, wcs_footprint

REAL = Path(astropy.wcs.__file__).parent / "tests" / "data"

SOLVED = {
    "NAXIS1": 1024,
    "NAXIS2": 768,
    "CTYPE1": "RA---TAN",
    "CTYPE2": "DEC--TAN",
    "CRPIX1": 512.5,
    "CRPIX2": 384.5,
    "CRVAL1": 10.0,
    "CRVAL2": 41.0,
    "CDELT1": -5e-4,
    "CDELT2": 5e-4,
    "CROTA2": 30.0,
    "DATE-OBS": "2027-03-14T05:06:07",
    "EXPTIME": 60.0,
    "FILTER": "V",
}
POINTED = {
    "OBJCTRA": "18 36 56.3",
    "OBJCTDEC": "-00 47 01",
    "FOCALLEN": 1000.0,
    "XPIXSZ": 7.52,
    "NAXIS1": 3124,
    "NAXIS2": 2088,
    "DATE-OBS": "2027-03-14T05:06:07",
    "EXPOSURE": 30.0,
}


def without(fields, *names):
    return {key: value for key, value in fields.items() if key not in names}


# Published example.


def test_the_plate_scale(authority):
    # fixtures/authority, scale: definition; recomputed.
    row = authority["scale"]
    given_, expected = row["inputs"], row["expected"]
    scale = plate_scale_arcsec(
        pixel_um=given_["pixel_um"],
        binning=given_["binning"],
        focal_length_mm=given_["focal_length_mm"],
    )
    assert scale == pytest.approx(expected[0], abs=row["tolerance"][0])
    assert given_["width_px"] * scale / 3600 == pytest.approx(expected[1], abs=1e-5)
    assert given_["height_px"] * scale / 3600 == pytest.approx(expected[2], abs=1e-5)


# Real frames.


def test_a_real_survey_frame_is_read_whole(real_frame):
    *_, cards = real_frame("siponly.hdr")
    read = read_frame_header(cards)
    assert read.duration_s == 60.0
    assert read.band == "R"
    assert read.mid_mjd == pytest.approx(mjd_from_iso(cards["DATE-OBS"]) + 30.0 / 86400.0)
    assert read.footprint.area_deg2 == pytest.approx(0.66, abs=0.01)


def test_an_old_plate_with_its_old_date_is_read(real_frame):
    *_, cards = real_frame("dss.14.29.56-62.41.05.fits.gz")
    read = read_frame_header(cards)
    assert mjd_from_iso("1976-01-01") < read.mid_mjd < mjd_from_iso("1977-01-01")


# Headers of cameras.


def test_a_solved_frame():
    read = read_frame_header(SOLVED)
    assert read.footprint.area_deg2 == pytest.approx(1024 * 768 * 25e-8, rel=1e-3)
    assert (read.ra_deg, read.dec_deg) == pytest.approx((10.0, 41.0))
    assert read.mid_mjd == pytest.approx(mjd_from_iso("2027-03-14T05:06:37"))
    assert (read.duration_s, read.band, read.notes) == (60.0, "V", ())


def test_a_compressed_frame_has_the_size_of_its_image():
    header = SOLVED | {"NAXIS1": 8, "NAXIS2": 768, "ZNAXIS1": 1024, "ZNAXIS2": 768}
    assert wcs_footprint(header).area_deg2 == pytest.approx(wcs_footprint(SOLVED).area_deg2)


def test_an_unsolved_frame_counts_the_circle_inside_at_any_angle():
    read = read_frame_header(POINTED)
    assert read.ra_deg == pytest.approx((18 + 36 / 60 + 56.3 / 3600) * 15)
    assert read.dec_deg == pytest.approx(-(47 / 60 + 1 / 3600))
    assert (read.width_deg, read.height_deg) == pytest.approx((1.34602, 0.89964), abs=1e-5)
    assert read.footprint.shape == "circle"
    assert read.footprint.diameter_deg == pytest.approx(0.89964, abs=1e-5)
    assert "angle is unknown" in read.notes[0]


def test_plain_numbers_are_degrees_and_text_is_hours():
    degrees = without(POINTED, "OBJCTRA", "OBJCTDEC") | {"RA": 279.234583, "DEC": "-0.783611"}
    hours = degrees | {"RA": "18:36:56.3", "DEC": "-00:47:01"}
    assert read_frame_header(degrees).ra_deg == pytest.approx(279.234583)
    assert read_frame_header(hours).ra_deg == pytest.approx(279.234583, abs=1e-5)


def test_coordinates_of_date_are_turned_to_j2000():
    read = read_frame_header(POINTED | {"EQUINOX": 2027.2})
    moved = separations_deg(read.ra_deg, read.dec_deg, 279.234583, -0.783611)
    # 27.2 years of 50.29 arcsec parallel to the ecliptic, whose pole is 23.44 degrees away.
    ra, dec, tilt = np.radians([279.234583, -0.783611, 23.44])
    sin_latitude = np.sin(dec) * np.cos(tilt) - np.cos(dec) * np.sin(tilt) * np.sin(ra)
    expected = 27.2 * 50.29 / 3600.0 * np.sqrt(1.0 - sin_latitude**2)
    assert moved == pytest.approx(expected, rel=1e-3)
    assert read.ra_deg < 279.23


def test_without_optics_there_is_a_position_but_no_footprint():
    read = read_frame_header(without(POINTED, "FOCALLEN"))
    assert read.footprint is None
    assert "size of the field" in read.notes[0]


@pytest.mark.parametrize(
    ("cards", "mid"),
    [
        ({"DATE-OBS": "2027-03-14", "TIME-OBS": "05:06:07"}, "2027-03-14T05:06:22"),
        ({"DATE-OBS": "14/03/97", "UT": "05:06:07"}, "1997-03-14T05:06:22"),
        (
            {"DATE-OBS": "2027-03-14T05:06:07", "DATE-END": "2027-03-14T05:16:07"},
            "2027-03-14T05:11:07",
        ),
        (
            {"DATE-OBS": "2027-03-14T05:06:07", "DATE-AVG": "2027-03-14T05:09:00"},
            "2027-03-14T05:09:00",
        ),
        ({"MJD-OBS": 61478.25}, "2027-03-14T06:00:15"),
        ({"JD": 2461478.75}, "2027-03-14T06:00:15"),
        ({"DATE-OBS": "2027-03-14T05:06:44.0", "TIMESYS": "TAI"}, "2027-03-14T05:06:22"),
    ],
)
def test_middles_of_exposures(cards, mid):
    read = read_frame_header(without(POINTED, "DATE-OBS") | cards)
    assert read.mid_mjd == pytest.approx(mjd_from_iso(mid), abs=1e-8)


def test_a_stack_without_an_end_says_so():
    assert "stack" in read_frame_header(POINTED | {"STACKCNT": 20}).notes[0]


REFUSED = {
    "no position": (without(POINTED, "OBJCTRA"), "position"),
    "impossible dec": (POINTED | {"OBJCTDEC": "-99 00 00"}, "declination -99"),
    "impossible ra": (POINTED | {"OBJCTRA": "25 00 00"}, "375"),
    "minutes": (POINTED | {"OBJCTRA": "18 77 00"}, "OBJCTRA"),
    "words": (POINTED | {"OBJCTDEC": "north"}, "OBJCTDEC"),
    "no date": (without(POINTED, "DATE-OBS"), "date and time"),
    "bare date": (POINTED | {"DATE-OBS": "2027-03-14"}, "date and time"),
    "bad date": (POINTED | {"DATE-OBS": "2027-13-14T00:00:00"}, "DATE-OBS"),
    "time system": (POINTED | {"TIMESYS": "GPS"}, "TIMESYS"),
    "no exposure": (without(POINTED, "EXPOSURE"), "EXPTIME"),
    "negative exposure": (POINTED | {"EXPOSURE": -3.0}, "EXPTIME"),
    "exposure in words": (POINTED | {"EXPOSURE": "long"}, "EXPOSURE"),
    "milliseconds": (POINTED | {"EXPOSURE": 30000.0}, "milliseconds"),
    "milliseconds by two keywords": (
        POINTED | {"EXPOSURE": 5.0, "EXPTIME": 5000.0},
        "milliseconds",
    ),
    "milliseconds by the end": (
        POINTED | {"EXPOSURE": 5000.0, "DATE-END": "2027-03-14T05:06:12"},
        "If it was 5 s",
    ),
    "FK4": (POINTED | {"EQUINOX": 1950.0}, "equinox 1950"),
    "projection": (SOLVED | {"CTYPE1": "RA---AIT", "CTYPE2": "DEC--AIT"}, "plate solver"),
    "galactic": (SOLVED | {"CTYPE1": "GLON-TAN", "CTYPE2": "GLAT-TAN"}, "plate solver"),
    "no CRPIX": (without(SOLVED, "CRPIX1"), "CRPIX1"),
    "no scale": (SOLVED | {"CDELT1": 0.0}, "no size"),
    "crval": (SOLVED | {"CRVAL2": 141.0}, "Dec 141"),
    "unit": (SOLVED | {"CUNIT1": "hour"}, "CUNIT1"),
    "whole sky": (SOLVED | {"CDELT1": -5.0, "CDELT2": 5.0}, "quarter of the sky"),
}


@pytest.mark.parametrize("case", REFUSED)
def test_bad_headers_are_refused_with_advice(case):
    cards, said = REFUSED[case]
    with pytest.raises(HeaderError, match=said) as refusal:
        read_frame_header(cards)
    assert refusal.value.code == "bad-header"
    assert refusal.value.advice


def test_a_solution_without_a_size_has_no_footprint():
    bare = without(SOLVED, "NAXIS1", "NAXIS2")
    assert read_frame_header(bare).footprint is None
    with pytest.raises(HeaderError, match="size of its image"):
        wcs_footprint(bare)


KEYWORDS = st.sampled_from([*SOLVED, *POINTED, "CD1_1", "PC1_1", "EQUINOX", "LONPOLE", "A_2_0"])
VALUES = st.floats() | st.integers(-(10**12), 10**12) | st.text(max_size=12)


@settings(deadline=None, max_examples=300)
@given(
    st.sampled_from([SOLVED, POINTED, SOLVED | POINTED]),
    st.dictionaries(KEYWORDS, VALUES, max_size=4),
)
def test_any_damage_gives_a_frame_or_a_clear_refusal(whole, damage):
    try:
        outcome = read_frame_header(whole | damage).ra_deg >= 0.0
    except SkytilesError as refusal:
        outcome = bool(refusal.advice)
    assert outcome
