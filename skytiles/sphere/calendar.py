"""Dates in words and as modified Julian dates (UTC)."""

from datetime import UTC, datetime, timedelta

# Day zero of the modified Julian date: JD 2400000.5 (definition, IAU).
_MJD_ZERO = datetime(1858, 11, 17, tzinfo=UTC)


def mjd_from_datetime(moment: datetime) -> float:
    """Modified Julian date of a moment.

    Parameters
    ----------
    moment : datetime    aware, any zone; without a zone it is taken as UTC

    Returns
    -------
    float    days, UTC, good to a microsecond

    Source: definition, MJD = JD - 2400000.5; leap seconds are not counted.
    """
    aware = moment if moment.tzinfo else moment.replace(tzinfo=UTC)
    return (aware - _MJD_ZERO) / timedelta(days=1)


def datetime_from_mjd(mjd: float) -> datetime:
    """Moment of a modified Julian date.

    Parameters
    ----------
    mjd : float    days, UTC

    Returns
    -------
    datetime    aware, UTC

    Source: definition, MJD = JD - 2400000.5.
    """
    return _MJD_ZERO + timedelta(days=mjd)


def mjd_from_iso(text: str) -> float:
    """Modified Julian date of a date and time in words, such as 2027-03-14T05:06:07Z.

    Parameters
    ----------
    text : str    ISO 8601; UTC when no zone is written

    Returns
    -------
    float    days, UTC; ValueError for what is no date

    Source: ISO 8601; definition of the MJD.
    """
    return mjd_from_datetime(datetime.fromisoformat(text.strip()))


def iso_from_mjd(mjd: float) -> str:
    """Date and time in words of a modified Julian date.

    Parameters
    ----------
    mjd : float    days, UTC

    Returns
    -------
    str    ISO 8601 with Z, to the microsecond

    Source: ISO 8601; definition of the MJD.
    """
    return datetime_from_mjd(mjd).isoformat().replace("+00:00", "Z")
