"""When a frame was taken and for how long, from its header."""

import re
from dataclasses import dataclass

from skytiles.errors import HeaderError
from skytiles.sphere.calendar import mjd_from_iso
from skytiles.tiling.header_values import Header, number, word

_DAY_S = 86400.0
_JD_MINUS_MJD = 2400000.5
# A longer single exposure is more likely a number of milliseconds (30000 for 30 s).
_LONGEST_S = 14400.0
# Seconds ahead of UTC. Source: TAI - UTC since 2017 (IERS Bulletin C), TT = TAI + 32.184 s.
_AHEAD_OF_UTC_S = {"UTC": 0.0, "UT": 0.0, "UT1": 0.0, "": 0.0, "TAI": 37.0, "TT": 69.184}
# The years 1850 and 2500: a date outside is damage.
_EARLIEST_MJD, _LATEST_MJD = -3000.0, 234167.0
_OLD_DATE = re.compile(r"^(\d{2})/(\d{2})/(\d{2})$")


@dataclass(frozen=True)
class Exposure:
    """Middle (MJD, UTC) and length of an exposure."""

    mid_mjd: float
    duration_s: float
    notes: tuple[str, ...] = ()


def read_exposure(header: Header) -> Exposure:
    """Middle and length of the exposure of a header.

    Parameters
    ----------
    header : dict    DATE-OBS (start) and EXPTIME; better DATE-AVG or DATE-END; keywords in capitals

    Returns
    -------
    Exposure    HeaderError without date or exposure, or when it must be in milliseconds

    Source: FITS Standard 4.0, section 9.
    """
    duration_s = _duration_s(header)
    notes: tuple[str, ...] = ()
    middle, first, last = (_moment_mjd(header, *names) for names in _NAMES)
    if middle is None and first is not None and last is not None and last > first:
        _refuse_milliseconds_against(duration_s, (last - first) * _DAY_S)
        middle = 0.5 * (first + last)
    if middle is None and first is not None:
        middle = first + 0.5 * duration_s / _DAY_S
        if (number(header, "STACKCNT", "NCOMBINE") or 1.0) > 1.0:
            notes = ("The frame is a stack without DATE-END: the time is that of its beginning.",)
    if middle is None or not _EARLIEST_MJD < middle < _LATEST_MJD:
        raise HeaderError(
            given="it has no possible date and time of the exposure",
            allowed="DATE-OBS with date and time, DATE-AVG, MJD-OBS or JD",
            advice="type the middle of the exposure in UTC by hand",
        )
    return Exposure(middle - _ahead_d(header), duration_s, notes)


# Keywords of the middle, the start and the end: as a date, as an MJD, as a JD.
_NAMES = (
    ("DATE-AVG", "MJD-AVG", ""),
    ("DATE-OBS", "MJD-OBS", "JD"),
    ("DATE-END", "MJD-END", ""),
)


def _moment_mjd(header: Header, date: str, mjd: str, jd: str) -> float | None:
    text = word(header, date) or (word(header, "DATE-BEG") if date == "DATE-OBS" else "")
    if text and (moment := _dated_mjd(header, date, text)) is not None:
        return moment
    if (value := number(header, mjd)) is not None:
        return value
    julian = number(header, jd) if jd else None
    return None if julian is None else julian - _JD_MINUS_MJD


def _dated_mjd(header: Header, keyword: str, text: str) -> float | None:
    """A moment from date and time; None for a bare date, which leaves a whole day open."""
    old = _OLD_DATE.match(text)
    date = f"19{old[3]}-{old[2]}-{old[1]}" if old else text
    if len(date) <= len("2027-03-14"):
        clock = word(header, "TIME-OBS", "UT", "UTC") if keyword == "DATE-OBS" else ""
        if ":" not in clock:
            return None
        date = f"{date}T{clock}"
    try:
        return mjd_from_iso(date)
    except (ValueError, OverflowError) as error:
        raise HeaderError(
            given=f"{keyword} = {text!r}",
            allowed="a date and time such as 2027-03-14T05:06:07.8",
            advice="type the middle of the exposure in UTC by hand",
        ) from error


def _ahead_d(header: Header) -> float:
    scale = word(header, "TIMESYS").upper()
    if scale not in _AHEAD_OF_UTC_S:
        raise HeaderError(
            given=f"TIMESYS = {scale!r}",
            allowed=", ".join(name for name in _AHEAD_OF_UTC_S if name),
            advice="type the middle of the exposure in UTC by hand",
        )
    return _AHEAD_OF_UTC_S[scale] / _DAY_S


def _duration_s(header: Header) -> float:
    duration = number(header, "EXPTIME", "EXPOSURE", "XPOSURE", "EXP_TIME", "TELAPSE")
    if duration is None or duration < 0.0:
        raise HeaderError(
            given="it has no EXPTIME" if duration is None else f"EXPTIME = {duration:g}",
            allowed="EXPTIME or EXPOSURE in seconds",
            advice="type the exposure by hand",
        )
    other = number(header, "EXPOSURE")
    if duration > _LONGEST_S:
        raise _milliseconds_error(duration)
    if other is not None:
        _refuse_milliseconds_against(duration, other)
    return duration


def _refuse_milliseconds_against(duration_s: float, other_s: float) -> None:
    """An exposure about a thousand times another statement of it is in milliseconds."""
    if other_s > 0.0 and 500.0 <= duration_s / other_s <= 1500.0:
        raise _milliseconds_error(duration_s)


def _milliseconds_error(duration_s: float) -> HeaderError:
    return HeaderError(
        given=f"an exposure of {duration_s:g} seconds, which looks like milliseconds",
        allowed=f"EXPTIME in seconds, at most {_LONGEST_S:g}",
        advice=f"if it was {duration_s / 1000.0:g} s, type the exposure by hand",
    )
