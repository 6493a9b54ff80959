"""Typed values stand in the place of the header's own: a wrong clock, milliseconds, no position."""

from collections.abc import Mapping
from typing import Any

import campaigns.bridge as bridge
from campaigns.ingest.header_keywords import Card
from skytiles.errors import HeaderError
from skytiles.tiling.tan_solution import read_tan_solution

_LENGTHS = {"EXPTIME", "EXPOSURE", "XPOSURE", "EXP_TIME", "TELAPSE"}
_MOMENTS = {
    *("DATE-OBS", "DATE-BEG", "DATE-AVG", "DATE-END", "TIME-OBS", "UT", "UTC"),
    *("MJD-OBS", "MJD-AVG", "MJD-END", "JD", "TIMESYS"),
}
_SOLUTION = {"CTYPE1", "CTYPE2"}
_PLACES = {"RA", "DEC", "OBJCTRA", "OBJCTDEC", "EQUINOX", "EPOCH", "RADESYS", "RADECSYS"}


def set_right(cards: Mapping[str, Card], typed: Mapping[str, Any]) -> dict[str, Card]:
    """The cards as they are to be read; those that are kept stay as the header has them.

    A position counts only where the header has no plate solution: that would be a measurement.
    """
    duration_s, mid_time = typed.get("duration_s"), typed.get("mid_time")
    ra_deg, dec_deg = typed.get("ra_deg"), typed.get("dec_deg")
    right = dict(cards)
    if duration_s is not None:
        right = {**_without(right, _LENGTHS), "EXPTIME": duration_s}
    if mid_time is not None:
        right = {**_without(right, _MOMENTS), "MJD-AVG": bridge.mjd_of(mid_time)}
    if ra_deg is not None and dec_deg is not None and not _is_solved(cards):
        right = {**_without(right, _PLACES | _SOLUTION), "RA": ra_deg, "DEC": dec_deg}
    return right


def _is_solved(cards: Mapping[str, Card]) -> bool:
    try:
        read_tan_solution(cards)
    except HeaderError:
        return False
    return True


def _without(cards: Mapping[str, Card], names: set[str]) -> dict[str, Card]:
    return {name: value for name, value in cards.items() if name not in names}
