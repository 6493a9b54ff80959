"""Cards of a FITS header.

Our own reader: it answers in microseconds, says what is wrong in plain words, and reads no more
of a damaged file than it must. astropy.io.fits is the oracle of its tests.
Source: FITS Standard 4.0, sections 3 and 4.
"""

from typing import NamedTuple

from skytiles.errors import MapFileError

BLOCK_BYTES = 2880
_CARD_BYTES = 80
# A header of more than this is damage: 36,000 cards.
_MAX_BLOCKS = 1000

Value = str | int | float | bool
Header = dict[str, Value]

# What a first block must begin with.
SIGNATURE = b"SIMPLE  ="


class HeaderBlock(NamedTuple):
    """A header and where its data begin."""

    cards: Header
    data_begin: int


def truncated_error(given: str) -> MapFileError:
    """The refusal of a file that ends too early.

    Parameters
    ----------
    given : str    where it ends

    Returns
    -------
    MapFileError    to be raised

    Source: our own.
    """
    return MapFileError(
        given=given,
        allowed="a complete FITS file",
        advice="fetch the file again; its download was probably cut short",
    )


def read_header(data: bytes | memoryview, begin: int) -> HeaderBlock:
    """One header from a place in a file.

    Parameters
    ----------
    data : bytes    the whole file
    begin : int    where the header begins, bytes

    Returns
    -------
    HeaderBlock    keywords and where the data begin; MapFileError when no END is found

    Source: FITS Standard 4.0, section 4.1.
    """
    cards: Header = {}
    last = min(len(data), begin + _MAX_BLOCKS * BLOCK_BYTES)
    for place in range(begin, last - _CARD_BYTES + 1, _CARD_BYTES):
        card = bytes(data[place : place + _CARD_BYTES]).decode("ascii", "replace")
        keyword = card[:8].rstrip()
        if keyword == "END":
            return HeaderBlock(cards, begin + _whole_blocks(place + _CARD_BYTES - begin))
        if card[8:10] == "= ":
            cards[keyword] = _value(card[10:])
    raise truncated_error(f"its header has no END within {len(data)} bytes")


def _whole_blocks(n_bytes: int) -> int:
    return -(-n_bytes // BLOCK_BYTES) * BLOCK_BYTES


def _value(text: str) -> Value:
    """The value of a card: text in quotes, T or F, or a number; else the words as they stand."""
    stripped = text.strip()
    if stripped.startswith("'"):
        return _quoted(stripped)
    word = stripped.split("/", 1)[0].strip()
    if word in ("T", "F"):
        return word == "T"
    for convert in (int, _real):
        try:
            return convert(word)
        except ValueError:
            continue
    return word


def _real(word: str) -> float:
    return float(word.upper().replace("D", "E"))


def _quoted(text: str) -> str:
    """Text between quotes, where two quotes stand for one."""
    body = text[1:].replace("''", "\0").split("'", 1)[0]
    return body.replace("\0", "'").rstrip()


def data_bytes(cards: Header) -> int:
    """Length of the data after a header, in bytes, without the padding.

    Parameters
    ----------
    cards : dict    the header

    Returns
    -------
    int    bytes; MapFileError for sizes that are no sizes

    Source: FITS Standard 4.0, eq. 2.
    """
    n_axes = whole_number(cards, "NAXIS", most=999)
    if n_axes == 0:
        return 0
    count = 1
    for axis in range(1, n_axes + 1):
        count *= whole_number(cards, f"NAXIS{axis}")
    bits = abs(whole_number(cards, "BITPIX", least=-64, most=64))
    groups = whole_number(cards, "GCOUNT") if "GCOUNT" in cards else 1
    heap = whole_number(cards, "PCOUNT") if "PCOUNT" in cards else 0
    return bits // 8 * groups * (heap + count)


def padded_bytes(cards: Header) -> int:
    """Length of the data after a header, in bytes, with the padding.

    Parameters
    ----------
    cards : dict    the header

    Returns
    -------
    int    bytes, a whole number of blocks

    Source: FITS Standard 4.0, section 3.1.
    """
    return _whole_blocks(data_bytes(cards))


def whole_number(cards: Header, keyword: str, *, least: int = 0, most: int = 1 << 40) -> int:
    """A keyword that must be a whole number within bounds.

    Parameters
    ----------
    cards : dict    the header
    keyword : str    which
    least, most : int    bounds, included

    Returns
    -------
    int    the value; MapFileError when it is missing or something else

    Source: our own.
    """
    value = cards.get(keyword)
    if isinstance(value, bool) or not isinstance(value, int) or not least <= value <= most:
        raise MapFileError(
            given=f"its header says {keyword} = {value!r}",
            allowed=f"a whole number from {least} to {most}",
            advice="fetch the file again; its header is damaged",
        )
    return value
