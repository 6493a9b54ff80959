"""How many sources a cut in signal-to-noise lets through."""

from __future__ import annotations

import math

import numpy as np
import numpy.typing as npt

Floats = npt.NDArray[np.float64]

_erfc = np.frompyfunc(math.erfc, 1, 1)


def five_sigma_efficiency(mags: Floats, limit_mag: float) -> Floats:
    """Share of sources of a magnitude that a pure cut at 5 sigma finds.

    Parameters
    ----------
    mags : (n,) float     magnitudes
    limit_mag : float     5 sigma limit

    Returns
    -------
    (n,) float    0..1; the ledger's logistic curve with s = 0.2 is within 0.13 of it

    Formula: P = Phi(5 x 10^(-0.4 (m - m5)) - 5), Phi the normal distribution.

    Source: definition of a 5 sigma limit where the sky sets the noise.
    """
    sigmas = 5.0 * 10.0 ** (-0.4 * (np.asarray(mags, dtype=float) - limit_mag))
    return np.asarray(0.5 * _erfc((5.0 - sigmas) / math.sqrt(2.0)), dtype=float)
