"""HEALPix pixels inside many intersections of caps at once: convex polygons and circles.

On a ring of pixels a cap (n . v >= c) is one arc of longitude. So a polygon is, on each ring,
a few arcs cut with each other, and the pixels follow by arithmetic, without a test per pixel.
Where an arc cuts a piece out of the middle, or the ring runs round a pole, the pixels of that
ring are tested one by one.
"""

from typing import NamedTuple

import numpy as np
from numpy.typing import NDArray

from skytiles.sphere import healpix_nested as nested
from skytiles.sphere.cap_set import CapSet
from skytiles.sphere.interleaved_bits import SPREAD_BITS, SPREAD_ODD_BITS

Ints = NDArray[np.int64]
Floats = NDArray[np.float64]
Bools = NDArray[np.bool_]

# Rings this much beyond the highest and lowest point are tried too (units of the ring step).
_RING_SLACK = 1e-6
# Half width, radians, of an arc that holds nothing: beyond any other.
_NOTHING = -10.0
# Slope (z over the radius) of caps that stand at a pole.
_AT_POLE = 1e12
# Orders whose face coordinates the table of spread bits holds.
_TABLE_ORDER = 15
# Shapes handled in one go, so that the arrays stay in the processor's cache.
_CHUNK = 1024


class PixelLists(NamedTuple):
    """Pixels of shape j: pixels[starts[j]:starts[j + 1]] (compressed rows)."""

    starts: Ints
    pixels: Ints


def pixels_inside(caps: CapSet, order: int) -> PixelLists:
    """Pixels whose centre is inside each shape.

    Parameters
    ----------
    caps : CapSet    m shapes, each within a hemisphere or a circle of any size
    order : int    0..29

    Returns
    -------
    PixelLists    starts (m + 1,), NESTED pixels, not sorted inside a shape

    Source: Gorski et al. 2005, ApJ 622, 759, section 4 (rings); the arcs are our own.
    """
    n_shapes = len(caps.thresholds)
    parts = [
        _pixels_of_chunk(caps.part(slice(first, first + _CHUNK)), order)
        for first in range(0, n_shapes, _CHUNK)
    ]
    starts = np.zeros(n_shapes + 1, dtype=np.int64)
    if not parts:
        return PixelLists(starts, np.zeros(0, dtype=np.int64))
    np.cumsum(np.concatenate([counts for counts, _ in parts]), out=starts[1:])
    return PixelLists(starts, np.concatenate([pixels for _, pixels in parts]))


class _Rows(NamedTuple):
    """Pairs of shape and ring, with tangent and cosine of the ring's latitude."""

    owners: Ints
    rings: Ints
    tangents: Floats
    cosines: Floats


def _pixels_of_chunk(caps: CapSet, order: int) -> tuple[Ints, Ints]:
    """Counts per shape, and the pixels."""
    rows = _rows_of(caps, order)
    runs = _within_faces(order, _runs_of(order, rows, _arcs_of(caps, rows)))
    places = _run_of_each_pixel(runs.lengths)
    pixels = _expand(order, runs, places)
    owners = runs.owners.take(places)
    if runs.is_tested.any():
        is_kept = _passes_tests(caps, order, owners, pixels, runs.is_tested[places])
        owners, pixels = owners[is_kept], pixels[is_kept]
    return np.bincount(owners, minlength=len(caps.thresholds)), pixels


def _rows_of(caps: CapSet, order: int) -> _Rows:
    nside = 1 << order
    first = np.ceil(_ring_coordinates(order, caps.highest_zs) - _RING_SLACK).astype(np.int64)
    last = np.floor(_ring_coordinates(order, caps.lowest_zs) + _RING_SLACK).astype(np.int64)
    first, last = np.maximum(first, 1), np.minimum(last, 4 * nside - 1)
    counts = np.maximum(last - first + 1, 0)
    owners = np.repeat(np.arange(len(counts)), counts)
    rings = np.arange(len(owners)) + np.repeat(first - np.cumsum(counts) + counts, counts)
    zs, cosines = nested.ring_latitudes(order, rings)
    return _Rows(owners, rings, zs / cosines, cosines)


