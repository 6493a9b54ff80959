"""Columns of the first binary table in a FITS file.

Source: FITS Standard 4.0, section 7.3.
"""

import re
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from skytiles.errors import MapFileError
from skytiles.region.fits_header import (
    SIGNATURE,
    Header,
    padded_bytes,
    read_header,
    truncated_error,
    whole_number,
)

# Bytes of one element by the letter of TFORM, and numpy's name of those that we read.
_WIDTHS = dict(zip("LBIJKAEDCMPQ", (1, 1, 2, 4, 8, 1, 4, 8, 8, 16, 8, 16), strict=True))
_DTYPES = {"B": ">u1", "I": ">i2", "J": ">i4", "K": ">i8", "E": ">f4", "D": ">f8"}
_TFORM = re.compile(r"^(\d{0,9})([LXBIJKAEDCMPQ])")
_MAX_EXTENSIONS = 100


@dataclass(frozen=True)
class _Column:
    """Where a column stands in a row."""

    number: int
    letter: str
    repeat: int
    offset: int


@dataclass(frozen=True, eq=False)
class FitsTable:
    """A binary table: its header, and its columns on demand."""

    header: Header
    _rows: memoryview
    _columns: dict[str, _Column]

    @property
    def names(self) -> tuple[str, ...]:
        """Names of the columns, in capitals."""
        return tuple(self._columns)

    @property
    def n_rows(self) -> int:
        """Number of rows."""
        return whole_number(self.header, "NAXIS2")

    def raw(self, name: str) -> NDArray[np.generic]:
        """A column as stored, all elements of all rows in one line."""
        column = self._columns[name]
        if column.letter not in _DTYPES:
            raise MapFileError(
                given=f"its column {name} is of type {column.letter}",
                allowed="numbers (FITS types B, I, J, K, E, D)",
                advice="write the map again with a numeric column",
            )
        if self.n_rows == 0 or column.repeat == 0:
            return np.zeros(0, dtype=_DTYPES[column.letter])
        cell = np.dtype(
            {
                "names": ["value"],
                "formats": [(_DTYPES[column.letter], (column.repeat,))],
                "offsets": [column.offset],
                "itemsize": whole_number(self.header, "NAXIS1"),
            }
        )
        return np.frombuffer(self._rows, dtype=cell, count=self.n_rows)["value"].reshape(-1)

    def floats(self, name: str) -> NDArray[np.float64]:
        """A column as real numbers, scaled by TSCAL and TZERO."""
        values = self.raw(name).astype(np.float64)
        scale, zero = self.scaling(name)
        return values if (scale, zero) == (1.0, 0.0) else values * scale + zero

    def scaling(self, name: str) -> tuple[float, float]:
        """TSCAL and TZERO of a column."""
        number = self._columns[name].number
        scale = self.header.get(f"TSCAL{number}", 1.0)
        zero = self.header.get(f"TZERO{number}", 0.0)
        if isinstance(scale, str) or isinstance(zero, str):
            raise MapFileError(
                given=f"its header says TSCAL{number} = {scale!r}, TZERO{number} = {zero!r}",
                allowed="numbers",
                advice="fetch the file again; its header is damaged",
            )
        return float(scale), float(zero)

    def unit(self, name: str) -> str:
        """TUNIT of a column, or nothing."""
        return str(self.header.get(f"TUNIT{self._columns[name].number}", "")).strip()


def read_table(data: bytes) -> FitsTable:
    """The first binary table of a FITS file.

    Parameters
    ----------
    data : bytes    the whole file

    Returns
    -------
    FitsTable    MapFileError when it is no FITS file, is cut short or has no table

    Source: FITS Standard 4.0, section 7.3.
    """
    if not data.startswith(SIGNATURE):
        raise MapFileError(
            given=f"it begins with {data[:12]!r}",
            allowed="a FITS file, which begins with 'SIMPLE  ='",
            advice="choose the map file itself, not a page or a picture of it",
        )
    view, begin = memoryview(data), 0
    for _ in range(_MAX_EXTENSIONS):
        cards, data_begin = read_header(view, begin)
        if cards.get("XTENSION") == "BINTABLE":
            return _table(view, cards, data_begin)
        begin = data_begin + padded_bytes(cards)
        if begin >= len(data):
            break
    raise MapFileError(
        given="it has no binary table",
        allowed="a HEALPix map in a binary table (a column UNIQ or PROB)",
        advice="choose the sky map of the alert; an image of the sky cannot be read as one",
    )


def _table(view: memoryview, cards: Header, data_begin: int) -> FitsTable:
    n_bytes = whole_number(cards, "NAXIS1") * whole_number(cards, "NAXIS2")
    rows = view[data_begin : data_begin + n_bytes]
    if len(rows) < n_bytes:
        raise truncated_error(f"of the {n_bytes} bytes of its table {len(rows)} are there")
    columns = _columns(cards)
    return FitsTable(cards, rows, columns)


def _columns(cards: Header) -> dict[str, _Column]:
    """Columns by name; the widths must add up to the length of a row."""
    columns: dict[str, _Column] = {}
    offset = 0
    for number in range(1, whole_number(cards, "TFIELDS", most=999) + 1):
        letter, repeat = _form(cards, number)
        name = str(cards.get(f"TTYPE{number}", f"COLUMN{number}")).strip().upper()
        columns.setdefault(name, _Column(number, letter, repeat, offset))
        offset += -(-repeat // 8) if letter == "X" else repeat * _WIDTHS[letter]
    if offset != whole_number(cards, "NAXIS1"):
        raise MapFileError(
            given=f"its columns take {offset} bytes and its rows {cards['NAXIS1']}",
            allowed="columns that fill the row",
            advice="fetch the file again; its header is damaged",
        )
    return columns


def _form(cards: Header, number: int) -> tuple[str, int]:
    form = str(cards.get(f"TFORM{number}", "")).strip()
    match = _TFORM.match(form)
    if match is None:
        raise MapFileError(
            given=f"its header says TFORM{number} = {form!r}",
            allowed="a FITS column format such as 'D' or '1024E'",
            advice="fetch the file again; its header is damaged",
        )
    return match[2], int(match[1] or 1)
