"""Coverage maps (IVOA MOC 1.1 and 2.0) from FITS, text and JSON."""

import json
import re
from collections.abc import Mapping
from typing import Any

import numpy as np
from numpy.typing import NDArray

from skytiles.errors import AlertError, MapFileError
from skytiles.region.fits_header import SIGNATURE
from skytiles.region.fits_table import FitsTable, read_table
from skytiles.region.moc import Moc, moc_from_cells, moc_from_ranges
from skytiles.region.read_map import GZIP, unpacked
from skytiles.sphere.healpix_door import MAX_ORDER

Ints = NDArray[np.int64]

_PROBABILITIES = ("PROBDENSITY", "PROB", "PROBABILITY")
_UNIQ_NAMES = ("UNIQ", "NPIX")
_MOST_CELLS = 2_000_000
MAX_MOC_TEXT_BYTES = 20_000_000
# "1/", "1/4", "s1/4", "12", "12-14": the words of a coverage map in text.
_WORD = re.compile(r"(?:s?(\d{1,2})/)?(?:(\d{1,19})(?:-(\d{1,19}))?)?")
_BEGINS_AS_TEXT = re.compile(rb"\s*s?\d{1,2}/[\d\s,/s-]*")


def moc_from_ascii(text: str) -> Moc:
    """A coverage map from text such as 1/1 2 4 2/12-14 21 23 25 8/.

    Parameters
    ----------
    text : str    words between blanks or commas

    Returns
    -------
    Moc    AlertError for anything else

    Source: IVOA MOC 2.0, section 4.3.2.
    """
    cells: list[tuple[int, int, int]] = []
    order: int | None = None
    deepest = 0
    for word in text.replace(",", " ").split():
        match = _WORD.fullmatch(word)
        if match is None or (match[1] is None and order is None):
            raise _word_error(word)
        if match[1] is not None:
            order = int(match[1])
            deepest = max(deepest, order)
        if match[2] is not None and order is not None:
            cells.append((order, int(match[2]), int(match[3] or match[2])))
    if order is None:
        raise _word_error(text[:20])
    return _moc_of_runs(deepest, cells)


def moc_from_json(fields: Mapping[str, Any]) -> Moc:
    """A coverage map from JSON such as {"1": [1, 2, 4], "8": []}.

    Parameters
    ----------
    fields : dict    lists of cells by their order

    Returns
    -------
    Moc    AlertError for anything else

    Source: IVOA MOC 2.0, appendix on JSON.
    """
    cells: list[tuple[int, int, int]] = []
    if not fields:
        raise _word_error("{}")
    for name, numbers in fields.items():
        if not is_moc_key(name) or not isinstance(numbers, list):
            raise _word_error(f"{name!r}: {numbers!r}"[:60])
        for number in numbers:
            if isinstance(number, bool) or not isinstance(number, int):
                raise _word_error(f"{number!r}"[:60])
            cells.append((int(name), number, number))
    return _moc_of_runs(max(int(name) for name in fields), cells)


def read_moc(data: bytes) -> Moc:
    """A coverage map from a file: FITS (also gzipped), text or JSON.

    Parameters
    ----------
    data : bytes    the whole file

    Returns
    -------
    Moc    AlertError or MapFileError else

    Source: IVOA MOC 1.1 and 2.0.
    """
    if data.startswith((SIGNATURE, GZIP)):
        return moc_from_table(read_table(unpacked(data)))
    if len(data) > MAX_MOC_TEXT_BYTES:
        raise _damaged(f"{len(data):,} bytes of text, more than {MAX_MOC_TEXT_BYTES:,},")
    try:
        words = data.decode("ascii").strip()
        fields = json.loads(words) if words.startswith("{") else None
    except (ValueError, RecursionError) as error:
        raise _damaged(f"text that cannot be read ({error})"[:200]) from error
    return moc_from_ascii(words) if fields is None else moc_from_json(fields)


def is_moc_key(name: object) -> bool:
    """Whether a name in JSON is the order of a coverage map.

    Parameters
    ----------
    name : object    a key of an object

    Returns
    -------
    bool    True for "0" to "99"

    Source: IVOA MOC 2.0, appendix on JSON.
    """
    return isinstance(name, str) and re.fullmatch(r"[0-9]{1,2}", name) is not None


def looks_like_moc_text(data: bytes) -> bool:
    """Whether a file begins as a coverage map in text does.

    Parameters
    ----------
    data : bytes    the whole file

    Returns
    -------
    bool    True for "1/4 ..." and the like

    Source: IVOA MOC 2.0, section 4.3.2.
    """
    return _BEGINS_AS_TEXT.fullmatch(data[:200]) is not None


def is_moc_table(table: FitsTable) -> bool:
    """Whether a table is a coverage map and no probability map.

    Parameters
    ----------
    table : FitsTable    the first binary table of a file

    Returns
    -------
    bool    True when it has the columns or keywords of a coverage map and no probabilities

    Source: IVOA MOC 2.0, table of FITS keywords.
    """
    if any(name in table.names for name in _PROBABILITIES):
        return False
    has_columns = any(name in table.names for name in (*_UNIQ_NAMES, "RANGE"))
    return has_columns or any(name in table.header for name in ("MOCVERS", "MOCORD_S", "MOCORDER"))


