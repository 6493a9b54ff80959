"""From header cards or typed values to a frame report."""

import pytest

from campaigns.errors import InvalidInput
from campaigns.ingest.frame_report import read_report
from campaigns.ingest.header_keywords import allowed_cards
from skytiles.errors import HeaderError
from tests.campaigns.stage import DEC_DEG, RA_DEG

SOLVED = {
    "NAXIS": 2,
    "NAXIS1": 2400,
    "NAXIS2": 1600,
    "CTYPE1": "RA---TAN",
    "CTYPE2": "DEC--TAN",
    "CRVAL1": RA_DEG,
    "CRVAL2": DEC_DEG,
    "CRPIX1": 1200.5,
    "CRPIX2": 800.5,
    "CD1_1": -0.001,
    "CD1_2": 0.0,
    "CD2_1": 0.0,
    "CD2_2": 0.001,
    "DATE-OBS": "2024-03-14T20:50:00",
    "EXPTIME": 120.0,
    "FILTER": "V",
}
POINTED = {
    "NAXIS1": 2400,
    "NAXIS2": 1600,
    "OBJCTRA": "09 20 00",
    "OBJCTDEC": "+30 00 00",
    "DATE-OBS": "2024-03-14T20:50:00",
    "EXPTIME": 120.0,
}


def test_a_solved_header_gives_the_true_footprint(camera):
    report = read_report({"header": SOLVED}, camera)
    assert report.footprint.area_deg2 == pytest.approx(2.4 * 1.6, rel=2e-3)
    assert report.footprint.centre_ra_deg == pytest.approx(RA_DEG, abs=1e-6)
    # The middle of 120 s that began at 20:50.
    assert report.mid_time.isoformat() == "2024-03-14T20:51:00+00:00"
    assert (report.duration_s, report.band, report.origin) == (120.0, "V", "header")


def test_a_header_with_a_position_alone_takes_the_size_of_the_instrument(camera):
    report = read_report({"header": POINTED}, camera)
    assert report.footprint.smallest_side_deg == pytest.approx(camera.height_deg, abs=1e-3)
    assert report.footprint.centre_ra_deg == pytest.approx(140.0, abs=1e-6)


def test_cards_that_tell_of_people_and_places_are_never_kept(camera):
    private = {"SITELAT": "48 07 24", "OBSERVER": "Ada", "LAT-OBS": 48.1, "FILENAME": "/home/ada/x"}
    report = read_report({"header": {**SOLVED, **private}}, camera)
    assert not set(private) & set(report.header)
    assert report.header["CRVAL1"] == RA_DEG


def test_only_plain_values_are_kept():
    kept = allowed_cards({"exptime": 5, "FILTER": "x" * 500, "CRVAL1": [1], "CRVAL2": {"a": 1}})
    assert kept == {"EXPTIME": 5, "FILTER": "x" * 80}


@pytest.mark.parametrize(
    "broken",
    [
        {name: value for name, value in SOLVED.items() if not name.startswith(("CR", "CT", "CD"))},
        {**SOLVED, "CRVAL2": 99.0},
        {**SOLVED, "EXPTIME": 120_000_000.0},
        {name: value for name, value in SOLVED.items() if name != "DATE-OBS"},
    ],
    ids=["no position", "impossible coordinates", "milliseconds", "no date"],
)
def test_a_broken_header_is_a_clear_problem(camera, broken):
    with pytest.raises(HeaderError) as refusal:
        read_report({"header": broken}, camera)
    assert refusal.value.advice


def test_a_form_without_a_position_names_what_is_missing(camera):
    with pytest.raises(InvalidInput) as refusal:
        read_report({"duration_s": 5.0}, camera)
    assert [one.field for one in refusal.value.problems] == ["ra_deg", "dec_deg", "mid_time"]