def _ring_coordinates(order: int, zs: Floats) -> Floats:
    """Ring numbers as real numbers: 0 at the north pole, 4 nside at the south pole."""
    nside = 1 << order
    caps = nside * np.sqrt(3.0 * np.maximum(1.0 - np.abs(zs), 0.0))
    belt = nside * (2.0 - 1.5 * zs)
    polar = np.where(zs > 0.0, caps, 4 * nside - caps)
    return np.where(np.abs(zs) > 2.0 / 3.0, polar, belt)


class _Arcs(NamedTuple):
    """One arc of longitude for each row, radians; is_tested where it is only an outer bound."""

    lows: Floats
    highs: Floats
    is_tested: Bools


def _arcs_of(caps: CapSet, rows: _Rows) -> _Arcs:
    """Arcs about the shape's middle; the whole ring for shapes that reach round a pole."""
    # A narrow shape stays within a quarter turn of its middle, where an arc of at most half the
    # ring, and a gap of at most half, appear only once.
    reaches = np.where(caps.is_narrow, 0.5 * np.pi, np.pi)[rows.owners]
    lows, highs = -reaches, reaches
    n_caps = caps.thresholds.shape[1]
    cuts = [_Cut.of(caps, rows, k) for k in range(n_caps)]
    for cut in cuts:
        _keep_within(cut, lows, highs)
    is_tested = ~caps.is_narrow[rows.owners]
    for cut in cuts:
        is_tested |= _trim_ends(cut, lows, highs)
    middles = caps.longitudes_rad[rows.owners]
    is_whole = ~caps.is_narrow[rows.owners]
    np.copyto(lows, -np.pi, where=is_whole)
    np.copyto(highs, np.pi, where=is_whole)
    return _Arcs(middles + lows, middles + highs, is_tested)


class _Cut(NamedTuple):
    """One cap on each row: from low to high is inside, or outside where it is a gap."""

    lows: Floats
    highs: Floats
    is_gap: Bools

    @classmethod
    def of(cls, caps: CapSet, rows: _Rows, k: int) -> "_Cut":
        """The k-th cap of each row's shape, in longitudes from the shape's middle."""
        nx, ny, nz = (caps.normals[:, k, axis] for axis in range(3))
        # At a pole, or for a side without length, the cap holds all of the ring or nothing.
        radii = np.maximum(np.hypot(nx, ny), 1e-300)
        slopes = nz / radii
        cosines = -slopes[rows.owners] * rows.tangents
        thresholds = caps.thresholds[:, k]
        if thresholds.any():
            cosines += (thresholds / radii)[rows.owners] / rows.cosines
        if np.abs(slopes).max() > _AT_POLE:
            # The one ring on the side of such a cap is not inside it, as in healpy.
            cosines[(np.abs(slopes) > _AT_POLE)[rows.owners] & (cosines == 0.0)] = 2.0
        towards = _within_half_turn(np.arctan2(ny, nx) - caps.longitudes_rad)
        away = towards - np.copysign(np.pi, towards)
        is_gap = cosines < 0.0
        centres = np.where(is_gap, away[rows.owners], towards[rows.owners])
        sizes = np.abs(cosines)
        half_widths = np.arccos(np.minimum(sizes, 1.0))
        # A cap that misses the ring holds nothing of it, not a single longitude.
        half_widths[(sizes > 1.0) & ~is_gap] = _NOTHING
        return cls(centres - half_widths, centres + half_widths, is_gap)


def _within_half_turn(angles_rad: Floats) -> Floats:
    """Angles brought into -pi..pi."""
    return np.asarray(angles_rad - 2.0 * np.pi * np.rint(angles_rad / (2.0 * np.pi)))


def _keep_within(cut: _Cut, lows: Floats, highs: Floats) -> None:
    """Cut the arcs down to those caps that hold at most half of the ring."""
    is_arc = ~cut.is_gap
    np.maximum(lows, cut.lows, out=lows, where=is_arc)
    np.minimum(highs, cut.highs, out=highs, where=is_arc)


def _trim_ends(cut: _Cut, lows: Floats, highs: Floats) -> Bools:
    """Take away what a larger cap leaves out; true where that lies in the middle of an arc."""
    is_touching = cut.is_gap & (cut.highs > lows) & (cut.lows < highs)
    is_low, is_high = cut.lows <= lows, cut.highs >= highs
    np.copyto(lows, cut.highs, where=is_touching & is_low)
    np.copyto(highs, cut.lows, where=is_touching & is_high)
    return np.asarray(is_touching & ~(is_low | is_high) & (cut.highs > cut.lows))


