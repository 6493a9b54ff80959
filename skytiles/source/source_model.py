"""A source model: weighted hypotheses and the spread of magnitudes about them."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field

import numpy as np
import numpy.typing as npt

from skytiles.errors import SourceError
from skytiles.source.hypothesis import Hypothesis, magnitudes

Floats = npt.NDArray[np.float64]

# Coarser offset grids would smear the detection curve (DEVELOPERS.md, source model).
LARGEST_STEP_MAG = 0.5
_SUM_TOLERANCE = 1e-6


@dataclass(frozen=True, eq=False)
class SourceModel:
    """Hypotheses with weights that sum to 1; offsets (b,) in magnitudes with weights (b,)."""

    hypotheses: tuple[Hypothesis, ...]
    offsets_mag: Floats
    offset_weights: Floats
    label: str
    preset: str = "custom"
    parameters: Mapping[str, float] = field(default_factory=dict)

    def __post_init__(self) -> None:
        _check_sum("hypothesis weights", [h.weight for h in self.hypotheses])
        _check_sum("offset weights", self.offset_weights)
        if self.offsets_mag.shape != self.offset_weights.shape or self.offsets_mag.ndim != 1:
            raise SourceError(
                f"{self.offsets_mag.shape} offsets with {self.offset_weights.shape} weights",
                "one weight for each offset",
                "correct the lists",
            )
        if not np.all(np.isfinite(self.offsets_mag)) or np.any(np.diff(self.offsets_mag) <= 0.0):
            raise SourceError("offsets", "finite numbers in rising order", "sort the offsets")

    @property
    def weights(self) -> Floats:
        """(h,) weights of the hypotheses."""
        return np.array([hypothesis.weight for hypothesis in self.hypotheses])

    def magnitudes(self, t_d: npt.ArrayLike, band: str) -> Floats:
        """Magnitudes of every hypothesis, before any offset.

        Parameters
        ----------
        t_d : (f,) float    days since the event
        band : str          band of the frames

        Returns
        -------
        (h, f) float    Vega magnitudes; +inf before first light
        """
        return np.stack([magnitudes(hypothesis, t_d, band) for hypothesis in self.hypotheses])

    def node_magnitudes(self, t_d: float, band: str) -> Floats:
        """Magnitudes of every hypothesis with every offset at one time.

        Parameters
        ----------
        t_d : float    days since the event
        band : str     band of the frame

        Returns
        -------
        (h, b) float    Vega magnitudes; +inf before first light
        """
        return self.magnitudes([t_d], band) + self.offsets_mag[None, :]


def _check_sum(name: str, weights: npt.ArrayLike) -> None:
    array = np.asarray(weights, dtype=np.float64)
    if array.size == 0 or not np.all(array >= 0.0) or abs(array.sum() - 1.0) > _SUM_TOLERANCE:
        raise SourceError(
            f"{name} that sum to {array.sum() if array.size else 'nothing'}",
            "none below 0, sum 1",
            "divide them by their sum",
        )
