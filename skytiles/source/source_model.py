"""A source model: weighted hypotheses and the spread of magnitudes about them."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field

import numpy as np
import numpy.typing as npt

from skytiles.errors import SourceError
from skytiles.source.extinction import extinction_ratio
from skytiles.source.hypothesis import Hypothesis, magnitudes

Floats = npt.NDArray[np.float64]

# Coarser offset grids would smear the detection curve (DEVELOPERS.md, source model).
LARGEST_STEP_MAG = 0.5
_SUM_TOLERANCE = 1e-6
PLACEMENTS = ("apparent", "galactic")


@dataclass(frozen=True, eq=False)
class SourceModel:
    """Hypotheses with weights that sum to 1; nodes of offsets (b,) with weights (b,).

    A node is an offset in magnitudes, the same in all bands, and an extinction A_V, which is worth
    in each band what the extinction law says. Without extinctions they are 0.
    """

    hypotheses: tuple[Hypothesis, ...]
    offsets_mag: Floats
    offset_weights: Floats
    label: str
    preset: str = "custom"
    parameters: Mapping[str, float] = field(default_factory=dict)
    extinctions_mag: Floats | None = None
    # "galactic": the magnitudes are absolute, and the model is placed before it is used.
    placement: str = "apparent"

    def __post_init__(self) -> None:
        if self.placement not in PLACEMENTS:
            raise SourceError(
                f"placement {self.placement!r}", " or ".join(PLACEMENTS), "choose one of these"
            )
        _check_sum("hypothesis weights", [h.weight for h in self.hypotheses])
        _check_sum("offset weights", self.offset_weights)
        if self.offsets_mag.shape != self.offset_weights.shape or self.offsets_mag.ndim != 1:
            raise SourceError(
                f"{self.offsets_mag.shape} offsets with {self.offset_weights.shape} weights",
                "one weight for each offset",
                "correct the lists",
            )
        _check_nodes(self.offsets_mag, self.extinctions_mag)

    @property
    def weights(self) -> Floats:
        """(h,) weights of the hypotheses."""
        return np.array([hypothesis.weight for hypothesis in self.hypotheses])

    @property
    def first_light_d(self) -> float:
        """Days after the event before which no hypothesis of any weight shows light."""
        return min(h.first_light_d for h in self.hypotheses if h.weight > 0.0)

    def offsets_in(self, band: str) -> Floats:
        """Offsets of the nodes in one band, extinction included.

        Parameters
        ----------
        band : str    band of the frames

        Returns
        -------
        (b,) float    magnitudes
        """
        if self.extinctions_mag is None:
            return self.offsets_mag
        in_band: Floats = self.offsets_mag + extinction_ratio(band) * self.extinctions_mag
        return in_band

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
        return self.magnitudes([t_d], band) + self.offsets_in(band)[None, :]


def _check_nodes(offsets_mag: Floats, extinctions_mag: Floats | None) -> None:
    if not np.all(np.isfinite(offsets_mag)):
        raise SourceError("offsets", "finite numbers", "correct the offsets")
    if extinctions_mag is None:
        if np.any(np.diff(offsets_mag) <= 0.0):
            raise SourceError("offsets", "numbers in rising order", "sort the offsets")
        return
    is_fine = np.isfinite(extinctions_mag) & (extinctions_mag >= 0.0)
    if extinctions_mag.shape != offsets_mag.shape or not np.all(is_fine):
        raise SourceError(
            "extinctions", "one of 0 or more for each offset, finite", "correct the lists"
        )


def _check_sum(name: str, weights: npt.ArrayLike) -> None:
    array = np.asarray(weights, dtype=np.float64)
    if array.size == 0 or not np.all(array >= 0.0) or abs(array.sum() - 1.0) > _SUM_TOLERANCE:
        raise SourceError(
            f"{name} that sum to {array.sum() if array.size else 'nothing'}",
            "none below 0, sum 1",
            "divide them by their sum",
        )