def moc_from_table(table: FitsTable) -> Moc:
    """A coverage map from a FITS table, as UNIQ numbers or as ranges of order 29.

    Parameters
    ----------
    table : FitsTable    the first binary table of a file

    Returns
    -------
    Moc    AlertError or MapFileError else

    Source: IVOA MOC 2.0, sections 4.3.1 and table of FITS keywords; MOC 1.1 with NUNIQ.
    """
    _refuse_other_dimensions(table)
    if table.n_rows > _MOST_CELLS:
        raise _damaged(f"{table.n_rows:,} rows, more than {_MOST_CELLS:,},")
    ordering = _keyword(table, "ORDERING", default="NUNIQ")
    if ordering == "RANGE" or (ordering != "NUNIQ" and "RANGE" in table.names):
        numbers = _whole_numbers(table, ("RANGE",))
        if len(numbers) % 2:
            raise _damaged("an odd number of bounds of ranges")
        deepest = _stated_order(table, least=0, default=MAX_ORDER)
        return moc_from_ranges(deepest, numbers.reshape(-1, 2))
    if ordering != "NUNIQ":
        raise _damaged(f"ORDERING = {ordering!r}")
    return _moc_of_uniq(table, _whole_numbers(table, _UNIQ_NAMES))


def _moc_of_uniq(table: FitsTable, numbers: Ints) -> Moc:
    """UNIQ = 4 x 4^order + pixel; a zero is padding in some files."""
    numbers = numbers[numbers != 0]
    if len(numbers) and (numbers.min() < 4 or numbers.max() >= 4 << 2 * (MAX_ORDER + 1)):
        raise _damaged("UNIQ numbers outside 4 .. 4 x 4^30")
    orders = np.searchsorted(4 << 2 * np.arange(MAX_ORDER + 2), numbers, side="right") - 1
    pixels = numbers - (4 << 2 * orders)
    finest = int(orders.max(initial=0))
    return moc_from_cells(_stated_order(table, least=finest, default=finest), orders, pixels)


def _refuse_other_dimensions(table: FitsTable) -> None:
    dimension = _keyword(table, "MOCDIM", default="SPACE")
    if dimension not in ("SPACE", "S"):
        raise AlertError(
            given=f"its coverage map is one of {dimension}",
            allowed="coverage of the sky alone (MOCDIM 'SPACE')",
            advice="take the spatial part of the coverage map and give that",
        )
    frame = _keyword(table, "COORDSYS", default="C")
    if frame not in ("C", "CEL", "Q", "ICRS"):
        raise AlertError(
            given=f"its coverage map says COORDSYS = {frame!r}",
            allowed="celestial coordinates (COORDSYS 'C')",
            advice="turn the coverage map to celestial (ICRS) coordinates first",
        )


def _keyword(table: FitsTable, name: str, *, default: str) -> str:
    return str(table.header.get(name, default)).strip().upper()


def _stated_order(table: FitsTable, *, least: int, default: int) -> int:
    value = table.header.get("MOCORD_S", table.header.get("MOCORDER", default))
    if isinstance(value, bool) or not isinstance(value, int) or not 0 <= value <= MAX_ORDER:
        raise _damaged(f"the order {value!r}")
    return max(value, least)


def _whole_numbers(table: FitsTable, names: tuple[str, ...]) -> Ints:
    """The column by its name, else the first one; also when TZERO = 2^63 makes it unsigned."""
    if not table.names:
        raise _damaged("a table without columns")
    name = next((n for n in names if n in table.names), table.names[0])
    stored = table.raw(name)
    scale, zero = table.scaling(name)
    if stored.dtype.kind != "i" or scale != 1.0 or zero not in (0.0, 2.0**63):
        raise _damaged(f"a column {name} that is not of plain whole numbers")
    numbers = stored.astype(np.int64)
    if zero and numbers.min(initial=0) < 0:
        return (numbers.view(np.uint64) ^ np.uint64(1 << 63)).astype(np.int64)
    return numbers


def _moc_of_runs(deepest: int, cells: list[tuple[int, int, int]]) -> Moc:
    """From (order, first cell, last cell); numbers are judged before they become arrays."""
    if deepest > MAX_ORDER or len(cells) > _MOST_CELLS:
        raise _word_error(f"order {deepest}, {len(cells)} entries")
    ranges = []
    for order, first, last in cells:
        if not 0 <= first <= last < 12 << 2 * order:
            raise _word_error(f"{order}/{first}-{last}")
        shift = 2 * (MAX_ORDER - order)
        ranges.append((first << shift, (last + 1) << shift))
    return moc_from_ranges(deepest, np.array(ranges, dtype=np.int64).reshape(-1, 2))


def _word_error(word: str) -> AlertError:
    return AlertError(
        given=f"its coverage map has {word[:60]!r}",
        allowed="orders 0 to 29 with their cells, such as 1/1 2 4 2/12-14 8/",
        advice="compare with the example alerts in fixtures/alerts, or give the MOC file itself",
    )


def _damaged(given: str) -> MapFileError:
    return MapFileError(
        given=f"it is a coverage map with {given}",
        allowed="a MOC in FITS with NUNIQ numbers or RANGE bounds (IVOA MOC 1.1 or 2.0)",
        advice="fetch the file again, or ask its maker for a MOC in FITS",
    )
