"""Where a mount can point."""

from __future__ import annotations

from dataclasses import dataclass

from skytiles.night.night_error import NightError


@dataclass(frozen=True)
class MountLimits:
    """Ranges that a mount can reach; the defaults limit nothing.

    Hour angles are in hours, 0 on the meridian, negative before it. A mount that cannot cross the
    meridian turns over there: a series lies wholly before or wholly after it.
    """

    min_altitude_deg: float = -90.0
    max_altitude_deg: float = 90.0
    min_hour_angle_h: float = -12.0
    max_hour_angle_h: float = 12.0
    min_dec_deg: float = -90.0
    max_dec_deg: float = 90.0
    crosses_meridian: bool = True

    def __post_init__(self) -> None:
        ranges = (
            (self.min_altitude_deg, self.max_altitude_deg, 90.0),
            (self.min_hour_angle_h, self.max_hour_angle_h, 12.0),
            (self.min_dec_deg, self.max_dec_deg, 90.0),
        )
        if not all(-most <= low < high <= most for low, high, most in ranges):
            raise NightError(
                f"mount limits {ranges}",
                "altitudes and declinations from -90 to 90 degrees, hour angles from -12 to 12 "
                "hours, each lower limit below its upper one",
                "correct the limits of the mount",
            )


NO_LIMITS = MountLimits()
