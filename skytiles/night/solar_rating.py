"""What the solar rule must know of an instrument."""

from __future__ import annotations

import math
from dataclasses import dataclass

LEAST_AVOIDANCE_DEG = 20.0


@dataclass(frozen=True)
class SolarRating:
    """What the rule must know of an instrument. Nothing is assumed in its favour."""

    kind: str
    is_daytime_rated: bool = False
    is_eye_free: bool = False
    sun_avoidance_deg: float = 45.0
    # From the middle of the field to its corner.
    field_radius_deg: float = 0.0

    @property
    def may_work_by_day(self) -> bool:
        """Only a camera that its owner declares both daytime-rated and eye-free."""
        return self.kind == "camera" and self.is_daytime_rated and self.is_eye_free

    @property
    def avoidance_deg(self) -> float:
        """The owner's angle, never below 20 degrees; a broken number keeps the whole sky away."""
        if not math.isfinite(self.sun_avoidance_deg):
            return 180.0
        return max(LEAST_AVOIDANCE_DEG, self.sun_avoidance_deg)
