"""What a frame's FITS header says: where, when, how long, through what."""

from collections.abc import Mapping
from dataclasses import dataclass

from skytiles.errors import HeaderError
from skytiles.sphere.angles import ras_decs_deg, unit_vectors
from skytiles.sphere.precession import precession_from_j2000
from skytiles.tiling.exposure_time import read_exposure
from skytiles.tiling.footprint import LARGEST_SIDE_DEG, Footprint, circle_footprint
from skytiles.tiling.header_values import Card, Header, number, sexagesimal, word
from skytiles.tiling.tan_solution import (
    TanSolution,
    equinox_of,
    has_tan_solution,
    read_tan_solution,
)

# Said of a frame whose size is known and whose angle is not.
ANGLE_UNKNOWN = (
    "The header has no plate solution, so the camera's angle is unknown: "
    "only the circle that is inside at any angle was counted."
)
# Arcsec per radian over micrometres per millimetre (definition).
_ARCSEC_MM_PER_UM = 206.264806247


@dataclass(frozen=True, eq=False)
class FrameHeader:
    """Footprint (None when the header does not tell the size), position, time and band."""

    footprint: Footprint | None
    ra_deg: float
    dec_deg: float
    mid_mjd: float
    duration_s: float
    band: str | None
    # Size of the field where the camera's angle is not known, degrees.
    width_deg: float | None = None
    height_deg: float | None = None
    notes: tuple[str, ...] = ()


def read_frame_header(header: Mapping[str, Card]) -> FrameHeader:
    """What a header says about its frame.

    Parameters
    ----------
    header : dict    keywords and values; a plate solution (TAN), or OBJCTRA and OBJCTDEC (or RA
        and DEC) with FOCALLEN, XPIXSZ and the image's size

    Returns
    -------
    FrameHeader    HeaderError without position, date or exposure, for impossible coordinates and
    for an exposure that must be in milliseconds. Whether the date lies in the future is for the
    caller to judge.

    Source: FITS Standard 4.0; SBFITSEXT 1.0 (OBJCTRA, OBJCTDEC, FOCALLEN, XPIXSZ), from memory.
    """
    cards = {key.strip().upper(): value for key, value in header.items()}
    exposure = read_exposure(cards)
    seen = _solved(cards) if has_tan_solution(cards) else _pointed(cards)
    return FrameHeader(
        footprint=seen.footprint,
        ra_deg=seen.ra_deg,
        dec_deg=seen.dec_deg,
        mid_mjd=exposure.mid_mjd,
        duration_s=exposure.duration_s,
        band=word(cards, "FILTER", "FILTER1", "BAND") or None,
        width_deg=seen.width_deg,
        height_deg=seen.height_deg,
        notes=exposure.notes + seen.notes,
    )


def wcs_footprint(header: Mapping[str, Card]) -> Footprint:
    """Footprint of an image with a plate solution.

    Parameters
    ----------
    header : dict    a TAN solution and the image's size (NAXIS1, NAXIS2 or ZNAXIS1, ZNAXIS2)

    Returns
    -------
    Footprint    HeaderError without solution or size

    Source: Calabretta & Greisen 2002, A&A 395, 1077, section 5.1.3.
    """
    cards = {key.strip().upper(): value for key, value in header.items()}
    solution, size = read_tan_solution(cards), _size_px(cards)
    if size is None:
        raise HeaderError(
            given="a plate solution without the size of its image",
            allowed="NAXIS1 and NAXIS2 above zero",
            advice="take the header of the image itself, or type the size of the field",
        )
    return _outline(solution, size)


def _outline(solution: TanSolution, size: tuple[float, float]) -> Footprint:
    outline = solution.footprint(width_px=size[0], height_px=size[1])
    if outline.area_deg2 > LARGEST_SIDE_DEG**2 / 2.0:
        raise HeaderError(
            given=f"a plate solution of {outline.area_deg2:.0f} square degrees",
            allowed="less than a quarter of the sky",
            advice="solve the frame again; this solution is damaged",
        )
    return outline


@dataclass(frozen=True)
class _Seen:
    footprint: Footprint | None
    ra_deg: float
    dec_deg: float
    width_deg: float | None = None
    height_deg: float | None = None
    notes: tuple[str, ...] = ()


def _solved(cards: Header) -> _Seen:
    """Position and outline from the plate solution."""
    solution, size = read_tan_solution(cards), _size_px(cards)
    kind = word(cards, "CTYPE1").upper()
    is_bent = (
        kind.endswith("TPV")
        or any(key.startswith(("PV1_", "PV2_")) for key in cards)
        or (kind.endswith("-SIP") and not solution.sip_x)
    )
    notes = ("The solution's distortion was not used for the outline.",) if is_bent else ()
    if size is None:
        ras, decs = solution.ras_decs_deg([solution.crpix[0]], [solution.crpix[1]])
        no_size = ("The header does not tell the size of the image.",)
        return _Seen(None, float(ras[0]), float(decs[0]), notes=notes + no_size)
    outline = _outline(solution, size)
    return _Seen(outline, outline.centre_ra_deg, outline.centre_dec_deg, notes=notes)


