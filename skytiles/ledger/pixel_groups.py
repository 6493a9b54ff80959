"""Pixels that lie under exactly the same frames share one state of the account."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass, field

import numpy as np
import numpy.typing as npt

Floats = npt.NDArray[np.float64]
Ints = npt.NDArray[np.int64]

# (frame key, covered fraction), ascending by key.
Signature = tuple[tuple[int, float], ...]
UNTOUCHED = 0


@dataclass
class PixelGroups:
    """Group 0 holds the pixels under no look; every other group has its signature."""

    n_pixels: int
    group_of: Ints = field(init=False)
    signatures: dict[int, Signature] = field(default_factory=lambda: {UNTOUCHED: ()})
    _ids: dict[Signature, int] = field(default_factory=lambda: {(): UNTOUCHED})
    _n_members: dict[int, int] = field(default_factory=dict)
    _with_frame: dict[int, set[int]] = field(default_factory=dict)
    _free: list[int] = field(default_factory=list)

    def __post_init__(self) -> None:
        self.group_of = np.zeros(self.n_pixels, dtype=np.int64)
        self._n_members[UNTOUCHED] = self.n_pixels

    @property
    def n_ids(self) -> int:
        """One more than the largest group number ever used."""
        return len(self.signatures) + len(self._free)

    def groups_with(self, frames: Iterable[int]) -> set[int]:
        """Groups whose pixels lie under any of some frames.

        Parameters
        ----------
        frames : iterable of int    keys of frames

        Returns
        -------
        set of int    group numbers
        """
        return set().union(*(self._with_frame.get(key, set()) for key in frames))

    def pixels_in(self, groups: Iterable[int]) -> Ints:
        """Pixels of some groups.

        Parameters
        ----------
        groups : iterable of int    group numbers

        Returns
        -------
        (n,) int    pixel positions, ascending
        """
        is_wanted = np.zeros(self.n_ids, dtype=bool)
        is_wanted[list(groups)] = True
        return np.flatnonzero(is_wanted[self.group_of])

    def cover(self, frame: int, pixels: Ints, fractions: Floats) -> set[int]:
        """Put some pixels under one more frame.

        Parameters
        ----------
        frame : int              key of the frame
        pixels : (n,) int        pixel positions, each once
        fractions : (n,) float   covered share of each

        Returns
        -------
        set of int    the groups that are new, whose state has to be computed
        """
        pairs = np.stack([self.group_of[pixels].astype(np.float64), fractions], axis=-1)
        distinct, places = np.unique(pairs, axis=0, return_inverse=True)
        signatures = [
            tuple(sorted((*self.signatures[int(group)], (frame, float(fraction)))))
            for group, fraction in distinct
        ]
        return self._regroup(pixels, signatures, places.reshape(-1))

    def uncover(self, frame: int, pixels: Ints) -> set[int]:
        """Take one frame away from the pixels under it.

        Parameters
        ----------
        frame : int         key of the frame
        pixels : (n,) int   all pixels under it

        Returns
        -------
        set of int    the groups that are new, whose state has to be computed
        """
        distinct, places = np.unique(self.group_of[pixels], return_inverse=True)
        signatures = [
            tuple(term for term in self.signatures[int(group)] if term[0] != frame)
            for group in distinct
        ]
        return self._regroup(pixels, signatures, places.reshape(-1))

    def _regroup(self, pixels: Ints, signatures: list[Signature], places: Ints) -> set[int]:
        """Give pixel j the signature `signatures[places[j]]`."""
        if len(pixels) == 0:
            return set()
        left, n_left = np.unique(self.group_of[pixels], return_counts=True)
        is_new = {signature for signature in signatures if signature not in self._ids}
        ids = np.array([self._id_of(signature) for signature in signatures], dtype=np.int64)
        self.group_of[pixels] = ids[places]
        for group, count in zip(ids.tolist(), np.bincount(places).tolist(), strict=True):
            self._n_members[group] = self._n_members.get(group, 0) + count
        for group, count in zip(left.tolist(), n_left.tolist(), strict=True):
            self._shrink(group, count)
        return {self._ids[signature] for signature in is_new}

    def _id_of(self, signature: Signature) -> int:
        if signature not in self._ids:
            group = self._free.pop() if self._free else len(self.signatures)
            self._ids[signature] = group
            self.signatures[group] = signature
            for key, _ in signature:
                self._with_frame.setdefault(key, set()).add(group)
        return self._ids[signature]

    def _shrink(self, group: int, n_leaving: int) -> None:
        self._n_members[group] -= n_leaving
        if self._n_members[group] or group == UNTOUCHED:
            return
        signature = self.signatures.pop(group)
        del self._ids[signature], self._n_members[group]
        self._free.append(group)
        for key, _ in signature:
            self._with_frame[key].discard(group)
