"""Numbers and words of a frame's header."""

import math
import re
from collections.abc import Mapping

from skytiles.errors import HeaderError

Card = str | float | int
Header = Mapping[str, Card]

_SEXAGESIMAL = re.compile(r"^\s*([+-]?)\s*(\d+)[\s:hd]+(\d+)[\s:m']+(\d+(?:\.\d*)?)\s*[s\"]?\s*$")


def number(header: Header, *keywords: str) -> float | None:
    """The first of some keywords that holds a number.

    Parameters
    ----------
    header : dict    keywords in capitals
    keywords : str    tried in order

    Returns
    -------
    float or None    None when none of them is there; HeaderError for what is no number

    Source: our own.
    """
    for keyword in keywords:
        value = header.get(keyword)
        if value is None or value == "":
            continue
        try:
            found = float(value)
        except ValueError:
            found = math.nan
        if not math.isfinite(found):
            raise HeaderError(
                given=f"{keyword} = {value!r}",
                allowed="a number",
                advice=f"correct {keyword} in the file, or type the values by hand",
            )
        return found
    return None


def word(header: Header, *keywords: str) -> str:
    """The first of some keywords that holds text, in one piece; else nothing.

    Parameters
    ----------
    header : dict    keywords in capitals
    keywords : str    tried in order

    Returns
    -------
    str    without blanks around it

    Source: our own.
    """
    for keyword in keywords:
        text = str(header.get(keyword, "")).strip()
        if text:
            return text
    return ""


def sexagesimal(text: str) -> float | None:
    """Value of text such as -00 12 30.5 in units of its first part.

    Parameters
    ----------
    text : str    sign, whole part, minutes, seconds, parted by blanks, colons or unit letters

    Returns
    -------
    float or None    None when the text is something else

    Source: definition.
    """
    match = _SEXAGESIMAL.match(text)
    if match is None or float(match[3]) >= 60.0 or float(match[4]) > 60.0:
        return None
    value = float(match[2]) + float(match[3]) / 60.0 + float(match[4]) / 3600.0
    return -value if match[1] == "-" else value
