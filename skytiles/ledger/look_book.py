"""Chance that looks miss a source, from the frames of each look that cover a pixel."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from itertools import groupby

import numpy as np
import numpy.typing as npt

from skytiles.ledger.looks import Look
from skytiles.ledger.pixel_groups import Signature

Floats = npt.NDArray[np.float64]

# States of more nodes than this are kept in single precision: an error of 1e-7 in D.
_MOST_DOUBLE_NODES = 2_000


class LookBook:
    """What each examined frame can show, which look it belongs to, and what each look is worth.

    Parameters
    ----------
    weights : (h,) float    of the hypotheses
    n_offsets : int         number of magnitude offsets b
    """

    def __init__(self, weights: Floats, *, n_offsets: int) -> None:
        self._shape = (len(weights), n_offsets)
        is_large = len(weights) * n_offsets > _MOST_DOUBLE_NODES
        self._dtype = np.dtype(np.float32 if is_large else np.float64)
        self._weights = weights.astype(self._dtype)
        # Frame key to (h, b) efficiency, were all of the pixel under it.
        self._efficiencies: dict[int, Floats] = {}
        self._look_of: dict[int, int] = {}
        self._completeness: dict[int, float] = {}

    def learn(self, key: int, efficiencies: Floats) -> None:
        """Note what a frame can show.

        Parameters
        ----------
        key : int                   of the frame
        efficiencies : (h, b) float    chance that it shows a source, were all of a pixel under it
        """
        self._efficiencies[key] = efficiencies.astype(self._dtype)

    def forget(self, key: int) -> None:
        """Drop what a frame can show.

        Parameters
        ----------
        key : int    of the frame
        """
        del self._efficiencies[key]

    def open(self, look: Look, completeness: float) -> None:
        """Note a look, known by its first frame.

        Parameters
        ----------
        look : tuple of int     keys of its frames in time order
        completeness : float    c of the look: the largest of its frames
        """
        self._completeness[look[0]] = completeness
        for key in look:
            self._look_of[key] = look[0]

    def close(self, look: Look) -> None:
        """Forget a look.

        Parameters
        ----------
        look : tuple of int    keys of its frames in time order
        """
        del self._completeness[look[0]]
        for key in look:
            del self._look_of[key]

    def misses(self, signatures: Sequence[Signature]) -> Iterator[Floats]:
        """Chance that all looks over a pixel miss, for several groups of pixels.

        Parameters
        ----------
        signatures : sequence of (frame key, covered share) tuples    of the groups

        Returns
        -------
        iterator of (h, b) float    0..1, in the order of `signatures`
        """
        by_look: dict[Signature, Floats] = {}
        for signature in signatures:
            state = np.ones(self._shape, self._dtype)
            for terms in self._looks_of(signature):
                if terms not in by_look:
                    by_look[terms] = self._miss_of_look(terms)
                state *= by_look[terms]
            yield state

    def finds_by_offset(self, signatures: Sequence[Signature]) -> Floats:
        """Chance that some look over a pixel finds, averaged over the hypotheses.

        Parameters
        ----------
        signatures : (g,) sequence of (frame key, covered share) tuples

        Returns
        -------
        (g, b) float    0..1; exactly 0 where nothing can be found
        """
        rows = np.empty((len(signatures), self._shape[1]), self._dtype)
        for row, state in zip(rows, self.misses(signatures), strict=True):
            np.subtract(1.0, state, out=state)
            np.dot(self._weights, state, out=row)
        return rows

    def _looks_of(self, signature: Signature) -> list[Signature]:
        """The signature split by look; its order is that of the first frames' keys."""
        by_look = sorted(signature, key=lambda term: (self._look_of[term[0]], term))
        return [
            tuple(terms) for _, terms in groupby(by_look, key=lambda term: self._look_of[term[0]])
        ]

    def _miss_of_look(self, terms: Signature) -> Floats:
        """1 - g of one look on a pixel under the given frames of it."""
        unseen = np.ones(self._shape, self._dtype)
        for key, fraction in terms:
            unseen *= 1.0 - fraction * self._efficiencies[key]
        return 1.0 - self._completeness[self._look_of[terms[0][0]]] * (1.0 - unseen)