class _Runs(NamedTuple):
    """Neighbours on a ring, from a first place on it, and the face pixel of that place."""

    owners: Ints
    rings: Ints
    firsts: Ints
    lengths: Ints
    is_tested: Bools
    faces: Ints
    xs: Ints
    ys: Ints

    def part(self, chosen: Bools | Ints) -> "_Runs":
        """Some of the runs."""
        return _Runs._make(field[chosen] for field in self)


def _runs_of(order: int, rows: _Rows, arcs: _Arcs) -> _Runs:
    """The runs of all rows that are not empty."""
    quarters = nested.ring_lengths(order, rows.rings)
    scales = quarters * (2.0 / np.pi)
    offsets = 0.5 + 0.5 * nested.ring_shifts(order, rows.rings)
    firsts = np.ceil(arcs.lows * scales + offsets).astype(np.int64)
    lasts = np.floor(arcs.highs * scales + offsets).astype(np.int64)
    lengths = np.minimum(lasts - firsts + 1, 4 * quarters)
    unknown = np.zeros_like(firsts)
    runs = _Runs(
        rows.owners, rows.rings, firsts, lengths, arcs.is_tested, unknown, unknown, unknown
    )
    return _located(order, runs.part(lengths > 0))


def _located(order: int, runs: _Runs) -> _Runs:
    """Runs with the face pixels of their first places, which may lie beyond the ring's end."""
    places = (runs.firsts - 1) % (4 * nested.ring_lengths(order, runs.rings)) + 1
    faces, xs, ys = nested.face_from_ring(order, nested.RingPixels(runs.rings, places))
    return runs._replace(firsts=places, faces=faces, xs=xs, ys=ys)


def _within_faces(order: int, runs: _Runs) -> _Runs:
    """Runs cut where they pass from one base face to the next."""
    done = []
    while True:
        # Eastwards x grows and y shrinks by one each, until a run leaves its face.
        rooms = np.minimum((1 << order) - runs.xs, runs.ys + 1)
        done.append(runs._replace(lengths=np.minimum(runs.lengths, rooms)))
        rest = np.flatnonzero(runs.lengths > rooms)
        if len(rest) == 0:
            break
        beyond = runs._replace(firsts=runs.firsts + rooms, lengths=runs.lengths - rooms)
        runs = _located(order, beyond.part(rest))
    if len(done) == 1:
        return done[0]
    joined = _Runs._make(np.concatenate(fields) for fields in zip(*done, strict=True))
    return joined.part(np.argsort(joined.owners, kind="stable"))


def _run_of_each_pixel(lengths: Ints) -> Ints:
    """Numbers of runs, each as often as it is long; twice as fast as numpy's repeat."""
    ends = np.cumsum(lengths)
    steps = np.zeros(int(ends[-1]) if len(ends) else 0, dtype=np.int64)
    steps[ends[:-1]] = 1
    return np.cumsum(steps, out=steps)


def _expand(order: int, runs: _Runs, places: Ints) -> Ints:
    """NESTED numbers of all pixels of all runs, in order."""
    starts = np.cumsum(runs.lengths) - runs.lengths
    steps = np.arange(len(places))
    xs = (runs.xs - starts).take(places)
    xs += steps
    ys = (runs.ys + starts).take(places)
    ys -= steps
    bases = (runs.faces << 2 * order).take(places)
    if order <= _TABLE_ORDER:
        bases += SPREAD_BITS.take(xs)
        bases += SPREAD_ODD_BITS.take(ys)
        return np.asarray(bases)
    return nested.nest_from_face(order, nested.FacePixels(bases >> 2 * order, xs, ys))


def _passes_tests(caps: CapSet, order: int, owners: Ints, pixels: Ints, is_tested: Bools) -> Bools:
    """True for pixels that need no test or pass it."""
    tested = np.flatnonzero(is_tested)
    faces = nested.face_from_nest(order, pixels[tested])
    zs, cosines, longitudes = nested.directions_of_faces(order, faces)
    vectors = np.stack([cosines * np.cos(longitudes), cosines * np.sin(longitudes), zs], axis=-1)
    normals, thresholds = caps.normals[owners[tested]], caps.thresholds[owners[tested]]
    heights = np.einsum("nki,ni->nk", normals, vectors)
    is_kept = np.ones(len(pixels), dtype=np.bool_)
    is_kept[tested] = (heights >= thresholds).all(axis=1)
    return is_kept
