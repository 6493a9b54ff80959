"""Directions on the equator of date, the frame that a site turns in."""

from __future__ import annotations

import numpy as np
import numpy.typing as npt

from skytiles.sphere.nutation import equator_of_date_matrices, mean_obliquity_rad, nutation_rad

Floats = npt.NDArray[np.float64]


def equatorial_of_date(
    longitudes_rad: Floats, latitudes_rad: Floats, centuries_tt: Floats
) -> Floats:
    """Unit vectors on the true equator of date from mean ecliptic coordinates of date.

    Parameters
    ----------
    longitudes_rad, latitudes_rad : (t,) float    ecliptic, mean equinox of date
    centuries_tt : (t,) float                     Julian centuries from J2000.0, TT

    Returns
    -------
    (t, 3) float
    """
    nutations_rad, obliquities_rad = nutation_rad(centuries_tt)
    longitudes = longitudes_rad + nutations_rad
    obliquities = mean_obliquity_rad(centuries_tt) + obliquities_rad
    x = np.cos(latitudes_rad) * np.cos(longitudes)
    y = np.cos(latitudes_rad) * np.sin(longitudes)
    z = np.sin(latitudes_rad) + np.zeros_like(longitudes)
    cosines, sines = np.cos(obliquities), np.sin(obliquities)
    return np.stack([x, y * cosines - z * sines, y * sines + z * cosines], axis=-1)


def icrs_from_of_date(vectors: Floats, mjds_tt: Floats) -> Floats:
    """Turn directions of date back to ICRS axes.

    Parameters
    ----------
    vectors : (t, 3) float    true equator and equinox of date
    mjds_tt : (t,) float      MJD, TT

    Returns
    -------
    (t, 3) float
    """
    matrices = equator_of_date_matrices(mjds_tt)
    return np.asarray(np.einsum("tji,tj->ti", matrices, vectors))
