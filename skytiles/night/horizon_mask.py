"""What hides the sky round a site: trees, houses, hills."""

from __future__ import annotations

import math

import numpy as np
import numpy.typing as npt

from skytiles.night.night_error import NightError

Floats = npt.NDArray[np.float64]

# (azimuth from north by east, altitude of the skyline there), degrees.
HorizonPoints = tuple[tuple[float, float], ...]

MOST_POINTS = 360


def skyline_altitudes_deg(points: HorizonPoints, azimuths_deg: Floats) -> Floats:
    """Altitude of the skyline in some directions, straight lines between the points.

    Parameters
    ----------
    points : ((azimuth, altitude), ...)    degrees, in any order; the last joins the first
    azimuths_deg : (...,) float            from north by east, degrees

    Returns
    -------
    (...,) float    degrees; -90 everywhere without points, the same all round with one

    Source: linear interpolation round the circle of azimuth.
    """
    azimuths = np.asarray(azimuths_deg, dtype=float)
    if not points:
        return np.full(azimuths.shape, -90.0)
    known_azimuths, known_altitudes = np.transpose(points)
    return np.asarray(np.interp(azimuths, known_azimuths, known_altitudes, period=360.0))


def check_horizon(points: HorizonPoints) -> None:
    """Refuse a horizon mask that cannot be drawn round a site.

    Parameters
    ----------
    points : ((azimuth, altitude), ...)    degrees

    Raises
    ------
    NightError    for more than 360 points, for an azimuth beyond 0..360 or one that is given
        twice, for an altitude beyond -10..90
    """
    azimuths = [azimuth % 360.0 for azimuth, _ in points if math.isfinite(azimuth)]
    is_sound = all(
        0.0 <= azimuth <= 360.0 and -10.0 <= altitude <= 90.0 for azimuth, altitude in points
    )
    if not is_sound or len(points) > MOST_POINTS or len(set(azimuths)) < len(points):
        raise NightError(
            f"a horizon mask of {len(points)} points",
            f"at most {MOST_POINTS} points: azimuths 0 to 360 degrees, each once, altitudes to 90",
            "correct the horizon mask of the site",
        )
