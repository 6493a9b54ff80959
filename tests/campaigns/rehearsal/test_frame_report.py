"""What simulated observers send."""

from datetime import UTC, datetime

import numpy as np
import pytest
from astropy.io import fits
from astropy.wcs import WCS

from campaigns.rehearsal.demo_network import read_demo
from campaigns.rehearsal.frame_report import (
    Shot,
    draw_limit_kind,
    frame_body,
    limit_shift_mag,
    seen_frame,
    tan_header,
)

SHOT = Shot(
    ra_deg=359.2,
    dec_deg=31.5,
    rotation_deg=30.0,
    mid_at=datetime(2024, 10, 5, 16, 0, 0, tzinfo=UTC),
    duration_s=300.0,
    limit_mag=13.2,
    limit_kind="3 sigma",
)


@pytest.fixture(scope="module")
def kits():
    demo = read_demo(40, np.random.default_rng(1))
    return {kit.name: kit for who in demo.observers for kit in who.kits}


def test_the_header_is_centred_where_the_camera_pointed(kits):
    header = tan_header(kits["135 mm lens"], SHOT)
    wcs = WCS(fits.Header(header), fix=False)
    middle = wcs.pixel_to_world_values((header["NAXIS1"] - 1) / 2, (header["NAXIS2"] - 1) / 2)
    assert np.array(middle) == pytest.approx([SHOT.ra_deg, SHOT.dec_deg], abs=1e-9)


def test_the_header_spans_the_registered_field(kits):
    kit = kits["135 mm lens"]
    header = tan_header(kit, SHOT)
    wcs = WCS(fits.Header(header), fix=False)
    row = (header["NAXIS2"] - 1) / 2
    left, right = wcs.pixel_to_world([-0.5, header["NAXIS1"] - 0.5], [row, row])
    assert left.separation(right).deg == pytest.approx(kit.registered["width_deg"], abs=0.002)


def test_the_top_of_the_frame_points_to_the_position_angle(kits):
    header = tan_header(kits["refractor 80 mm"], SHOT)
    wcs = WCS(fits.Header(header), fix=False)
    column, row = (header["NAXIS1"] - 1) / 2, (header["NAXIS2"] - 1) / 2
    middle, above = wcs.pixel_to_world([column, column], [row, row + 50])
    assert middle.position_angle(above).deg == pytest.approx(SHOT.rotation_deg, abs=0.01)


def test_the_exposure_is_centred_on_its_middle(kits):
    assert tan_header(kits["135 mm lens"], SHOT)["DATE-OBS"] == "2024-10-05T15:57:30.000"


def test_one_report_has_a_header_or_typed_fields_and_never_both(kits):
    for kit in kits.values():
        body = frame_body(kit, SHOT, instrument=1, claim=2)
        assert ("header" in body) != ("ra_deg" in body)


def test_eyes_name_the_faintest_star_they_saw(kits):
    assert draw_limit_kind(np.random.default_rng(1), kits["naked eye"]) == "faintest star seen"


def test_depth_is_capped_by_the_chart_it_was_compared_with(kits):
    kit = kits["50 mm lens"]
    seen = seen_frame(kit, SHOT, number=1, instrument=1, footprint={}, mid_s=0.0)
    assert seen.m50_mag == kit.chart_mag
    deep = seen_frame(kits["135 mm lens"], SHOT, number=1, instrument=1, footprint={}, mid_s=0.0)
    assert deep.m50_mag == pytest.approx(13.2 - 0.55)


def test_a_ninety_per_cent_limit_is_brighter_than_the_fifty_per_cent_one():
    assert limit_shift_mag("90 %", 0.2) == pytest.approx(0.4394, abs=1e-4)
