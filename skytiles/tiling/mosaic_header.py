"""What the headers of a file with several pictures say about their one exposure."""

from collections.abc import Mapping, Sequence
from dataclasses import replace

import numpy as np

from skytiles.errors import FootprintError, HeaderError
from skytiles.tiling.footprint import Footprint
from skytiles.tiling.frame_header import FrameHeader, read_frame_header, wcs_footprint
from skytiles.tiling.header_values import Card
from skytiles.tiling.mosaic import mosaic_footprint

# What a picture has of its own and must not inherit from the head of the file.
_OWN = (
    "CTYPE",
    "CRVAL",
    "CRPIX",
    "CDELT",
    "CROTA",
    "CUNIT",
    "CD1_",
    "CD2_",
    "PC",
    "PV",
    "A_",
    "B_",
)
_OWN_SIZES = ("NAXIS", "ZNAXIS", "IMAGEW", "IMAGEH", "LONPOLE", "LATPOLE", "WCSAXES")


def read_mosaic_header(
    head: Mapping[str, Card], pictures: Sequence[Mapping[str, Card]]
) -> FrameHeader:
    """What the headers of a mosaic say: one frame whose footprint is all its pictures together.

    Parameters
    ----------
    head : dict         keywords of the primary header, which the pictures inherit
    pictures : dicts    keywords of each picture: its own plate solution and size

    Returns
    -------
    FrameHeader    HeaderError when no picture has a plate solution, and as read_frame_header; a
    picture without one is not counted, which is noted

    Source: FITS Standard 4.0, section 4.4.2.6 (INHERIT) and Calabretta & Greisen 2002.
    """
    shared = {name: value for name, value in _upper(head).items() if not _is_own(name)}
    whole = [{**shared, **_upper(picture)} for picture in pictures]
    parts = [part for part in map(_solved_or_none, whole) if part is not None]
    if not parts:
        raise HeaderError(
            given=f"{len(pictures)} pictures without a plate solution",
            allowed="CTYPE, CRVAL, CRPIX, CD and NAXIS in the header of each picture",
            advice="solve the pictures with a plate solver, or type position, size and rotation",
        )
    first = next(cards for cards in whole if _solved_or_none(cards) is not None)
    different = _different(parts)
    footprint = mosaic_footprint(different) if len(different) > 1 else different[0]
    missing = len(pictures) - len(parts)
    note = (f"{missing} of {len(pictures)} pictures have no plate solution: not counted.",)
    read = read_frame_header(first)
    return replace(
        read,
        footprint=footprint,
        ra_deg=footprint.centre_ra_deg,
        dec_deg=footprint.centre_dec_deg,
        notes=read.notes + (note if missing else ()),
    )


def _different(parts: Sequence[Footprint]) -> list[Footprint]:
    """Errors and masks often stand beside a picture with the same plate solution."""
    kept: dict[tuple[float, ...], Footprint] = {}
    for part in parts:
        kept.setdefault(tuple(np.round(part.corners.ravel(), 9)), part)
    return list(kept.values())


def _upper(header: Mapping[str, Card]) -> dict[str, Card]:
    return {name.strip().upper(): value for name, value in header.items()}


def _is_own(name: str) -> bool:
    return name.startswith((*_OWN, *_OWN_SIZES))


def _solved_or_none(cards: Mapping[str, Card]) -> Footprint | None:
    try:
        return wcs_footprint(cards)
    except (HeaderError, FootprintError):
        return None
