"""How far the Earth has turned."""

from __future__ import annotations

import numpy as np
import numpy.typing as npt

from skytiles.sphere.nutation import (
    ARCSEC_RAD,
    fundamental_arguments_rad,
    mean_obliquity_rad,
    nutation_rad,
)
from skytiles.sphere.time_scales import MJD_J2000, centuries_since_j2000, tt_mjds

Floats = npt.NDArray[np.float64]

_TWO_PI = 2.0 * np.pi


def earth_rotation_angle_rad(mjds_ut1: Floats) -> Floats:
    """Earth rotation angle.

    Parameters
    ----------
    mjds_ut1 : (t,) float    MJD, UT1

    Returns
    -------
    (t,) float    radians, 0..2 pi

    Source: IAU 2000 resolution B1.8; Capitaine, Guinot & McCarthy 2000, A&A 355, 398.
    """
    days = np.asarray(mjds_ut1, dtype=float) - MJD_J2000
    # The whole turns are taken off first, to keep the digits.
    turns = np.mod(days, 1.0) + 0.7790572732640 + 0.00273781191135448 * days
    return np.asarray(_TWO_PI * np.mod(turns, 1.0))


def gmst_rad(mjds_ut1: Floats) -> Floats:
    """Greenwich mean sidereal time.

    Parameters
    ----------
    mjds_ut1 : (t,) float    MJD, UT1

    Returns
    -------
    (t,) float    radians, 0..2 pi

    Source: Capitaine, Wallace & Chapront 2003, A&A 412, 567 (IAU 2006).
    """
    t = centuries_since_j2000(tt_mjds(mjds_ut1))
    arcsecs = 0.014506 + (4612.156534 + (1.3915817 - 0.00000044 * t) * t) * t
    return np.asarray(np.mod(earth_rotation_angle_rad(mjds_ut1) + arcsecs * ARCSEC_RAD, _TWO_PI))


def gast_rad(mjds_ut1: Floats) -> Floats:
    """Greenwich apparent sidereal time: mean sidereal time plus the equation of the equinoxes.

    Parameters
    ----------
    mjds_ut1 : (t,) float    MJD, UT1

    Returns
    -------
    (t,) float    radians, 0..2 pi; error below 0.02 arcsec

    Source: as gmst_rad; complementary terms of IAU 2000 (the two largest).
    """
    t = centuries_since_j2000(tt_mjds(mjds_ut1))
    longitudes_rad, _ = nutation_rad(t)
    nodes_rad = fundamental_arguments_rad(t)[..., 4]
    complement = (
        0.00264096 * np.sin(nodes_rad) + 0.00006352 * np.sin(2.0 * nodes_rad)
    ) * ARCSEC_RAD
    equinoxes_rad = longitudes_rad * np.cos(mean_obliquity_rad(t)) + complement
    return np.asarray(np.mod(gmst_rad(mjds_ut1) + equinoxes_rad, _TWO_PI))
