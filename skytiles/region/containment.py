"""What a radius on the sky holds, and how a Gaussian is drawn on the whole sphere."""

import numpy as np
from numpy.typing import NDArray

Floats = NDArray[np.float64]

# What a radius holds when a message does not say: one sigma of a two-dimensional Gaussian's
# radius in common usage, 68.27 %, which messages shorten to 0.68.
DEFAULT_CONTAINMENT = 0.68
_ONE_SIGMA = 0.682689492


def radius_in_sigmas(containment: float) -> float:
    """Radius that holds a share of a round two-dimensional Gaussian.

    Parameters
    ----------
    containment : float    0..1, ends excluded; 0.68 is read as the usual 68.27 %

    Returns
    -------
    float    in units of sigma: 1.515 for 68 %, 2.146 for 90 %

    Source: integral of the Gaussian, sqrt(-2 ln(1 - containment)).
    """
    is_usual = abs(containment - DEFAULT_CONTAINMENT) < 0.005
    share = _ONE_SIGMA if is_usual else containment
    return float(np.sqrt(-2.0 * np.log1p(-share)))


def chords_deg(separations: Floats | float) -> Floats:
    """Chords of angular separations, the radius of an equal-area map of the sky.

    Parameters
    ----------
    separations : (n,) float    degrees, 0..180

    Returns
    -------
    (n,) float    2 sin(s / 2) in degrees; a Gaussian of it keeps its stated containment on the
    whole sphere, where one of the separation itself would not

    Source: Lambert's azimuthal equal-area projection.
    """
    return np.asarray(np.rad2deg(2.0 * np.sin(np.deg2rad(separations) / 2.0)))
