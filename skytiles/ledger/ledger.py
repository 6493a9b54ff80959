"""The ledger: what was imaged, what was searched, and where the source can still be."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from skytiles.errors import LedgerError
from skytiles.ledger.ledger_frame import LedgerFrame, frame_efficiency
from skytiles.ledger.look_book import LookBook
from skytiles.ledger.looks import InstrumentLooks, Look
from skytiles.ledger.pixel_groups import PixelGroups
from skytiles.source.source_model import SourceModel

Floats = npt.NDArray[np.float64]
Ints = npt.NDArray[np.int64]

_SUM_TOLERANCE = 1e-6


@dataclass(frozen=True, eq=False)
class _Entry:
    frame: LedgerFrame
    pixels: Ints
    fractions: Floats


class Ledger:
    """The account of one campaign's frames over one region and one source model.

    Parameters
    ----------
    probabilities : (p,) float       of the region's pixels
    outside : float                  probability outside of them
    undetectable : (p,) float        share that no number of looks finds, per pixel
    source_model : SourceModel
    offset_weights : (b,) or (p, b) float, optional
                                     spread of the magnitudes on the model's offset grid, shared or
                                     per pixel (float32 is kept); None: the model's own

    Raises
    ------
    LedgerError    when shapes or sums do not fit

    Formula: D_i = (1 - u_i) sum_h w_h sum_b q_i(b) [1 - prod_l (1 - c_l (1 - prod_e (1 - phi_ei
    eps_e(m_h(t_e) + b))))] over hypotheses h, offsets b, looks l, frames e of a look over pixel i;
    searched = sum_i p_i D_i; imaged = sum of p_i under any frame;
    residual_i = p_i (1 - D_i) / (1 - searched).

    Source: DEVELOPERS.md, ledger (the exact definition). A frame changes only the pixels under
    its look; withdrawing recomputes them and never divides.
    """

    def __init__(
        self,
        probabilities: npt.ArrayLike,
        outside: float,
        *,
        undetectable: npt.ArrayLike,
        source_model: SourceModel,
        offset_weights: npt.ArrayLike | None = None,
    ) -> None:
        self.probabilities = np.asarray(probabilities, dtype=np.float64)
        self.outside = float(outside)
        self.undetectable = np.asarray(undetectable, dtype=np.float64)
        self.source_model = source_model
        weights = source_model.offset_weights if offset_weights is None else offset_weights
        # Weights per pixel are many: those in single precision stay so.
        is_single = getattr(weights, "dtype", None) == np.float32
        self.offset_weights: Floats = np.asarray(
            weights, dtype=np.float32 if is_single else np.float64
        )
        self._check()
        n_pixels = len(self.probabilities)
        self._entries: dict[int, _Entry] = {}
        self._looks: dict[int | str, InstrumentLooks] = {}
        self._book = LookBook(source_model.weights, n_offsets=len(source_model.offsets_mag))
        self._groups = PixelGroups(n_pixels)
        # Per group: chance, by offset, that some look finds a source that can be found.
        self._finds = np.zeros((1, len(source_model.offsets_mag)))
        self._n_frames = np.zeros(n_pixels, dtype=np.int32)
        self._detected = np.zeros(n_pixels)

    def _check(self) -> None:
        n_pixels, n_offsets = len(self.probabilities), len(self.source_model.offsets_mag)
        if self.undetectable.shape != (n_pixels,):
            raise LedgerError(
                f"{self.undetectable.shape} undetectable shares for {n_pixels} pixels",
                "one for each pixel",
                "compute them for the region's pixels",
            )
        if self.offset_weights.shape not in {(n_offsets,), (n_pixels, n_offsets)}:
            raise LedgerError(
                f"offset weights of shape {self.offset_weights.shape}",
                f"({n_offsets},) or ({n_pixels}, {n_offsets})",
                "compute them on the source model's offset grid",
            )
        if abs(self.probabilities.sum() + self.outside - 1.0) > _SUM_TOLERANCE:
            raise LedgerError(
                f"probabilities with a sum of {self.probabilities.sum() + self.outside}",
                "1 together with what is outside",
                "normalise the region",
            )

    # What the account says.

    @property
    def imaged(self) -> float:
        """Share of the probability under at least one frame."""
        return float(self.probabilities @ (self._n_frames > 0))

    @property
    def searched(self) -> float:
        """Share of the probability where the source would have been found."""
        return float(self.probabilities @ self._detected)

    @property
    def detected(self) -> Floats:
        """(p,) chance that the source, were it in that pixel, would have been found (D)."""
        view = self._detected.view()
        view.flags.writeable = False
        return view

    @property
    def residual(self) -> Floats:
        """(p,) probability that it is in that pixel, given that it has not been found."""
        return self.probabilities * (1.0 - self._detected) / (1.0 - self.searched)

    @property
    def residual_outside(self) -> float:
        """Probability that it is outside the pixels, given that it has not been found."""
        return self.outside / (1.0 - self.searched)

    @property
    def n_looks(self) -> int:
        """Number of looks of all instruments."""
        return sum(len(looks.looks) for looks in self._looks.values())

    @property
    def n_frames(self) -> int:
        """Number of frames, with a limit or without."""
        return len(self._entries)

    def has(self, key: int) -> bool:
        """Whether a frame is in the account.

        Parameters
        ----------
        key : int    of the frame

        Returns
        -------
        bool
        """
        return key in self._entries

    def miss_states(self, n_most: int = 256) -> Iterator[tuple[Ints, Ints, Floats]]:
        """Chance that all looks miss a source that can be found, by hypothesis and offset.

        Parameters
        ----------
        n_most : int    states at a time

        Returns
        -------
        iterator of (m,) int, (m,) int, (g, h, b) float
                        pixels, each once over all parts; which of the part's states each has
        """
        distinct, states_of = np.unique(self._groups.group_of, return_inverse=True)
        by_state = np.argsort(states_of.reshape(-1), kind="stable")
        ends = np.searchsorted(states_of.reshape(-1)[by_state], np.arange(len(distinct) + 1))
        for first in range(0, len(distinct), n_most):
            groups = distinct[first : first + n_most].tolist()
            signatures = [self._groups.signatures[group] for group in groups]
            pixels = by_state[ends[first] : ends[first + len(groups)]]
            states = np.stack(list(self._book.misses(signatures)))
            yield pixels, states_of.reshape(-1)[pixels] - first, states

    # What changes the account. Each returns the pixels whose D may have changed.

    def add(self, frame: LedgerFrame, indices: npt.ArrayLike, fractions: npt.ArrayLike) -> Ints:
        """Count one frame.

        Parameters
        ----------
        frame : LedgerFrame
        indices : (n,) int       positions of the region's pixels under it, each once
        fractions : (n,) float   covered share of each; 1 unless the frame is tiny

        Returns
        -------
        (m,) int    positions of the pixels whose detection changed, ascending

        Raises
        ------
        LedgerError    when the frame is already counted or its pixels are not the region's
        """
        entry = self._checked(frame, indices, fractions)
        self._entries[frame.key] = entry
        self._n_frames[entry.pixels] += 1
        if not frame.is_look:
            return np.empty(0, dtype=np.int64)
        magnitudes = self.source_model.node_magnitudes(frame.t_d, frame.band)
        self._book.learn(frame.key, frame_efficiency(frame, magnitudes))
        looks = self._looks.setdefault(frame.instrument, InstrumentLooks())
        touched = self._note_looks(looks, *looks.add(frame))
        new_groups = self._groups.cover(frame.key, entry.pixels, entry.fractions)
        return self._recompute(new_groups | self._groups.groups_with(touched), entry.pixels)

    def withdraw(self, key: int) -> Ints:
        """Take one frame out of the account.

        Parameters
        ----------
        key : int    of a counted frame

        Returns
        -------
        (m,) int    positions of the pixels whose detection changed, ascending

        Raises
        ------
        LedgerError    when the frame is not counted
        """
        if key not in self._entries:
            raise LedgerError(f"frame {key}", "a counted frame", "it may be withdrawn already")
        entry = self._entries.pop(key)
        self._n_frames[entry.pixels] -= 1
        if not entry.frame.is_look:
            return np.empty(0, dtype=np.int64)
        looks = self._looks[entry.frame.instrument]
        touched = self._note_looks(looks, *looks.remove(key)) - {key}
        new_groups = self._groups.uncover(key, entry.pixels)
        self._book.forget(key)
        return self._recompute(new_groups | self._groups.groups_with(touched), entry.pixels)

    def replace(self, frame: LedgerFrame, indices: npt.ArrayLike, fractions: npt.ArrayLike) -> Ints:
        """Count a frame anew after it was corrected or examined.

        Parameters
        ----------
        frame : LedgerFrame      with the key of a counted frame
        indices : (n,) int       positions of the region's pixels under it, each once
        fractions : (n,) float   covered share of each

        Returns
        -------
        (m,) int    positions of the pixels whose detection changed, ascending

        Raises
        ------
        LedgerError    when no frame of that key is counted or its pixels are not the region's
        """
        if frame.key not in self._entries:
            raise LedgerError(f"frame {frame.key}", "a counted frame", "add it first")
        self._check_pixels(frame.key, np.asarray(indices), np.asarray(fractions))
        gone = self.withdraw(frame.key)
        return np.union1d(gone, self.add(frame, indices, fractions))

    # How.

    def _checked(
        self, frame: LedgerFrame, indices: npt.ArrayLike, fractions: npt.ArrayLike
    ) -> _Entry:
        if frame.key in self._entries:
            raise LedgerError(f"frame {frame.key}", "each frame once", "replace it instead")
        pixels = np.asarray(indices, dtype=np.int64)
        shares = np.asarray(fractions, dtype=np.float64)
        self._check_pixels(frame.key, pixels, shares)
        return _Entry(frame, pixels, shares)

    def _check_pixels(self, key: int, pixels: npt.NDArray, shares: npt.NDArray) -> None:
        n_pixels = len(self.probabilities)
        is_inside = np.all((pixels >= 0) & (pixels < n_pixels))
        if pixels.shape != shares.shape or not is_inside or len(np.unique(pixels)) < len(pixels):
            raise LedgerError(
                f"pixels of frame {key}",
                f"each once, from 0 to {n_pixels - 1}, with one share each",
                "compute them for this region",
            )
        if not np.all((shares > 0.0) & (shares <= 1.0)):
            raise LedgerError(
                f"covered shares of frame {key}", "above 0, up to 1", "leave out the others"
            )

    def _note_looks(self, looks: InstrumentLooks, ended: set[Look], begun: set[Look]) -> set[int]:
        """Bring the book of looks up to date; returns the frames whose look changed."""
        for look in ended:
            self._book.close(look)
        for look in begun:
            completeness = max(looks.frames[key].completeness for key in look)
            self._book.open(look, completeness)
        return {key for look in ended | begun for key in look}

    def _recompute(self, groups: set[int], pixels: Ints) -> Ints:
        """Compute the state of some groups, then D of their pixels and of `pixels`."""
        self._make_room()
        signatures = [self._groups.signatures[group] for group in groups]
        self._finds[list(groups)] = self._book.finds_by_offset(signatures)
        changed = np.union1d(pixels, self._groups.pixels_in(groups))
        self._detected[changed] = self._detection(changed)
        return changed

    def _make_room(self) -> None:
        n_missing = self._groups.n_ids - len(self._finds)
        if n_missing > 0:
            n_more = max(n_missing, len(self._finds))
            room = np.zeros((n_more, self._finds.shape[1]))
            self._finds = np.concatenate([self._finds, room])

    def _detection(self, pixels: Ints) -> Floats:
        """D of some pixels from the state of their groups."""
        finds = self._finds[self._groups.group_of[pixels]]
        if self.offset_weights.ndim == 1:
            found = finds @ self.offset_weights
        else:
            found = np.einsum("nb,nb->n", finds, self.offset_weights[pixels])
        detected: Floats = (1.0 - self.undetectable[pixels]) * found
        return detected
