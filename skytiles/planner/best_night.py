"""The most that one observer's night can add up to when every option has a fixed worth."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from skytiles.planner.plan_problem import NOT_OFFERED, ObserverOptions
from skytiles.planner.search_state import SAME_LOOK_D

Floats = npt.NDArray[np.float64]
Ints = npt.NDArray[np.int64]

# Parts of the tiles left at which a price per tile is tried.
_PRICED_SHARES = (0.25, 0.5, 0.75, 1.0)


@dataclass(frozen=True, eq=False)
class NightOptions:
    """All options of one observer in one table: k tiles of all its instruments x t starts."""

    blocks: Ints
    places: Ints
    n_visits: Ints
    n_tiles_left: int

    def most(self, worths: Floats) -> float:
        """Upper bound on the worth of any choice of one option per start.

        Parameters
        ----------
        worths : (k, t) float    of the options, >= 0

        Returns
        -------
        float

        Source: duality of the assignment problem: with a price v for each visit to tile k, no
        choice exceeds sum n_k v_k + the best starts at worth less price. A few prices are tried;
        none gives the best options by start, the highest the best tiles.
        """
        if worths.size == 0 or self.n_tiles_left <= 0:
            return 0.0
        best_of_tile = worths.max(axis=1)
        bounds = [self._priced(worths, np.zeros_like(best_of_tile))]
        ranked = np.sort(np.repeat(best_of_tile, self.n_visits))[::-1]
        for share in _PRICED_SHARES:
            rank = min(int(share * self.n_tiles_left), len(ranked) - 1)
            bounds.append(self._priced(worths, np.maximum(best_of_tile - ranked[rank], 0.0)))
        bounds.append(float(ranked[: self.n_tiles_left].sum()))
        return min(bounds)

    def _priced(self, worths: Floats, prices: Floats) -> float:
        by_start = np.maximum((worths - prices[:, None]).max(axis=0), 0.0)
        best_starts = np.sort(by_start)[::-1][: self.n_tiles_left]
        return float(self.n_visits @ prices + best_starts.sum())

    def good_choices(self, worths: Floats) -> list[tuple[int, int, int]]:
        """Options taken by their worth, each start once and each tile so often as it may be.

        Parameters
        ----------
        worths : (k, t) float    of the options, >= 0

        Returns
        -------
        list of (block, place, slot)
        """
        left = worths.copy()
        visits = self.n_visits.copy()
        choices: list[tuple[int, int, int]] = []
        while left.size and len(choices) < self.n_tiles_left:
            row, slot = np.unravel_index(int(np.argmax(left)), left.shape)
            if left[row, slot] <= 0.0:
                break
            choices.append((int(self.blocks[row]), int(self.places[row]), int(slot)))
            left[:, slot] = 0.0
            visits[row] -= 1
            if visits[row] == 0:
                left[row] = 0.0
        return choices


def night_options(observer: ObserverOptions) -> NightOptions:
    """Put the options of all instruments of one observer into one table.

    Parameters
    ----------
    observer : ObserverOptions

    Returns
    -------
    NightOptions    its rows are those of the blocks one after the other
    """
    numbers = [np.full(len(block.tiles), n) for n, block in enumerate(observer.blocks)]
    places = [np.arange(len(block.tiles)) for block in observer.blocks]
    visits = [_most_visits(block.rows, observer.starts_mjd) for block in observer.blocks]
    return NightOptions(
        blocks=_joined(numbers),
        places=_joined(places),
        n_visits=_joined(visits),
        n_tiles_left=observer.n_tiles_left,
    )


def _most_visits(rows: Ints, starts_mjd: Floats) -> Ints:
    """(k,) visits to each tile that fit when two of them are at least one look apart."""
    is_offered = rows != NOT_OFFERED
    firsts = np.where(is_offered, starts_mjd, np.inf).min(axis=1, initial=np.inf)
    lasts = np.where(is_offered, starts_mjd, -np.inf).max(axis=1, initial=-np.inf)
    spans_d = np.where(is_offered.any(axis=1), lasts - firsts, -SAME_LOOK_D)
    # A nanosecond more: rounding must not cost a visit.
    return np.floor((spans_d + 1e-9) / SAME_LOOK_D).astype(np.int64) + 1


def _joined(parts: list[npt.NDArray[np.int64]]) -> Ints:
    return np.concatenate(parts) if parts else np.empty(0, dtype=np.int64)
