"""The night of a place: what is up, how dark it is, and when light would hurt."""

from skytiles.night.airmass import airmass, refraction_deg, sky_airmass
from skytiles.night.altitude import (
    altitude_azimuth_deg,
    altitudes_deg,
    moon_altitudes_deg,
    sun_altitudes_deg,
    zenith_radec_deg,
)
from skytiles.night.horizon_mask import skyline_altitudes_deg
from skytiles.night.moon import (
    moon_illuminated_fraction,
    moon_phase_angles_deg,
    moon_radec_deg,
)
from skytiles.night.mount_limits import NO_LIMITS, MountLimits
from skytiles.night.night_error import NightError
from skytiles.night.place import Place
from skytiles.night.reach import reach_mask, reach_problems, reach_windows
from skytiles.night.solar_rating import SolarRating
from skytiles.night.solar_safety import solar_problems
from skytiles.night.sun import sun_radec_deg
from skytiles.night.sun_rule import sun_limit_deg
from skytiles.night.twilight import TWILIGHTS, dark_intervals
from skytiles.night.windows import observable_mask, safe_intervals, tile_windows

__all__ = [
    "NO_LIMITS",
    "TWILIGHTS",
    "MountLimits",
    "NightError",
    "Place",
    "SolarRating",
    "airmass",
    "altitude_azimuth_deg",
    "altitudes_deg",
    "dark_intervals",
    "moon_altitudes_deg",
    "moon_illuminated_fraction",
    "moon_phase_angles_deg",
    "moon_radec_deg",
    "observable_mask",
    "reach_mask",
    "reach_problems",
    "reach_windows",
    "refraction_deg",
    "safe_intervals",
    "sky_airmass",
    "skyline_altitudes_deg",
    "solar_problems",
    "sun_altitudes_deg",
    "sun_limit_deg",
    "sun_radec_deg",
    "tile_windows",
    "zenith_radec_deg",
]
