"""Sky maps from HEALPix FITS files, single-resolution and multi-order."""

import zlib

import numpy as np
from numpy.typing import NDArray

from skytiles.errors import MapFileError
from skytiles.region.fits_table import FitsTable, read_table
from skytiles.region.sky_map import SkyMap
from skytiles.sphere.healpix_door import MAX_ORDER, n_pixels, ring_to_nest
from skytiles.sphere.solid_angle import STERADIAN_DEG2

Ints = NDArray[np.int64]
Floats = NDArray[np.float64]

# A file of more than 2 GB is refused before it is read.
MAX_MAP_BYTES = 2_000_000_000
GZIP = b"\x1f\x8b"
_DISTANCES = ("DISTMU", "DISTSIGMA", "DISTNORM")
# Off by more than this, the sum is worth a note.
_SUM_TOLERANCE = 1e-3
# Above this many cells those that hold together less than a millionth are left to "outside".
_MANY_CELLS = 1 << 20
_NEGLIGIBLE = 1e-6


def read_sky_map(data: bytes) -> SkyMap:
    """A probability map from a FITS file, also when it is gzipped.

    Parameters
    ----------
    data : bytes    the whole file

    Returns
    -------
    SkyMap    cells in NESTED order, probabilities summing to one; MapFileError else

    Source: columns and keywords of public HEALPix alert maps (UNIQ with PROBDENSITY in sr-1;
    PROB per pixel with ORDERING RING or NESTED); NUNIQ packing of IVOA MOC 2.0.
    """
    table = read_table(unpacked(data))
    if str(table.header.get("COORDSYS", "C")).strip().upper() not in ("C", "CEL", "Q", "ICRS"):
        raise MapFileError(
            given=f"it says COORDSYS = {table.header['COORDSYS']!r}",
            allowed="celestial coordinates (COORDSYS 'C')",
            advice="rotate the map to celestial (ICRS) coordinates first",
        )
    return _multi_order_map(table) if "UNIQ" in table.names else _flat_map(table)


def unpacked(data: bytes) -> bytes:
    """The file itself, unpacked when it is gzipped, within the limit.

    Parameters
    ----------
    data : bytes    the whole file

    Returns
    -------
    bytes    MapFileError for what cannot be unpacked or is too large

    Source: RFC 1952.
    """
    if not data.startswith(GZIP):
        return data
    unpacker = zlib.decompressobj(wbits=31)
    try:
        plain = unpacker.decompress(data, MAX_MAP_BYTES)
    except zlib.error as error:
        raise MapFileError(
            given=f"it is gzipped and cannot be unpacked ({error})",
            allowed="a complete .fits or .fits.gz file",
            advice="fetch the file again; its download was probably cut short",
        ) from error
    if unpacker.unconsumed_tail:
        raise too_large_error(f"it has more than {MAX_MAP_BYTES} bytes when unpacked")
    return plain


def too_large_error(given: str) -> MapFileError:
    """The refusal of a file that is too large to be a sky map.

    Parameters
    ----------
    given : str    how large it is

    Returns
    -------
    MapFileError    to be raised

    Source: our own.
    """
    return MapFileError(
        given=given,
        allowed="at most 2 GB",
        advice="take the multi-order version of the map, which is a thousand times smaller",
    )


def _multi_order_map(table: FitsTable) -> SkyMap:
    _ordering(table, ("NUNIQ", ""))
    if "PROBDENSITY" not in table.names:
        raise _column_error(table, "PROBDENSITY beside UNIQ")
    orders, pixels, notes = _unpacked_uniq(table)
    densities, unit_note = _densities_per_sr(table)
    if len(densities) != len(pixels):
        raise _length_error(len(densities), len(pixels))
    areas_sr = (np.pi / 3.0) * 4.0 ** -orders.astype(np.float64)
    return _sky_map(table, orders, pixels, densities * areas_sr, notes=notes + unit_note)


