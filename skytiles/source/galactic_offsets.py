"""Where a source model of absolute magnitudes stands in the Galaxy: offsets for each pixel.

A node of the common grid is an offset and an extinction. The grid is even in the magnitude that a
source has without a filter (offset + A_clear), so that this is exact in every pixel; at each of its
steps there are two extinctions, the mean of the region less and plus its scatter, and every pixel
divides its sources between the two so that its own mean extinction is kept.
"""

from __future__ import annotations

from dataclasses import dataclass, replace

import numpy as np
import numpy.typing as npt

from skytiles.region.galactic_prior import GalacticPrior
from skytiles.region.sightlines import Sightlines, sightlines
from skytiles.source.extinction import DEFAULT_BAND, extinction_ratio
from skytiles.source.source_model import LARGEST_STEP_MAG, SourceModel

Floats = npt.NDArray[np.float64]
Singles = npt.NDArray[np.float32]
Ints = npt.NDArray[np.int64]

_STEP_MAG = LARGEST_STEP_MAG
# The spread is followed to this many sigmas; a tail of this share goes to the grid's end nodes.
_REACH_SIGMA = 3.5
_TAIL = 1e-4
# Extinctions that scatter less than this at one step of the grid are one node.
_ONE_NODE_MAG = 0.15
_CHUNK = 2_048


@dataclass(frozen=True, eq=False)
class PlacedSource:
    """A source model on the nodes of one region, and weights (p, b) of the nodes per pixel."""

    model: SourceModel
    offset_weights: Singles


@dataclass(frozen=True, eq=False)
class _Moments:
    """Per pixel and step of the grid: share of the sources, and share times extinction."""

    shares: Singles
    first: Singles
    # Over the whole region: share times squared extinction.
    second: Floats


def place_source(
    model: SourceModel,
    prior: GalacticPrior,
    *,
    ras_deg: npt.ArrayLike,
    decs_deg: npt.ArrayLike,
    probabilities: npt.ArrayLike,
    spread_mag: float,
) -> PlacedSource:
    """Offsets of a model of absolute magnitudes for the pixels of a region.

    Parameters
    ----------
    model : SourceModel          of absolute magnitudes; its own offsets are not used
    prior : GalacticPrior        stars and dust
    ras_deg, decs_deg : (p,) float    centres of the pixels, degrees
    probabilities : (p,) float   what each pixel counts when the grid is chosen
    spread_mag : float           standard deviation of the absolute magnitude

    Returns
    -------
    PlacedSource    node weights of each pixel sum to 1

    Source: DEVELOPERS.md, source model; distances and dust of `sightlines`.
    """
    lines = sightlines(prior, np.asarray(ras_deg), np.asarray(decs_deg))
    counts = np.asarray(probabilities, dtype=np.float64)
    counts = counts / counts.sum()
    grid_mag, moments = _moments(lines, counts, spread_mag)
    lows, highs = _two_extinctions(moments, counts)
    weights = _node_weights(moments, lows, highs)
    is_two = np.stack([np.ones(len(grid_mag), bool), highs > lows], axis=-1).reshape(-1)
    extinctions_mag = np.stack([lows, highs], axis=-1).reshape(-1)[is_two]
    bright_mag = np.repeat(grid_mag, 2)[is_two] - _ratio() * extinctions_mag
    mean_weights = counts @ weights
    placed = replace(
        model,
        offsets_mag=bright_mag,
        extinctions_mag=extinctions_mag,
        offset_weights=mean_weights / mean_weights.sum(),
        placement="apparent",
    )
    return PlacedSource(placed, weights)


def _ratio() -> float:
    return extinction_ratio(DEFAULT_BAND)


def _moments(lines: Sightlines, counts: Floats, spread_mag: float) -> tuple[Floats, _Moments]:
    """The grid, and moments of every pixel on it, the spread included."""
    reach = int(np.ceil(_REACH_SIGMA * spread_mag / _STEP_MAG))
    first = int(np.floor(lines.distance_moduli_mag[0] / _STEP_MAG)) - reach
    faintest = lines.distance_moduli_mag[-1] + _ratio() * float(lines.extinctions_mag.max())
    n_steps = int(np.ceil(faintest / _STEP_MAG)) + reach + 1 - first
    kernel = _kernel(n_steps, reach, spread_mag)
    n_pixels = len(lines.shares)
    shares = np.empty((n_pixels, n_steps), np.float32)
    firsts = np.empty_like(shares)
    second = np.zeros(n_steps)
    for start in range(0, n_pixels, _CHUNK):
        rows = slice(start, start + _CHUNK)
        parts = _histograms(lines, rows, first=first, n_steps=n_steps, counts=counts[rows])
        shares[rows], firsts[rows] = parts[0] @ kernel, parts[1] @ kernel
        second += parts[2] @ kernel
    return _without_tails(first, _Moments(shares, firsts, second), counts)


