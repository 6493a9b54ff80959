"""Distorted frames, mosaics, circles, fields over a pole, against astropy.wcs and definitions."""

import warnings

import numpy as np
import pytest
from astropy.io import fits
from astropy.wcs import WCS
from hypothesis import given, settings
from hypothesis import strategies as st

from skytiles.errors import FootprintError, HeaderError
from skytiles.sphere.angles import separations_deg, unit_vectors
from skytiles.sphere.healpix_door import n_pixels, pixel_centres
from skytiles.tiling.covered_many import covered_pixels_many
from skytiles.tiling.footprint import circle_footprint, outline_footprint, rectangle_footprint
from skytiles.tiling.footprint_json import footprint_from_json
from skytiles.tiling.frame_header import wcs_footprint
from skytiles.tiling.mosaic import mosaic_footprint
from skytiles.tiling.mosaic_header import read_mosaic_header
from skytiles.tiling.pixels_under import covered_pixels, pixels_under

ORDER = 9
SIZE = 1000
# One degree and a half wide; a bend of 1e-5 pixel^-2 moves a side by a few pixels.
STEP_DEG = 1.5e-3
# Pixels this near to the border (image pixels) may fall on either side of it: a bent side is drawn
# to half a pixel.
EDGE_PX = 0.6


def header(ra_deg, dec_deg, *, turn_deg=30.0, cubic=0.0, square=0.0, step_deg=STEP_DEG):
    turn = np.radians(turn_deg)
    cd = step_deg * np.array([[-np.cos(turn), np.sin(turn)], [np.sin(turn), np.cos(turn)]])
    cards = {
        "NAXIS": 2,
        "NAXIS1": SIZE,
        "NAXIS2": SIZE,
        "CTYPE1": "RA---TAN-SIP",
        "CTYPE2": "DEC--TAN-SIP",
        "CRPIX1": 480.0,
        "CRPIX2": 530.0,
        "CRVAL1": ra_deg,
        "CRVAL2": dec_deg,
        "CD1_1": cd[0, 0],
        "CD1_2": cd[0, 1],
        "CD2_1": cd[1, 0],
        "CD2_2": cd[1, 1],
    }
    # Barrel or pincushion: u (u^2 + v^2), v (u^2 + v^2); and a skew.
    sip = {"A_3_0": cubic, "A_1_2": cubic, "B_0_3": cubic, "B_2_1": cubic, "A_0_2": square}
    return cards | {"A_ORDER": 3, "B_ORDER": 3} | sip


def seen_by_astropy(cards, ras_deg, decs_deg):
    """Image pixels (FITS) of directions, nan where astropy finds none."""
    with warnings.catch_warnings():
        warnings.simplefilter("ignore")
        wcs = WCS(fits.Header(cards))
        return wcs.all_world2pix(ras_deg, decs_deg, 1, tolerance=1e-4, maxiter=50, quiet=True)


def near(ra_deg, dec_deg, radius_deg, order=ORDER):
    """Pixels near a direction: all of the coarse ones that are, tested one by one."""
    coarse = np.arange(n_pixels(5))
    is_near = separations_deg(ra_deg, dec_deg, *pixel_centres(5, coarse)) < radius_deg + 2.0
    shift = 2 * (order - 5)
    pixels = (coarse[is_near][:, None] << shift) + np.arange(1 << shift)
    pixels = pixels.ravel()
    ras, decs = pixel_centres(order, pixels)
    chosen = separations_deg(ra_deg, dec_deg, ras, decs) < radius_deg
    return pixels[chosen], ras[chosen], decs[chosen]


def check_against_astropy(cards, *, edge_px=EDGE_PX):
    ra, dec = cards["CRVAL1"], cards["CRVAL2"]
    pixels, ras, decs = near(ra, dec, 1.6)
    xs, ys = seen_by_astropy(cards, ras, decs)
    inside = np.minimum.reduce([xs - 0.5, ys - 0.5, SIZE + 0.5 - xs, SIZE + 0.5 - ys])
    is_clear = np.abs(inside) > edge_px
    found = np.isin(pixels, pixels_under(wcs_footprint(cards), ORDER))
    assert (inside > 0.0).sum() > 100
    assert (found == (inside > 0.0))[is_clear].all()
    return found.sum()


PLACES = [(150.0, 20.0), (0.05, -40.0), (300.0, 89.7), (10.0, -89.2)]


@pytest.mark.parametrize("place", PLACES)
@pytest.mark.parametrize("cubic", [0.0, 4e-8, -4e-8, 1.5e-7])
def test_distorted_frames_cover_what_astropy_puts_on_them(place, cubic):
    check_against_astropy(header(*place, cubic=cubic, square=2e-5))


