"""Lazy greedy: take the option of the largest gain, again and again."""

from __future__ import annotations

import heapq

import numpy as np
import numpy.typing as npt

from skytiles.planner.option_gains import option_gains
from skytiles.planner.search_state import Choice, SearchState

Floats = npt.NDArray[np.float64]

# A tile that adds less of the probability than this helps nobody.
SMALLEST_GAIN = 1e-7
# First estimates come from a matrix product: rounding must not put them below the truth.
_ROUNDING = 1.0 + 1e-9
_NEVER = -1

# Negative gain, observer, block, place in the block, slot, version: the heap's order is the tie
# rule, the earlier observer, instrument and tile winning.
_Entry = tuple[float, int, int, int, int, int]


def run_greedy(state: SearchState) -> None:
    """Fill the plan with the largest gain each time, until nothing helps.

    Parameters
    ----------
    state : SearchState    changed in place

    Source: Minoux 1978 (LNCIS 7, 234): gains only shrink, so an old gain is an upper bound, and
    the same choices as those of plain greedy follow from fewer evaluations.
    """
    heap = _first_entries(state)
    heapq.heapify(heap)
    while heap and -heap[0][0] > SMALLEST_GAIN:
        gain, observer, block, place, slot, version = heap[0]
        tile = int(state.problem.observers[observer].blocks[block].tiles[place])
        now = state.version(observer, tile)
        if version == now:
            state.take(Choice(observer, block, place, slot, -gain))
            now = state.version(observer, tile)
        new_gain, new_slot = state.best_start(observer, block, place)
        heapq.heapreplace(heap, (-new_gain, observer, block, place, new_slot, now))


def _first_entries(state: SearchState) -> list[_Entry]:
    entries: list[_Entry] = []
    tile_sums = state.tile_sums()
    for number, observer in enumerate(state.problem.observers):
        for block_number, block in enumerate(observer.blocks):
            best = _largest(option_gains(block, tile_sums)) * _ROUNDING
            entries += [
                (-gain, number, block_number, place, 0, _NEVER)
                for place, gain in enumerate(best.tolist())
                if gain > SMALLEST_GAIN
            ]
    return entries


def _largest(gains: Floats) -> Floats:
    """(k,) largest gain of each tile over its starts."""
    return gains.max(axis=1, initial=0.0)