def _kernel(n_steps: int, reach: int, spread_mag: float) -> Singles:
    """(n, n) share of the sources of one step that the spread moves to another one.

    Dividing a source between two steps widens it by a sixth of a squared step on average.
    """
    variance = spread_mag**2 - _STEP_MAG**2 / 6.0
    if variance <= 0.0:
        return np.eye(n_steps, dtype=np.float32)
    steps = np.arange(n_steps)
    apart = steps[None, :] - steps[:, None]
    bell = np.exp(-0.5 * (apart * _STEP_MAG) ** 2 / variance)
    bell[np.abs(apart) > reach] = 0.0
    return np.asarray(bell / bell.sum(axis=1, keepdims=True), dtype=np.float32)


def _histograms(
    lines: Sightlines, rows: slice, *, first: int, n_steps: int, counts: Floats
) -> tuple[Singles, Singles, Floats]:
    """Shares, shares x extinction per pixel; shares x squared extinction of all: each by step."""
    extinctions = lines.extinctions_mag[rows]
    shares = lines.shares[rows]
    places = lines.distance_moduli_mag.astype(np.float32) + np.float32(_ratio()) * extinctions
    places = places / np.float32(_STEP_MAG) - np.float32(first)
    below = places.astype(np.int64)
    above_share = shares * (places - below)
    size = len(shares) * n_steps
    cells = (below + n_steps * np.arange(len(shares))[:, None]).ravel()

    def spread(weights: npt.NDArray, above: npt.NDArray) -> Floats:
        lower = np.bincount(cells, (weights - above).ravel(), size)
        upper = np.bincount(cells + 1, above.ravel(), size)
        return np.asarray((lower + upper).reshape(-1, n_steps))

    first_shares, first_above = shares * extinctions, above_share * extinctions
    counted = counts.astype(np.float32)[:, None] * extinctions
    second = spread(first_shares * counted, first_above * counted).sum(axis=0)
    zeroth = spread(shares, above_share).astype(np.float32)
    return zeroth, spread(first_shares, first_above).astype(np.float32), second


def _without_tails(first: int, moments: _Moments, counts: Floats) -> tuple[Floats, _Moments]:
    """The grid cut where almost nothing is left; what lies beyond goes to its end nodes."""
    reached = np.cumsum(counts @ moments.shares)
    low = int(np.searchsorted(reached, _TAIL))
    high = int(np.searchsorted(reached, (1.0 - _TAIL) * reached[-1]))
    grid_mag = _STEP_MAG * (first + np.arange(low, high + 1, dtype=np.float64))

    def cut(values: npt.NDArray) -> npt.NDArray:
        kept = values[..., low : high + 1].copy()
        kept[..., 0] += values[..., :low].sum(axis=-1)
        kept[..., -1] += values[..., high + 1 :].sum(axis=-1)
        return kept

    return grid_mag, _Moments(cut(moments.shares), cut(moments.first), cut(moments.second))


def _two_extinctions(moments: _Moments, counts: Floats) -> tuple[Floats, Floats]:
    """Mean extinction of the region less and plus its scatter, at each step of the grid."""
    shares = np.maximum(counts @ moments.shares, 1e-30)
    means = (counts @ moments.first) / shares
    scatter = np.sqrt(np.maximum(moments.second / shares - means**2, 0.0))
    scatter = np.where(scatter < _ONE_NODE_MAG, 0.0, scatter)
    return np.maximum(means - scatter, 0.0), means + scatter


def _node_weights(moments: _Moments, lows: Floats, highs: Floats) -> Singles:
    """(p, b) weights that keep the brightness and, as far as it lies between, the extinction."""
    is_two = highs > lows
    width = np.where(is_two, highs - lows, 1.0).astype(np.float32)
    above = moments.first - lows.astype(np.float32) * moments.shares
    above = np.clip(above / width, 0.0, moments.shares)
    above[:, ~is_two] = 0.0
    both = np.stack([moments.shares - above, above], axis=-1)
    both = both.reshape(len(above), -1)
    kept = np.stack([np.ones_like(is_two), is_two], axis=-1).reshape(-1)
    weights: Singles = both[:, kept]
    weights /= weights.sum(axis=1, keepdims=True)
    return weights
