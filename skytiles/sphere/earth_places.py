"""Where places on the Earth are, seen from its centre, and how they stand among the stars."""

import numpy as np
from numpy.typing import ArrayLike, NDArray

from skytiles.sphere.nutation import equator_of_date_matrices
from skytiles.sphere.sidereal import gast_rad
from skytiles.sphere.time_scales import tt_mjds, ut1_mjds

Floats = NDArray[np.float64]

# Equatorial radius and flattening of the ellipsoid. Source: WGS84 (NIMA TR8350.2).
WGS84_RADIUS_M = 6378137.0
WGS84_FLATTENING = 1.0 / 298.257223563
# Source: definition of the metre.
LIGHT_M_PER_S = 299792458.0


def place_vectors_m(
    longitudes_deg: ArrayLike, latitudes_deg: ArrayLike, heights_m: ArrayLike
) -> Floats:
    """Vectors from the centre of the Earth to places on it.

    Parameters
    ----------
    longitudes_deg, latitudes_deg : (s,) float    WGS84, degrees, east and north positive
    heights_m : (s,) float    above the ellipsoid, metres

    Returns
    -------
    (s, 3) float    metres, axes fixed in the Earth: Greenwich, 90 degrees east, north pole

    Source: definition of geodetic coordinates on the WGS84 ellipsoid (NIMA TR8350.2).
    """
    lons, lats = np.deg2rad(longitudes_deg), np.deg2rad(latitudes_deg)
    heights = np.asarray(heights_m, dtype=np.float64)
    e2 = WGS84_FLATTENING * (2.0 - WGS84_FLATTENING)
    across = WGS84_RADIUS_M / np.sqrt(1.0 - e2 * np.sin(lats) ** 2)
    parts = np.broadcast_arrays(
        (across + heights) * np.cos(lats) * np.cos(lons),
        (across + heights) * np.cos(lats) * np.sin(lons),
        (across * (1.0 - e2) + heights) * np.sin(lats),
    )
    return np.stack(parts, axis=-1)


def earth_to_icrs_matrix(mjd: float) -> Floats:
    """Rotation of vectors fixed in the Earth to ICRS axes at one moment.

    Parameters
    ----------
    mjd : float    MJD, UTC

    Returns
    -------
    (3, 3) float    multiply column vectors from the left; error as ut1_mjds, below 1 arcsec
    (polar motion, 0.5 arcsec, is left out)

    Source: apparent sidereal time; precession and nutation as equator_of_date_matrices.
    """
    moment = np.asarray(mjd, dtype=np.float64)
    turn = float(gast_rad(ut1_mjds(moment)))
    c, s = np.cos(turn), np.sin(turn)
    to_equator_of_date = np.array([[c, -s, 0.0], [s, c, 0.0], [0.0, 0.0, 1.0]])
    return np.asarray(equator_of_date_matrices(tt_mjds(moment)).T @ to_equator_of_date)
