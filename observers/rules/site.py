"""What a site may say of itself."""

import math
from collections.abc import Iterator, Sequence
from typing import Protocol

from observers.rules.numbers import number_problems
from observers.rules.problem import Problem

# Enough for a tree every degree.
MOST_HORIZON_POINTS = 360
# A tenth of a degree is some ten kilometres: enough to plan with, too coarse to find a home.
PUBLIC_STEP_DEG = 0.1


class SiteValues(Protocol):
    """What is judged: a row, or the values of a form."""

    name: str
    latitude_deg: float
    longitude_deg: float
    height_m: float
    sky_brightness_mag: float
    seeing_arcsec: float
    min_altitude_deg: float
    horizon_mask: Sequence[Sequence[float]]
    clear_chance: float


_RANGES = {
    "latitude_deg": (-90.0, 90.0, "a latitude from -90 to 90 degrees, north positive"),
    "longitude_deg": (-180.0, 180.0, "a longitude from -180 to 180 degrees, east positive"),
    "height_m": (-450.0, 9000.0, "a height from -450 to 9000 metres"),
    "sky_brightness_mag": (14.0, 22.5, "a sky brightness from 14 to 22.5 mag per square arcsec"),
    "seeing_arcsec": (0.2, 20.0, "a seeing from 0.2 to 20 arcsec"),
    "min_altitude_deg": (0.0, 89.0, "a lowest altitude from 0 to 89 degrees"),
    "clear_chance": (0.0, 1.0, "a chance of clear sky from 0 to 1"),
}


def site_problems(site: SiteValues) -> list[Problem]:
    """Judge one site."""
    return [
        *_name_problems(site.name),
        *number_problems(site, _RANGES),
        *_horizon_problems(site.horizon_mask),
    ]


def public_place_deg(latitude_deg: float, longitude_deg: float) -> tuple[float, float]:
    """A place as everybody may see it: rounded to 0.1 degree."""
    return (round(latitude_deg, 1) + 0.0, round(longitude_deg, 1) + 0.0)


def _horizon_problems(points: Sequence[Sequence[float]]) -> Iterator[Problem]:
    """One sentence: the points are many, and the first one tells what is wrong with all."""
    azimuths = [point[0] % 360.0 for point in points if math.isfinite(point[0])]
    is_sound = all(
        0.0 <= azimuth <= 360.0 and -10.0 <= altitude <= 90.0 for azimuth, altitude in points
    )
    if not is_sound:
        yield Problem(
            "horizon_mask",
            "Each point of the skyline is an azimuth from 0 to 360 degrees (north 0, east 90) and "
            "an altitude from -10 to 90 degrees.",
        )
    elif len(set(azimuths)) < len(points):
        yield Problem("horizon_mask", "The skyline has two points at the same azimuth.")
    elif len(points) > MOST_HORIZON_POINTS:
        yield Problem("horizon_mask", f"A skyline has at most {MOST_HORIZON_POINTS} points.")


def _name_problems(name: str) -> Iterator[Problem]:
    if not name.strip():
        yield Problem("name", "A site needs a name.")
    elif len(name) > 80:
        yield Problem("name", "The name of a site has at most 80 letters.")
