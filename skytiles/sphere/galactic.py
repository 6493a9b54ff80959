"""Galactic coordinates."""

import numpy as np
from numpy.typing import ArrayLike, NDArray

from skytiles.sphere.angles import ras_decs_deg, unit_vectors

Floats = NDArray[np.float64]

# Source: ESA 1997, The Hipparcos and Tycho Catalogues (SP-1200), vol. 1, section 1.5.3:
# north pole of the Galaxy and Galactic longitude of the ascending node, ICRS.
_POLE_RA_DEG, _POLE_DEC_DEG, _NODE_DEG = 192.85948, 27.12825, 32.93192


def _rotation() -> Floats:
    """Rows: the Galactic axes (centre, l = 90, north pole) in ICRS."""
    pole = unit_vectors(_POLE_RA_DEG, _POLE_DEC_DEG)
    node = unit_vectors(_POLE_RA_DEG + 90.0, 0.0)
    beside = np.cross(pole, node)
    turn = np.deg2rad(_NODE_DEG)
    centre = np.cos(turn) * node - np.sin(turn) * beside
    return np.stack([centre, np.cross(pole, centre), pole])


GALACTIC_AXES = _rotation()


def galactic_vectors(vectors: ArrayLike) -> Floats:
    """Unit vectors in Galactic axes: centre, direction of rotation, north pole.

    Parameters
    ----------
    vectors : (n, 3) float    ICRS, no unit

    Returns
    -------
    (n, 3) float    no unit

    Source: ESA 1997, SP-1200, vol. 1, section 1.5.3.
    """
    return np.asarray(np.asarray(vectors, dtype=np.float64) @ GALACTIC_AXES.T)


def galactic_lons_lats_deg(ras_deg: ArrayLike, decs_deg: ArrayLike) -> tuple[Floats, Floats]:
    """Galactic longitudes and latitudes.

    Parameters
    ----------
    ras_deg, decs_deg : (n,) float    ICRS, degrees

    Returns
    -------
    (n,) float, (n,) float    degrees

    Source: ESA 1997, SP-1200, vol. 1, section 1.5.3.
    """
    return ras_decs_deg(galactic_vectors(unit_vectors(ras_deg, decs_deg)))
