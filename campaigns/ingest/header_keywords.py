"""The allow-list of header cards: what a frame report may hold. All else is dropped unread.

Names, home coordinates and paths stand in other cards and never reach the database. The
browser applies the same list before sending (static/src/fits).
"""

import re
from collections.abc import Mapping

Card = str | float | int | bool

_PATTERN = re.compile(
    r"NAXIS|NAXIS[12]|ZNAXIS[12]|ZNAXIS|CTYPE[12]|CUNIT[12]|CRVAL[12]|CRPIX[12]|CDELT[12]|CROTA[12]"
    r"|CD[12]_[12]|PC[12]_[12]|PC00[12]00[12]|IMAGEW|IMAGEH|LONPOLE|LATPOLE|RADESYS|RADECSYS|EQUINOX|EPOCH|WCSAXES"
    r"|[AB]_ORDER|[AB]_[0-9]_[0-9]|PV[12]_[0-9]{1,2}"
    r"|OBJCTRA|OBJCTDEC|RA|DEC|FOCALLEN|XPIXSZ|YPIXSZ|XBINNING|YBINNING|SCALE|PIXSCALE"
    r"|DATE-OBS|DATE-AVG|DATE-END|DATE-BEG|TIME-OBS|UT|UTC|MJD-OBS|MJD-AVG|MJD-END|JD|TIMESYS"
    r"|EXPTIME|EXPOSURE|EXP_TIME|XPOSURE|TELAPSE|NCOMBINE|STACKCNT|FILTER|FILTER1|BAND|SATURATE|MAGLIM|MAGZERO"
)
# The list without distortions has 75 names; the ninth order of SIP adds 112 and TPV 80.
MOST_CARDS = 300
LONGEST_VALUE = 80


def allowed_cards(header: Mapping[str, object]) -> dict[str, Card]:
    """Only the cards of the allow-list, upper case, values of a plain type."""
    kept: dict[str, Card] = {}
    for name, value in header.items():
        keyword = str(name).strip().upper()
        is_wanted = len(kept) < MOST_CARDS and _PATTERN.fullmatch(keyword)
        if is_wanted and isinstance(value, str | int | float):
            kept[keyword] = value[:LONGEST_VALUE] if isinstance(value, str) else value
    return kept
