"""How faint an observation goes, and what its reported limit means."""

from skytiles.depth.air_extinction import extinction_mag, rayleigh_mag
from skytiles.depth.bands import BANDS, Band, band_named, nearest_band
from skytiles.depth.camera import (
    CameraOptics,
    camera_limit_mag,
    magnitude_error_mag,
    saturation_mag,
    signal_to_noise,
)
from skytiles.depth.depth_error import DepthError
from skytiles.depth.detection_chance import five_sigma_efficiency
from skytiles.depth.estimate import LimitEstimate, estimate_limit
from skytiles.depth.forecast import forecast_limit_mag
from skytiles.depth.gear import Gear
from skytiles.depth.limit_kinds import (
    LIMIT_KINDS,
    default_s_mag,
    effective_limit_mag,
    limit_from_star_mag,
    m50_mag,
)
from skytiles.depth.luminance import bortle_class, luminances_cd_m2
from skytiles.depth.sky_brightness import sky_brightness_mag
from skytiles.depth.sky_over_place import sky_over_place_mag
from skytiles.depth.visual import visual_limit_mag

__all__ = [
    "BANDS",
    "LIMIT_KINDS",
    "Band",
    "CameraOptics",
    "DepthError",
    "Gear",
    "LimitEstimate",
    "band_named",
    "bortle_class",
    "camera_limit_mag",
    "default_s_mag",
    "effective_limit_mag",
    "estimate_limit",
    "extinction_mag",
    "five_sigma_efficiency",
    "forecast_limit_mag",
    "limit_from_star_mag",
    "luminances_cd_m2",
    "m50_mag",
    "magnitude_error_mag",
    "nearest_band",
    "rayleigh_mag",
    "saturation_mag",
    "signal_to_noise",
    "sky_brightness_mag",
    "sky_over_place_mag",
    "visual_limit_mag",
]
