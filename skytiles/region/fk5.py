"""Positions of the FK5 system (equinox J2000) in ICRS."""

import numpy as np

from skytiles.sphere.angles import ras_decs_deg, unit_vectors

# Rotations about x, y and z, radians: 22 milliarcseconds at most.
# Source: Mignard & Froeschle 2000, A&A 354, 732 (FK5 against Hipparcos).
_ETA, _XI, _ALPHA = np.deg2rad(np.array([-19.9, 9.1, -22.9]) / 3.6e6)
_FK5_FROM_ICRS = np.array([[1.0, _ALPHA, -_XI], [-_ALPHA, 1.0, -_ETA], [_XI, _ETA, 1.0]])


def icrs_from_fk5_deg(ra_deg: float, dec_deg: float) -> tuple[float, float]:
    """A position of FK5 (equinox and epoch J2000) in ICRS.

    Parameters
    ----------
    ra_deg, dec_deg : float    degrees, FK5

    Returns
    -------
    float, float    degrees, ICRS

    Source: Mignard & Froeschle 2000, A&A 354, 732; to the first order of angles of 1e-7.
    """
    ra, dec = ras_decs_deg(unit_vectors(ra_deg, dec_deg) @ _FK5_FROM_ICRS)
    return float(ra), float(dec)
