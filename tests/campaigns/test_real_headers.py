"""Headers of real frames, through the API into the ledger's footprint; astropy is the oracle."""

import warnings
from datetime import datetime, timedelta

import numpy as np
import pytest
from astropy import units
from astropy.coordinates import SkyCoord, SkyOffsetFrame
from astropy.time import Time
from astropy.wcs import WCS
from rest_framework.test import APIClient

import campaigns.bridge as bridge
from campaigns.models import Frame
from skytiles.sphere.angles import separations_deg
from skytiles.tiling.header_values import sexagesimal
from tests.campaigns import stage
from tests.skytiles.tiling.real_frames import real_frame

pytestmark = pytest.mark.django_db

# A night on which each of the fields without a date is up somewhere.
TYPED = {"mid_time": "2014-07-31T04:50:00Z", "duration_s": 60.0}
SIZE = {"NAXIS1": 1000, "NAXIS2": 800}


@pytest.fixture
def report(coordinator):
    """Report a header as a robot would, all cards of it, from below its field."""

    def send(cards, *, ra_deg, dec_deg, typed=None, **gear):
        mid = _mid_time(cards, typed or {})
        camera = stage.make_instrument(
            stage.make_site(
                stage.make_person("Observer Ada"),
                latitude_deg=dec_deg,
                longitude_deg=_longitude_below(ra_deg, mid),
            ),
            **gear,
        )
        campaign = _rehearsal(coordinator, ra_deg, dec_deg, mid=mid)
        client = APIClient()
        client.force_authenticate(camera.owner)
        body = {"instrument": camera.pk, "header": cards, **(typed or {})}
        return client.post(f"/api/v1/campaigns/{campaign.pk}/frames", body, format="json")

    return send


def _mid_time(cards, typed):
    text = typed.get("mid_time") or Time(_date_obs(cards), format="isot").isot + "Z"
    return datetime.fromisoformat(text)


def _date_obs(cards):
    if "/" not in cards["DATE-OBS"]:
        return cards["DATE-OBS"]
    day, month, year = cards["DATE-OBS"].split("/")
    return f"19{year}-{month}-{day}T{cards['UT']}"


def _longitude_below(ra_deg, mid):
    sidereal = Time(mid).sidereal_time("mean", "greenwich").deg
    return (ra_deg - sidereal + 180.0) % 360.0 - 180.0


def _rehearsal(coordinator, ra_deg, dec_deg, *, mid):
    cone = {"type": "cone", "ra_deg": ra_deg, "dec_deg": dec_deg, "radius_deg": 1.0}
    alert = stage.cone_alert(event_time=mid - timedelta(hours=1)) | {"constraints": [cone]}
    clock_now = mid + timedelta(hours=1)
    return stage.launch(coordinator, alert=alert, is_rehearsal=True, clock_now=clock_now)


def _corners_by_astropy(header, file, width_px, height_px):
    xs, ys = (
        [0.5, width_px + 0.5, width_px + 0.5, 0.5],
        [0.5, 0.5, height_px + 0.5, height_px + 0.5],
    )
    with warnings.catch_warnings():
        warnings.simplefilter("ignore")
        return np.transpose(WCS(header, naxis=2, fobj=file).all_pix2world(xs, ys, 1))


def _furthest_arcsec(corners, expected):
    """Each expected corner against the nearest of the corners."""
    (ras, decs), (found_ras, found_decs) = np.transpose(expected), np.transpose(corners)
    apart = separations_deg(ras[:, None], decs[:, None], found_ras[None], found_decs[None])
    return apart.min(axis=1).max() * 3600.0


# The file; what was typed beside it; the size where the header has none; tolerance, arcsec.
REAL = {
    "SIP of the fourth order": ("siponly.hdr", {}, {}, 0.01),
    "SIP, no date": ("irac_sip.hdr", TYPED, {}, 0.01),
    "SIP with a PC matrix, no picture": ("sip.fits", TYPED, SIZE, 0.01),
    "PC001001 of an old program": ("defunct_keywords.hdr", TYPED, SIZE, 0.01),
    "a photographic plate of 1976": ("dss.14.29.56-62.41.05.fits.gz", {}, {}, 1.0),
    # The polynomial of TPV is noted, not used: it moves this corner of a mosaic by 2.3 arcmin.
    "PV beside TAN": ("invalid_header.hdr", {}, {}, 180.0),
    "TPV": ("tpvonly.hdr", {}, {}, 180.0),
}


@pytest.mark.parametrize("case", REAL)
def test_a_real_header_gives_the_footprint_that_astropy_gives(case, report):
    name, typed, size, tolerance_arcsec = REAL[case]
    header, file, cards = real_frame(name)
    cards = {**cards, **size}
    expected = _corners_by_astropy(header, file, cards["NAXIS1"], cards["NAXIS2"])
    answer = report(
        cards, ra_deg=float(cards["CRVAL1"]), dec_deg=float(cards["CRVAL2"]), typed=typed
    )
    assert answer.status_code == 201, answer.content
    frame = answer.json()["frame"]
    assert _furthest_arcsec(frame["footprint"]["corners_deg"], expected) < tolerance_arcsec
    assert Frame.objects.get().footprint == frame["footprint"]
    assert any("distortion" in note for note in answer.json()["notes"]) is ("PV" in case)


