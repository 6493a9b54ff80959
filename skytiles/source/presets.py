"""Source models that can be chosen by name."""

from __future__ import annotations

import math
from collections.abc import Callable

import numpy as np
import numpy.typing as npt

from skytiles.errors import SourceError
from skytiles.source.hypothesis import ALWAYS_D, Hypothesis
from skytiles.source.source_model import LARGEST_STEP_MAG, SourceModel

Floats = npt.NDArray[np.float64]

# A grid of +-4 sigma leaves 6e-5 of the probability to its two end nodes.
_REACH_SIGMA = 4.0
_FEWEST_STEPS_PER_SIGMA = 2


def steady_model(magnitude: float = 12.0, sigma_mag: float = 2.0) -> SourceModel:
    """A light that shone before the event and stays as it is.

    Parameters
    ----------
    magnitude : float    its median magnitude
    sigma_mag : float    its spread (normal), magnitudes, 0 to 10

    Returns
    -------
    SourceModel

    Raises
    ------
    SourceError    when a number is not finite or the spread is out of range
    """
    if not math.isfinite(magnitude) or not 0.0 <= sigma_mag <= 10.0:
        raise SourceError(
            f"magnitude {magnitude}, spread {sigma_mag}",
            "a finite magnitude and a spread of 0 to 10 magnitudes",
            "correct the source model",
        )
    offsets_mag, offset_weights = normal_offsets(sigma_mag)
    always = Hypothesis("steady", 1.0, ALWAYS_D, magnitude, magnitude, 1.0, 0.0)
    return SourceModel(
        hypotheses=(always,),
        offsets_mag=offsets_mag,
        offset_weights=offset_weights,
        label=f"steady light of magnitude {magnitude:g}, spread {sigma_mag:g}",
        preset="steady",
        parameters={"magnitude": magnitude, "sigma_mag": sigma_mag},
    )


def normal_offsets(sigma_mag: float) -> tuple[Floats, Floats]:
    """Normal spread on an even grid of offsets; each node holds the probability of its cell.

    Parameters
    ----------
    sigma_mag : float    standard deviation, magnitudes, >= 0

    Returns
    -------
    (b,) float, (b,) float    offsets in magnitudes, step <= 0.5 and <= sigma/2; weights, sum 1
    """
    if sigma_mag == 0.0:
        return np.zeros(1), np.ones(1)
    per_sigma = max(_FEWEST_STEPS_PER_SIGMA, math.ceil(sigma_mag / LARGEST_STEP_MAG))
    n_each_side = math.ceil(_REACH_SIGMA * per_sigma)
    steps = np.arange(-n_each_side, n_each_side + 1)
    edges_sigma = (steps[:-1] + 0.5) / per_sigma
    below = np.array([0.5 * math.erfc(-edge / math.sqrt(2.0)) for edge in edges_sigma])
    offsets_mag: Floats = steps.astype(np.float64) * (sigma_mag / per_sigma)
    return offsets_mag, np.diff(np.concatenate([[0.0], below, [1.0]]))


PRESETS: dict[str, Callable[..., SourceModel]] = {"steady": steady_model}