def _unpacked_uniq(table: FitsTable) -> tuple[Ints, Ints, tuple[str, ...]]:
    """Orders and pixels of UNIQ numbers, 4 x 4^order + pixel."""
    numbers, notes = _uniq_numbers(table)
    if len(numbers) == 0 or numbers.min() < 4 or numbers.max() >= 4 << 2 * (MAX_ORDER + 1):
        raise MapFileError(
            given="it has UNIQ numbers outside 4 .. 4 x 4^30, or none at all",
            allowed="4 x 4^order + pixel, order 0 to 29",
            advice="fetch the file again, or ask its maker for a multi-order map",
        )
    # The number of bits tells the order; a float's exponent would round up near a power of two.
    orders = np.searchsorted(4 << 2 * np.arange(MAX_ORDER + 2), numbers, side="right") - 1
    return orders, numbers - (4 << 2 * orders), notes


def _uniq_numbers(table: FitsTable) -> tuple[Ints, tuple[str, ...]]:
    """UNIQ as signed numbers, also where TZERO = 2^63 makes them unsigned."""
    stored = table.raw("UNIQ")
    if stored.dtype.kind not in "iu":
        raise MapFileError(
            given="its UNIQ numbers are not whole numbers",
            allowed="a column of FITS type J or K",
            advice="write the map again with whole UNIQ numbers",
        )
    numbers = stored.astype(np.int64)
    scale, zero = table.scaling("UNIQ")
    if scale != 1.0:
        raise MapFileError(f"TSCAL = {scale} for UNIQ", "1", "write UNIQ without scaling")
    if zero == 2.0**63:
        # Some writers set the keyword but not the bit.
        if numbers.min(initial=0) >= 0:
            return numbers, ("UNIQ says TZERO = 2^63 but is stored without it; read as stored.",)
        return (numbers.view(np.uint64) ^ np.uint64(1 << 63)).astype(np.int64), ()
    return numbers + int(zero), ()


def _densities_per_sr(table: FitsTable) -> tuple[Floats, tuple[str, ...]]:
    unit = table.unit("PROBDENSITY").lower().replace(" ", "")
    values = table.floats("PROBDENSITY")
    if unit in ("deg-2", "deg^-2", "deg**-2", "1/deg2", "1/deg^2"):
        return values * STERADIAN_DEG2, ()
    is_known = unit in ("", "sr-1", "sr^-1", "sr**-1", "1/sr")
    return values, () if is_known else (f"PROBDENSITY in {unit!r} was read as per steradian.",)


def _flat_map(table: FitsTable) -> SkyMap:
    name = next((n for n in ("PROB", "PROBABILITY") if n in table.names), None)
    if name is None:
        raise _column_error(table, "UNIQ (multi-order) or PROB (single-resolution)")
    ordering = _ordering(table, ("RING", "NESTED", "NEST"))
    probabilities = table.floats(name)
    pixels = _explicit_pixels(table, len(probabilities))
    order = _order(table, len(probabilities), is_implicit=pixels is None)
    if pixels is None:
        pixels = np.arange(len(probabilities), dtype=np.int64)
    elif len(pixels) == 0 or pixels.min() < 0 or pixels.max() >= n_pixels(order):
        raise _length_error(len(pixels), n_pixels(order))
    kept = _worth_keeping(probabilities)
    pixels = pixels[kept]
    pixels = ring_to_nest(order, pixels) if ordering == "RING" else pixels
    orders = np.full(len(pixels), order, dtype=np.int64)
    return _sky_map(table, orders, pixels, probabilities, kept=kept)


def _explicit_pixels(table: FitsTable, n_values: int) -> Ints | None:
    """Pixel numbers where the file lists them, else nothing."""
    if str(table.header.get("INDXSCHM", "")).strip().upper() != "EXPLICIT":
        return None
    name = next((n for n in ("PIXEL", "PIX", "IPIX") if n in table.names), None)
    if name is None:
        raise _column_error(table, "PIXEL, since INDXSCHM is EXPLICIT")
    pixels = table.floats(name).astype(np.int64)
    if len(pixels) != n_values:
        raise _length_error(n_values, len(pixels))
    return pixels


def _order(table: FitsTable, n_values: int, *, is_implicit: bool) -> int:
    """HEALPix order from NSIDE, which must agree with the number of values."""
    nside = table.header.get("NSIDE")
    if nside is None and is_implicit:
        nside = round((n_values / 12) ** 0.5)
    if not isinstance(nside, int) or nside < 1 or nside & (nside - 1) or nside > 1 << MAX_ORDER:
        raise MapFileError(
            given=f"its NSIDE is {nside!r}",
            allowed="a power of two",
            advice="fetch the file again; its header is damaged",
        )
    if is_implicit and n_values != 12 * nside * nside:
        raise _length_error(n_values, 12 * nside * nside)
    return nside.bit_length() - 1