def test_nothing_of_a_real_header_is_kept_that_tells_of_people_or_places(report):
    *_, cards = real_frame("siponly.hdr")
    assert report(cards, ra_deg=274.8, dec_deg=-25.97).status_code == 201
    kept = Frame.objects.get().header
    assert {"A_0_2", "B_ORDER", "CD1_1", "EXPTIME"} <= set(kept)
    assert not {"OBSERVER", "ORIGIN", "TELESCOP", "OBJECT", "COMMENT", "OBSLAT", "OBSLON"} & set(
        kept
    )
    assert len(cards) > 200 > 60 > len(kept)


POINTED = {
    "NAXIS1": 3124,
    "NAXIS2": 2088,
    "OBJCTRA": "09 20 00",
    "OBJCTDEC": "+30 00 00",
    "FOCALLEN": 1000.0,
    "XPIXSZ": 7.52,
    "DATE-OBS": "2024-03-14T20:50:00",
    "EXPTIME": 120.0,
}
# 206.264806 x 7.52 / 1000 arcsec a pixel, by the definition.
POINTED_SIDES_DEG = [n * 206.264806 * 7.52 / 1000.0 / 3600.0 for n in (3124, 2088)]


def _rectangle_by_astropy(ra_deg, dec_deg, sides_deg, *, rotation_deg):
    frame = SkyOffsetFrame(
        origin=SkyCoord(ra_deg, dec_deg, unit="deg"), rotation=rotation_deg * units.deg
    )
    half_width, half_height = sides_deg[0] / 2.0, sides_deg[1] / 2.0
    corners = SkyCoord(
        [half_width, -half_width, -half_width, half_width] * units.deg,
        [half_height, half_height, -half_height, -half_height] * units.deg,
        frame=frame,
    ).icrs
    return np.transpose([corners.ra.deg, corners.dec.deg])


@pytest.mark.parametrize("rotation_deg", [0.0, 30.0, -75.0])
def test_a_typed_rotation_makes_a_rectangle_of_a_header_without_plate_solution(
    report, rotation_deg
):
    answer = report(
        POINTED,
        ra_deg=140.0,
        dec_deg=30.0,
        typed={"rotation_deg": rotation_deg},
        rotation_deg=None,
    )
    corners = answer.json()["frame"]["footprint"]["corners_deg"]
    expected = _rectangle_by_astropy(140.0, 30.0, POINTED_SIDES_DEG, rotation_deg=rotation_deg)
    assert _furthest_arcsec(corners, expected) < 1.0
    assert answer.json()["notes"] == []


def test_without_a_rotation_only_the_circle_inside_counts_and_this_is_said(report):
    answer = report(POINTED, ra_deg=140.0, dec_deg=30.0, rotation_deg=None).json()
    assert answer["frame"]["footprint"]["shape"] == "circle"
    assert answer["frame"]["footprint"]["diameter_deg"] == pytest.approx(min(POINTED_SIDES_DEG))
    assert "angle is unknown" in answer["notes"][0]


def test_the_angle_from_my_gear_counts_like_a_typed_one(report):
    answer = report(POINTED, ra_deg=140.0, dec_deg=30.0, rotation_deg=30.0).json()
    expected = _rectangle_by_astropy(140.0, 30.0, POINTED_SIDES_DEG, rotation_deg=30.0)
    assert _furthest_arcsec(answer["frame"]["footprint"]["corners_deg"], expected) < 1.0


def test_typed_values_stand_in_for_what_the_header_lacks_or_has_wrong(report):
    bare = {name: POINTED[name] for name in ("NAXIS1", "NAXIS2", "FOCALLEN", "XPIXSZ")}
    wrong = {**bare, "EXPTIME": 120_000.0, "DATE-OBS": "2024-03-15T09:50:00", "CTYPE1": "RA---ZPN"}
    typed = {
        "ra_deg": 15.0 * sexagesimal("09 20 00"),
        "dec_deg": 30.0,
        "mid_time": "2024-03-14T20:51:00Z",
        "duration_s": 120.0,
    }
    answer = report(wrong, ra_deg=140.0, dec_deg=30.0, typed=typed)
    assert answer.status_code == 201, answer.content
    frame = Frame.objects.get()
    assert (frame.ra_deg, frame.dec_deg) == pytest.approx((140.0, 30.0))
    assert frame.duration_s == 120.0
    assert bridge.mjd_of(frame.mid_time) == pytest.approx(Time("2024-03-14T20:51:00").mjd)
    # What is kept is what the header said.
    assert frame.header["EXPTIME"] == 120_000.0