@settings(deadline=None, max_examples=12, derandomize=True)
@given(
    ra=st.floats(0.0, 359.9),
    dec=st.floats(-90.0, 90.0),
    turn=st.floats(0.0, 360.0),
    cubic=st.floats(-1e-7, 1.5e-7),
    square=st.floats(-5e-5, 5e-5),
)
def test_any_distorted_frame_covers_what_astropy_puts_on_it(ra, dec, turn, cubic, square):
    check_against_astropy(header(ra, dec, turn_deg=turn, cubic=cubic, square=square))


def test_points_stand_along_sides_only_where_they_bend():
    straight = wcs_footprint(header(150.0, 20.0))
    barely = wcs_footprint(header(150.0, 20.0, cubic=1e-12))
    bent = wcs_footprint(header(150.0, 20.0, cubic=1e-7))
    assert len(straight.corners) == len(barely.corners) == 4
    assert 16 <= len(bent.corners) <= 64
    assert len(bent.pieces) == len(bent.corners)
    # The narrowest width, not the step between two points along a side.
    assert bent.smallest_side_deg == pytest.approx(1.5, rel=0.12)


def test_the_area_of_a_bent_frame_is_that_of_its_parts():
    # The Jacobian of the distortion, summed over a grid of the image.
    cubic = 1e-7
    cards = header(150.0, 20.0, cubic=cubic)
    grid = np.arange(2.0, SIZE, 4.0) + 0.5
    u, v = np.meshgrid(grid - 480.0, grid - 530.0)
    jacobian = (1 + cubic * (3 * u**2 + v**2)) * (1 + cubic * (3 * v**2 + u**2)) - (
        2 * cubic * u * v
    ) ** 2
    flat = np.hypot(u, v) * np.radians(STEP_DEG)
    expected = (jacobian * 16.0 * STEP_DEG**2 / (1 + flat**2) ** 1.5).sum()
    assert wcs_footprint(cards).area_deg2 == pytest.approx(expected, rel=3e-3)


@pytest.mark.parametrize("cubic", [-4e-8, 1e-7])
def test_a_bent_frame_is_kept_whole(cubic):
    first = wcs_footprint(header(150.0, 20.0, cubic=cubic))
    again = footprint_from_json(first.to_json())
    assert (pixels_under(first, ORDER) == pixels_under(again, ORDER)).all()
    assert again.smallest_side_deg == pytest.approx(first.smallest_side_deg, rel=1e-3)


def test_a_distortion_that_folds_the_image_is_refused():
    with pytest.raises((FootprintError, HeaderError)):
        wcs_footprint(header(150.0, 20.0, cubic=-3e-6))


def test_an_outline_that_hides_a_side_from_its_middle_is_refused():
    # A curve with a loop inside: twice round the points of the loop.
    turns = np.linspace(0.0, 2.0 * np.pi, 40, endpoint=False)
    radii_deg = 0.5 + np.cos(turns)
    looped = unit_vectors(radii_deg * np.cos(turns), radii_deg * np.sin(turns))
    with pytest.raises(FootprintError):
        outline_footprint(looped)


# Mosaics.


def chips(ra_deg=150.0, dec_deg=2.0, *, gap_deg=0.2):
    """Four pictures with a cross of nothing between them, by hand on the plane."""
    middle = 0.5 + gap_deg / 2.0
    return [
        rectangle_footprint(
            ra_deg=ra_deg + right * middle, dec_deg=dec_deg + up * middle, width_deg=1, height_deg=1
        )
        for right in (-1, 1)
        for up in (-1, 1)
    ]


def test_a_mosaic_is_all_its_pictures_and_not_what_lies_between():
    parts = chips()
    whole = pixels_under(mosaic_footprint(parts), ORDER)
    apart = np.concatenate([pixels_under(part, ORDER) for part in parts])
    assert (whole == np.sort(apart)).all()
    hull = rectangle_footprint(ra_deg=150.0, dec_deg=2.0, width_deg=2.2, height_deg=2.2)
    assert len(whole) < 0.9 * len(pixels_under(hull, ORDER))


def test_where_pictures_overlap_a_pixel_counts_once():
    parts = chips(gap_deg=-0.3)
    whole = pixels_under(mosaic_footprint(parts), ORDER)
    assert len(np.unique(whole)) == len(whole)
    assert set(whole) == set(np.concatenate([pixels_under(part, ORDER) for part in parts]))


def test_a_mosaic_is_one_frame_with_one_middle():
    mosaic = mosaic_footprint(chips())
    assert (mosaic.centre_ra_deg, mosaic.centre_dec_deg) == pytest.approx((150.0, 2.0), abs=1e-3)
    assert mosaic.smallest_side_deg == pytest.approx(2.2, rel=0.01)
    again = footprint_from_json(mosaic.to_json())
    assert again.centre_ra_deg == pytest.approx(mosaic.centre_ra_deg)
    assert (pixels_under(again, ORDER) == pixels_under(mosaic, ORDER)).all()


