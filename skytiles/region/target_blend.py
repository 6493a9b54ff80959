"""The smooth prior, of which each target list takes the share that it holds."""

from collections.abc import Sequence

import numpy as np
from numpy.typing import NDArray

from skytiles.region.distance import DistanceConstraint
from skytiles.region.targets import TargetListConstraint

Floats = NDArray[np.float64]

# What is left to the smooth prior at least, so that a list is never all there is.
_LEAST_SMOOTH = 1e-5


def blended_prior(
    smooth: Floats,
    lists: Sequence[TargetListConstraint],
    vectors: Floats,
    *,
    weights: Floats,
    distances: tuple[DistanceConstraint, ...],
) -> Floats:
    """completeness x targets + (1 - completeness) x smooth prior.

    A list made for the region holds its completeness of the result. Where the other constraints
    speak against its targets it holds less, by their likelihood over that of the smooth prior.

    Parameters
    ----------
    smooth : (c,) float    smooth prior, per share of the sky
    lists : TargetListConstraint    any number
    vectors : (c, 3) float    directions of the cells
    weights : (c,) float    likelihood of the other constraints times the share of the sky
    distances : DistanceConstraint    what is known of the source's distance

    Returns
    -------
    (c,) float    per share of the sky, up to a factor

    Source: our own; a mixture of a list and what it leaves out.
    """
    for one in lists:
        share = min(one.completeness, 1.0 - _LEAST_SMOOTH)
        listed = one.densities(vectors, distances=distances)
        as_smooth, as_listed = float(weights @ smooth), float(weights @ listed)
        bound = min(1.0, as_smooth / as_listed) if as_listed > 0.0 else 1.0
        smooth = share * bound * listed + (1.0 - share) * smooth
    return smooth
