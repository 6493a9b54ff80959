"""The share of sources that no number of looks finds: halos of bright stars, crowding."""

from __future__ import annotations

import numpy as np
import numpy.typing as npt

Floats = npt.NDArray[np.float64]

# Editable assumptions (DEVELOPERS.md, ledger).
ELSEWHERE = 0.02
NEAR_GALACTIC_PLANE = 0.05
PLANE_HALF_WIDTH_DEG = 5.0

# North pole of the Galaxy, ICRS: ESA 1997, The Hipparcos and Tycho Catalogues, vol. 1, 1.5.11.
_POLE_RA_DEG = 192.85948
_POLE_DEC_DEG = 27.12825


def undetectable_fraction(ras_deg: npt.ArrayLike, decs_deg: npt.ArrayLike) -> Floats:
    """Share of sources at a direction that cannot be found however often one looks.

    Parameters
    ----------
    ras_deg, decs_deg : (p,) float    ICRS, degrees

    Returns
    -------
    (p,) float    0.05 within 5 degrees of the Galactic plane, else 0.02

    Source: assumption, editable; the pole of the Galaxy is that of ESA 1997 (Hipparcos).
    """
    sin_latitudes = _sin_galactic_latitudes(np.radians(ras_deg), np.radians(decs_deg))
    is_near = np.abs(sin_latitudes) < np.sin(np.radians(PLANE_HALF_WIDTH_DEG))
    return np.where(is_near, NEAR_GALACTIC_PLANE, ELSEWHERE)


def _sin_galactic_latitudes(ras_rad: Floats, decs_rad: Floats) -> Floats:
    pole_ra_rad, pole_dec_rad = np.radians([_POLE_RA_DEG, _POLE_DEC_DEG])
    along = np.sin(decs_rad) * np.sin(pole_dec_rad)
    across = np.cos(decs_rad) * np.cos(pole_dec_rad) * np.cos(ras_rad - pole_ra_rad)
    sines: Floats = along + across
    return sines