def test_a_mosaic_of_small_pictures_counts_with_shares():
    parts = chips(gap_deg=0.3)
    region = np.arange(n_pixels(5))
    places, shares = covered_pixels(mosaic_footprint(parts), 5, region)
    assert (shares <= 1.0).all()
    pixel_deg2 = 41252.96 / n_pixels(5)
    assert shares.sum() * pixel_deg2 == pytest.approx(4.0, rel=0.03)
    assert len(places) > 4


def test_mosaics_and_plain_frames_are_counted_together():
    frames = [
        chips()[0],
        mosaic_footprint(chips()),
        circle_footprint(ra_deg=150, dec_deg=2, diameter_deg=3),
    ]
    region = np.arange(n_pixels(ORDER))
    found = covered_pixels_many(frames, ORDER, region)
    for frame, (places, _) in zip(frames, found, strict=True):
        assert (places == pixels_under(frame, ORDER)).all()


@pytest.mark.parametrize(
    "parts",
    [
        [],
        [mosaic_footprint(chips())],
        chips() + chips(330.0, -2.0),
        chips() * 65,
    ],
    ids=["none", "nested", "antipodes", "many"],
)
def test_mosaics_that_cannot_be_are_refused(parts):
    with pytest.raises(FootprintError, match="mosaic"):
        mosaic_footprint(parts)


HEAD = {"DATE-OBS": "2027-03-14T05:00:00", "EXPTIME": 60.0, "FILTER": "r", "NAXIS": 0}


def picture(ra_deg, dec_deg, **changes):
    return header(ra_deg, dec_deg, turn_deg=0.0, step_deg=5e-4, cubic=1e-7) | changes


def test_a_file_of_several_pictures_is_one_frame():
    pictures = [picture(150.0, 2.0), picture(150.6, 2.0), picture(150.0, 2.6)]
    read = read_mosaic_header(HEAD, pictures)
    assert read.band == "r"
    assert read.duration_s == 60.0
    expected = set().union(*(pixels_under(wcs_footprint(one), ORDER) for one in pictures))
    assert set(pixels_under(read.footprint, ORDER)) == expected


def test_masks_beside_a_picture_are_not_pictures_of_their_own():
    read = read_mosaic_header(HEAD, [picture(150.0, 2.0), picture(150.0, 2.0)])
    assert read.footprint.shape == "polygon"


def test_a_picture_without_a_plate_solution_is_not_counted_and_that_is_said():
    unsolved = {"NAXIS1": 100, "NAXIS2": 100}
    # The head's own solution is nobody's: it must not be inherited.
    read = read_mosaic_header(HEAD | picture(10.0, 10.0), [picture(150.0, 2.0), unsolved])
    assert "1 of 2" in read.notes[-1]
    assert read.ra_deg == pytest.approx(150.0, abs=0.1)
    with pytest.raises(HeaderError, match="plate solution"):
        read_mosaic_header(HEAD, [unsolved])


# Circles and poles, by the plain definition.


@pytest.mark.parametrize("dec_deg", [90.0, -90.0, 89.0, -88.5, 0.0])
def test_circular_fields_hold_what_is_near_their_middle(dec_deg):
    pixels, ras, decs = near(77.0, dec_deg, 4.0, order=7)
    circle = circle_footprint(ra_deg=77.0, dec_deg=dec_deg, diameter_deg=5.0)
    expected = pixels[separations_deg(77.0, dec_deg, ras, decs) <= 2.5]
    assert (pixels_under(circle, 7) == expected).all()
    mosaic = mosaic_footprint(
        [circle, circle_footprint(ra_deg=77.0, dec_deg=dec_deg, diameter_deg=1.0)]
    )
    assert (pixels_under(mosaic, 7) == expected).all()


@pytest.mark.parametrize("dec_deg", [90.0, -90.0, 89.5])
def test_a_mosaic_over_a_pole(dec_deg):
    parts = [
        rectangle_footprint(
            ra_deg=ra, dec_deg=np.copysign(89.0, dec_deg), width_deg=2, height_deg=2
        )
        for ra in (0.0, 90.0, 180.0, 270.0)
    ]
    whole = pixels_under(mosaic_footprint(parts), ORDER)
    assert set(whole) == set(np.concatenate([pixels_under(part, ORDER) for part in parts]))
    assert abs(mosaic_footprint(parts).centre_dec_deg) == pytest.approx(90.0, abs=1e-6)
