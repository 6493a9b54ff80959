"""Where an observer stands, and the directions that follow from it."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from skytiles.night.horizon_mask import HorizonPoints, check_horizon
from skytiles.night.night_error import NightError

Floats = npt.NDArray[np.float64]

# WGS84.
_EARTH_RADIUS_KM = 6378.137
_FLATTENING = 1.0 / 298.257223563


@dataclass(frozen=True)
class Place:
    """A site on the Earth (WGS84, geodetic) and what it can see.

    `horizon` holds (azimuth, altitude) of the skyline, degrees; it is as private as the place.
    """

    latitude_deg: float
    longitude_deg: float
    height_m: float = 0.0
    min_altitude_deg: float = 20.0
    horizon: HorizonPoints = ()

    def __post_init__(self) -> None:
        values = (self.latitude_deg, self.longitude_deg, self.height_m, self.min_altitude_deg)
        if not all(map(math.isfinite, values)) or abs(self.latitude_deg) > 90.0:
            raise NightError(
                f"latitude {self.latitude_deg}, longitude {self.longitude_deg}, "
                f"height {self.height_m} m, lowest altitude {self.min_altitude_deg}",
                "numbers, with the latitude from -90 to 90 degrees",
                "correct the site",
            )
        check_horizon(self.horizon)


def zenith_vectors(places: Sequence[Place]) -> Floats:
    """Geodetic zeniths in the frame that turns with the Earth.

    Parameters
    ----------
    places : (s,) Place

    Returns
    -------
    (s, 3) float    unit vectors, x towards longitude 0, z towards the north pole
    """
    latitudes_rad = np.radians([place.latitude_deg for place in places])
    longitudes_rad = np.radians([place.longitude_deg for place in places])
    cos_latitudes = np.cos(latitudes_rad)
    return np.stack(
        [
            cos_latitudes * np.cos(longitudes_rad),
            cos_latitudes * np.sin(longitudes_rad),
            np.sin(latitudes_rad),
        ],
        axis=-1,
    )


def positions_km(places: Sequence[Place]) -> Floats:
    """Positions from the centre of the Earth, in the frame that turns with it.

    Parameters
    ----------
    places : (s,) Place

    Returns
    -------
    (s, 3) float    km

    Source: WGS84 ellipsoid (a = 6378.137 km, 1/f = 298.257223563).
    """
    zeniths = zenith_vectors(places)
    heights_km = np.array([place.height_m for place in places]) / 1000.0
    eccentricity_squared = _FLATTENING * (2.0 - _FLATTENING)
    normals_km = _EARTH_RADIUS_KM / np.sqrt(1.0 - eccentricity_squared * zeniths[:, 2] ** 2)
    scales_km = np.stack(
        [
            normals_km + heights_km,
            normals_km + heights_km,
            normals_km * (1.0 - eccentricity_squared) + heights_km,
        ],
        axis=-1,
    )
    return zeniths * scales_km
