"""A moment in words for people."""

from skytiles.sphere.calendar import datetime_from_mjd


def clock_words(mjd: float) -> str:
    """Time of day in UTC, rounded down to the minute.

    Parameters
    ----------
    mjd : float    MJD, UTC

    Returns
    -------
    str    such as "05:12 UTC"
    """
    return f"{datetime_from_mjd(mjd):%H:%M} UTC"
