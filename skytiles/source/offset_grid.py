"""A normal spread of magnitudes on an even grid."""

from __future__ import annotations

import math

import numpy as np
import numpy.typing as npt

from skytiles.source.source_model import LARGEST_STEP_MAG

Floats = npt.NDArray[np.float64]

# A grid of +-4 sigma leaves 6e-5 of the probability to its two end nodes.
_REACH_SIGMA = 4.0
_FEWEST_STEPS_PER_SIGMA = 2


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
