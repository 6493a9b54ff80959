"""Positions as right ascension and declination, and as unit vectors."""

import numpy as np
from numpy.typing import ArrayLike, NDArray

Floats = NDArray[np.float64]


def wrap_ra_deg(ras_deg: ArrayLike) -> Floats:
    """Right ascension brought into [0, 360).

    Parameters
    ----------
    ras_deg : (n,) float or scalar    any angle, degrees

    Returns
    -------
    (n,) float    degrees, 0 <= ra < 360

    Source: definition.
    """
    wrapped = np.mod(np.asarray(ras_deg, dtype=np.float64), 360.0)
    # A tiny negative angle is rounded up to 360 by the modulus.
    return np.where(wrapped >= 360.0, 0.0, wrapped)


def unit_vectors(ras_deg: ArrayLike, decs_deg: ArrayLike) -> Floats:
    """Unit vectors of positions on the sphere.

    Parameters
    ----------
    ras_deg, decs_deg : (n,) float or scalars    degrees

    Returns
    -------
    (n, 3) float    no unit; scalars give (3,)

    Source: definition.
    """
    ras_rad, decs_rad = np.deg2rad(ras_deg), np.deg2rad(decs_deg)
    cos_decs = np.cos(decs_rad)
    parts = np.broadcast_arrays(
        cos_decs * np.cos(ras_rad), cos_decs * np.sin(ras_rad), np.sin(decs_rad)
    )
    return np.stack(parts, axis=-1)


def ras_decs_deg(vectors: ArrayLike) -> tuple[Floats, Floats]:
    """Right ascensions and declinations of vectors of any length.

    Parameters
    ----------
    vectors : (n, 3) or (3,) float    no unit

    Returns
    -------
    (n,) float, (n,) float    degrees, 0 <= ra < 360, -90 <= dec <= 90

    Source: definition; the atan2 form keeps its accuracy at the poles.
    """
    v = np.asarray(vectors, dtype=np.float64)
    x, y, z = v[..., 0], v[..., 1], v[..., 2]
    ras_deg = wrap_ra_deg(np.rad2deg(np.arctan2(y, x)))
    return ras_deg, np.rad2deg(np.arctan2(z, np.hypot(x, y)))


def separations_deg(
    ras1_deg: ArrayLike, decs1_deg: ArrayLike, ras2_deg: ArrayLike, decs2_deg: ArrayLike
) -> Floats:
    """Angular separations of pairs of positions.

    Parameters
    ----------
    ras1_deg, decs1_deg, ras2_deg, decs2_deg : (n,) float or scalars    degrees, broadcast

    Returns
    -------
    (n,) float    degrees, 0..180

    Source: Vincenty's atan2 form, right for tiny, ordinary and antipodal pairs.
    """
    dec1, dec2 = np.deg2rad(decs1_deg), np.deg2rad(decs2_deg)
    d_ra = np.deg2rad(np.subtract(ras2_deg, ras1_deg))
    cos1, sin1, cos2, sin2 = np.cos(dec1), np.sin(dec1), np.cos(dec2), np.sin(dec2)
    across = np.hypot(cos2 * np.sin(d_ra), cos1 * sin2 - sin1 * cos2 * np.cos(d_ra))
    along = sin1 * sin2 + cos1 * cos2 * np.cos(d_ra)
    return np.asarray(np.rad2deg(np.arctan2(across, along)))


def position_angles_deg(
    ra_deg: float, dec_deg: float, ras_deg: ArrayLike, decs_deg: ArrayLike
) -> Floats:
    """Directions from one position to others, from north through east.

    Parameters
    ----------
    ra_deg, dec_deg : float    where one looks from, degrees
    ras_deg, decs_deg : (n,) float or scalars    where one looks to, degrees

    Returns
    -------
    (n,) float    degrees, 0..360

    Source: definition (four-part formula).
    """
    dec0, decs = np.deg2rad(dec_deg), np.deg2rad(decs_deg)
    d_ra = np.deg2rad(np.subtract(ras_deg, ra_deg))
    east = np.cos(decs) * np.sin(d_ra)
    north = np.cos(dec0) * np.sin(decs) - np.sin(dec0) * np.cos(decs) * np.cos(d_ra)
    return wrap_ra_deg(np.rad2deg(np.arctan2(east, north)))