def _size_px(cards: Header) -> tuple[float, float] | None:
    """Width and height of the image; in compressed files the true ones are ZNAXIS1 and 2."""
    for first, second in (("ZNAXIS1", "ZNAXIS2"), ("NAXIS1", "NAXIS2"), ("IMAGEW", "IMAGEH")):
        width, height = number(cards, first), number(cards, second)
        if width is not None and height is not None and _is_size(width) and _is_size(height):
            return width, height
    return None


def _is_size(n_pixels: float) -> bool:
    return 1.0 <= n_pixels <= 1e6


def _pointed(cards: Header) -> _Seen:
    """Position from the telescope's pointing, and the circle that is inside at any angle."""
    ra, dec = _j2000(*_position_deg(cards), equinox_of(cards))
    sides = _field_deg(cards)
    if sides is None:
        note = "The header tells neither a plate solution nor the size of the field."
        return _Seen(None, ra, dec, notes=(note,))
    circle = circle_footprint(ra_deg=ra, dec_deg=dec, diameter_deg=min(sides))
    return _Seen(circle, ra, dec, width_deg=sides[0], height_deg=sides[1], notes=(ANGLE_UNKNOWN,))


def _position_deg(cards: Header) -> tuple[float, float]:
    for ra_key, dec_key in (("OBJCTRA", "OBJCTDEC"), ("RA", "DEC")):
        if ra_key in cards and dec_key in cards:
            ra, dec = _angle_deg(cards, ra_key, hours=True), _angle_deg(cards, dec_key, hours=False)
            return _judged_position(ra, dec)
    raise HeaderError(
        given="it has no position",
        allowed="a plate solution (CTYPE1 ...), OBJCTRA and OBJCTDEC, or RA and DEC",
        advice="solve the frame with a plate solver, or type the position by hand",
    )


def _angle_deg(cards: Header, keyword: str, *, hours: bool) -> float:
    """Sexagesimal text is in hours for right ascension; plain numbers are degrees."""
    value = sexagesimal(str(cards[keyword]))
    if value is not None:
        return value * 15.0 if hours else value
    plain = number(cards, keyword)
    if plain is None:
        raise HeaderError(
            given=f"an empty {keyword}",
            allowed="HH MM SS (right ascension), DD MM SS, or degrees",
            advice="type the position by hand",
        )
    return plain


def _judged_position(ra_deg: float, dec_deg: float) -> tuple[float, float]:
    if not (0.0 <= ra_deg <= 360.0 and -90.0 <= dec_deg <= 90.0):
        raise HeaderError(
            given=f"right ascension {ra_deg:g}, declination {dec_deg:g} degrees",
            allowed="right ascension 0 to 360, declination -90 to 90 degrees",
            advice="type the position by hand; that of the header is impossible",
        )
    return ra_deg % 360.0, dec_deg


def _j2000(ra_deg: float, dec_deg: float, equinox_year: float) -> tuple[float, float]:
    if equinox_year == 2000.0:
        return ra_deg, dec_deg
    ra, dec = ras_decs_deg(unit_vectors(ra_deg, dec_deg) @ precession_from_j2000(equinox_year))
    return float(ra), float(dec)


def plate_scale_arcsec(*, pixel_um: float, focal_length_mm: float, binning: float = 1.0) -> float:
    """Angle of one pixel on the sky.

    Parameters
    ----------
    pixel_um : float    side of a pixel of the detector, micrometres
    focal_length_mm : float    millimetres
    binning : float    detector pixels that make one pixel of the image

    Returns
    -------
    float    arcsec per pixel of the image

    Source: definition, 206.264806 x pixel x binning / focal length.
    """
    return _ARCSEC_MM_PER_UM * pixel_um * binning / focal_length_mm


def _field_deg(cards: Header) -> tuple[float, float] | None:
    """Width and height of the field from optics and image size, or nothing.

    XPIXSZ counts binned pixels (SBFITSEXT): where a camera program means otherwise, the field
    comes out too small, never too large.
    """
    size, scale = _size_px(cards), number(cards, "SCALE", "PIXSCALE")
    focal, pixel = number(cards, "FOCALLEN"), number(cards, "XPIXSZ")
    if scale is None and focal and pixel and focal > 0.0:
        scale = plate_scale_arcsec(pixel_um=pixel, focal_length_mm=focal)
    if size is None or scale is None or scale <= 0.0:
        return None
    sides = size[0] * scale / 3600.0, size[1] * scale / 3600.0
    return sides if max(sides) < LARGEST_SIDE_DEG and min(sides) > 1e-4 else None