def _worth_keeping(probabilities: Floats) -> NDArray[np.intp]:
    """Cells to keep: all, or in a huge map those above a negligible share."""
    if len(probabilities) <= _MANY_CELLS:
        return np.arange(len(probabilities))
    # What fails the comparison must still reach the checks: NaN and negative values.
    limit = _NEGLIGIBLE * np.nansum(probabilities) / len(probabilities)
    return np.flatnonzero(~((probabilities >= 0.0) & (probabilities < limit)))


def _ordering(table: FitsTable, allowed: tuple[str, ...]) -> str:
    given = str(table.header.get("ORDERING", "")).strip().upper()
    if given not in allowed:
        raise MapFileError(
            given=f"it says ORDERING = {given!r} and has the columns {', '.join(table.names)}",
            allowed="NUNIQ with a column UNIQ; RING or NESTED with a column PROB",
            advice="ask the maker of the map which order it has, and correct the keyword",
        )
    return given


def _column_error(table: FitsTable, wanted: str) -> MapFileError:
    return MapFileError(
        given=f"its table has the columns {', '.join(table.names) or 'none'}",
        allowed=f"a column {wanted}",
        advice="choose the sky map of the alert (multi-order, or a single-resolution map)",
    )


def _length_error(n_values: int, n_allowed: int) -> MapFileError:
    return MapFileError(
        given=f"it has {n_values} values",
        allowed=f"{n_allowed}, one for each pixel",
        advice="fetch the file again; its header and its table disagree",
    )


def _sky_map(
    table: FitsTable,
    orders: Ints,
    pixels: Ints,
    probabilities: Floats,
    *,
    kept: NDArray[np.intp] | None = None,
    notes: tuple[str, ...] = (),
) -> SkyMap:
    """The map, judged, sorted and normalised."""
    total = _judged_total(probabilities)
    chosen = np.arange(len(probabilities)) if kept is None else kept
    sequence = np.argsort(pixels << 2 * (MAX_ORDER - orders), kind="stable")
    if abs(total - 1.0) > _SUM_TOLERANCE:
        notes += (f"The probabilities summed to {total:.6g} and were brought to 1.",)
    made = SkyMap(
        orders=orders[sequence],
        pixels=pixels[sequence],
        probabilities=probabilities[chosen[sequence]] / total,
        total_probability=total,
        distances=_distances(table, chosen[sequence]),
        keywords=dict(table.header),
        notes=notes,
    )
    _refuse_overlaps(made)
    return made


def _judged_total(probabilities: Floats) -> float:
    """Sum of the probabilities; refuses what is no probability."""
    if not np.isfinite(probabilities).all():
        n_bad = int(np.count_nonzero(~np.isfinite(probabilities)))
        raise _value_error(f"{n_bad} of its probabilities are not finite numbers (NaN)")
    if (probabilities < 0.0).any():
        n_bad = int(np.count_nonzero(probabilities < 0.0))
        raise _value_error(
            f"{n_bad} of its probabilities are negative, the least {probabilities.min():.3g}"
        )
    with np.errstate(over="ignore"):
        total = float(probabilities.sum())
    if not 0.0 < total < np.inf:
        raise _value_error(f"its probabilities sum to {total:g}")
    return total


def _value_error(given: str) -> MapFileError:
    return MapFileError(
        given=given,
        allowed="finite probabilities of zero or more with a sum above zero",
        advice="ask the maker of the map; it cannot be used as it is",
    )


def _distances(table: FitsTable, chosen: NDArray[np.intp]) -> dict[str, Floats]:
    return {n: table.floats(n)[chosen] for n in _DISTANCES if n in table.names}


def _refuse_overlaps(sky_map: SkyMap) -> None:
    if (sky_map.starts[1:] < sky_map.ends[:-1]).any():
        raise MapFileError(
            given="its cells overlap each other",
            allowed="cells that each cover their own patch of sky",
            advice="ask the maker of the map; its probabilities would count twice",
        )
