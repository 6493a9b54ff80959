"""Star directions as a site on the turning Earth meets them."""

from __future__ import annotations

import numpy as np
import numpy.typing as npt

from skytiles.night.of_date import equatorial_of_date
from skytiles.night.sun import sun_longitudes_deg
from skytiles.sphere.nutation import ARCSEC_RAD, equator_of_date_matrices
from skytiles.sphere.time_scales import centuries_since_j2000, tt_mjds

Floats = npt.NDArray[np.float64]

_ABERRATION_RAD = 20.49552 * ARCSEC_RAD


def apparent_vectors(icrs_vectors: Floats, mjd: float) -> Floats:
    """Turn ICRS directions to the true equator of date, moved by the Earth's velocity.

    Parameters
    ----------
    icrs_vectors : (k, 3) float    unit vectors of distant sources
    mjd : float                    MJD, UTC

    Returns
    -------
    (k, 3) float    unit vectors; error below 0.1 arcsec more than a degree from the Sun. Good for
        half a day around the moment to 0.2 arcsec.

    Source: precession and nutation as in equator_of_date_matrices; aberration to first order.
    """
    mjd_tt = tt_mjds(np.array([mjd]))
    turned = icrs_vectors @ equator_of_date_matrices(mjd_tt)[0].T
    moved = turned + earth_velocity_in_c(mjd_tt)[0]
    return np.asarray(moved / np.linalg.norm(moved, axis=-1, keepdims=True))


def earth_velocity_in_c(mjds_tt: Floats) -> Floats:
    """Velocity of the Earth around the Sun on the true equator of date, in units of light speed.

    Parameters
    ----------
    mjds_tt : (t,) float    MJD, TT

    Returns
    -------
    (t, 3) float    error below 5e-8 (0.01 arcsec of aberration)

    Source: Meeus 1998, Astronomical Algorithms, eq. 23.2, as a vector.
    """
    t = centuries_since_j2000(mjds_tt)
    eccentricities = 0.016708634 - (0.000042037 + 0.0000001267 * t) * t
    perihelions_rad = np.radians(102.93735 + (1.71946 + 0.00046 * t) * t)
    in_plane = np.zeros_like(t)
    ahead = equatorial_of_date(np.radians(sun_longitudes_deg(t) - 90.0), in_plane, t)
    aside = equatorial_of_date(perihelions_rad + np.pi / 2.0, in_plane, t)
    return np.asarray(_ABERRATION_RAD * (ahead + eccentricities[..., None] * aside))
