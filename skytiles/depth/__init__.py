"""How faint an observation goes, and what its reported limit means."""

from skytiles.depth.bands import BANDS, Band, band_named
from skytiles.depth.camera import (
    CameraOptics,
    camera_limit_mag,
    saturation_mag,
    signal_to_noise,
)
from skytiles.depth.depth_error import DepthError
from skytiles.depth.forecast import forecast_limit_mag
from skytiles.depth.gear import Gear
from skytiles.depth.limit_kinds import (
    LIMIT_KINDS,
    default_s_mag,
    effective_limit_mag,
    limit_from_star_mag,
    m50_mag,
)
from skytiles.depth.sky_brightness import sky_brightness_mag
from skytiles.depth.visual import visual_limit_mag

__all__ = [
    "BANDS",
    "LIMIT_KINDS",
    "Band",
    "CameraOptics",
    "DepthError",
    "Gear",
    "band_named",
    "camera_limit_mag",
    "default_s_mag",
    "effective_limit_mag",
    "forecast_limit_mag",
    "limit_from_star_mag",
    "m50_mag",
    "saturation_mag",
    "signal_to_noise",
    "sky_brightness_mag",
    "visual_limit_mag",
]
