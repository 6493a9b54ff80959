"""What an instrument may say of itself."""

from collections.abc import Iterator
from typing import Protocol

from observers.rules.numbers import number_problems
from observers.rules.problem import Problem

KINDS = ("camera", "eyepiece", "binoculars", "eye")
SHAPES = ("rectangle", "circle")
# Light goes into an eye, or through a finder that somebody may look into.
KINDS_WITH_AN_EYE = ("eyepiece", "binoculars", "eye")


class InstrumentValues(Protocol):
    """What is judged: a row, or the values of a form."""

    name: str
    kind: str
    shape: str
    width_deg: float
    height_deg: float
    rotation_deg: float | None
    aperture_mm: float
    focal_length_mm: float | None
    pixel_arcsec: float | None
    obstruction: float
    throughput: float
    read_noise_e: float
    dark_e_per_s: float
    full_well_e: float
    magnification: float | None
    band: str
    exposure_s: float
    n_exposures: int
    overhead_s: float
    slew_deg_per_s: float
    tiles_per_night: int
    mount_min_altitude_deg: float | None
    mount_max_altitude_deg: float | None
    min_hour_angle_h: float | None
    max_hour_angle_h: float | None
    min_dec_deg: float | None
    max_dec_deg: float | None
    crosses_meridian: bool
    is_daytime_rated: bool
    is_eye_free: bool
    sun_avoidance_deg: float


_RANGES = {
    "width_deg": (0.02, 60.0, "a field width from 0.02 to 60 degrees"),
    "height_deg": (0.02, 60.0, "a field height from 0.02 to 60 degrees"),
    "rotation_deg": (-360.0, 360.0, "a rotation from -360 to 360 degrees, east of north"),
    "aperture_mm": (1.0, 42_000.0, "an aperture from 1 to 42000 mm"),
    "focal_length_mm": (1.0, 200_000.0, "a focal length from 1 to 200000 mm"),
    "pixel_arcsec": (0.01, 600.0, "a pixel scale from 0.01 to 600 arcsec"),
    "obstruction": (0.0, 0.9, "a central obstruction from 0 to 0.9 of the diameter"),
    "throughput": (0.01, 1.0, "a throughput from 0.01 to 1"),
    "read_noise_e": (0.0, 200.0, "a read noise from 0 to 200 electrons"),
    "dark_e_per_s": (0.0, 1000.0, "a dark current from 0 to 1000 electrons per second"),
    "full_well_e": (100.0, 1e7, "a full well from 100 to 10000000 electrons"),
    "magnification": (1.0, 2000.0, "a magnification from 1 to 2000"),
    "exposure_s": (0.001, 7200.0, "an exposure from 0.001 to 7200 s"),
    "n_exposures": (1, 10_000, "1 to 10000 exposures"),
    "overhead_s": (0.0, 3600.0, "an overhead from 0 to 3600 s"),
    "slew_deg_per_s": (0.01, 100.0, "a slewing speed from 0.01 to 100 degrees per second"),
    "tiles_per_night": (1, 500, "1 to 500 tiles per night"),
    "mount_min_altitude_deg": (-90.0, 90.0, "an altitude from -90 to 90 degrees"),
    "mount_max_altitude_deg": (-90.0, 90.0, "an altitude from -90 to 90 degrees"),
    "min_hour_angle_h": (-12.0, 12.0, "an hour angle from -12 to 12 hours"),
    "max_hour_angle_h": (-12.0, 12.0, "an hour angle from -12 to 12 hours"),
    "min_dec_deg": (-90.0, 90.0, "a declination from -90 to 90 degrees"),
    "max_dec_deg": (-90.0, 90.0, "a declination from -90 to 90 degrees"),
    "sun_avoidance_deg": (0.0, 180.0, "an angle from the Sun of 0 to 180 degrees"),
}
# Lower and upper limit of the mount, and what stands in for one that is not given.
_LIMITS = (
    ("mount_min_altitude_deg", "mount_max_altitude_deg", 90.0),
    ("min_hour_angle_h", "max_hour_angle_h", 12.0),
    ("min_dec_deg", "max_dec_deg", 90.0),
)


def instrument_problems(instrument: InstrumentValues) -> list[Problem]:
    """Judge one instrument."""
    return [
        *_word_problems(instrument),
        *number_problems(instrument, _RANGES),
        *_field_problems(instrument),
        *_mount_problems(instrument),
        *_solar_problems(instrument),
    ]


def _word_problems(instrument: InstrumentValues) -> Iterator[Problem]:
    if not 0 < len(instrument.name.strip()) <= 80:
        yield Problem("name", "An instrument needs a name of at most 80 letters.")
    if instrument.kind not in KINDS:
        yield Problem("kind", f"The kind is {instrument.kind!r}; give one of {', '.join(KINDS)}.")
    if instrument.shape not in SHAPES:
        yield Problem("shape", f"The shape is {instrument.shape!r}; give rectangle or circle.")
    if not 0 < len(instrument.band) <= 12:
        yield Problem("band", "Name the band in at most 12 letters, such as V, r or clear.")


def _field_problems(instrument: InstrumentValues) -> Iterator[Problem]:
    if instrument.shape == "circle" and instrument.width_deg != instrument.height_deg:
        yield Problem("height_deg", "A circular field has its diameter as width and as height.")


def _mount_problems(instrument: InstrumentValues) -> Iterator[Problem]:
    for low_name, high_name, most in _LIMITS:
        low, high = getattr(instrument, low_name), getattr(instrument, high_name)
        if (-most if low is None else low) >= (most if high is None else high):
            yield Problem(high_name, "The upper limit of the mount lies above its lower limit.")


def _solar_problems(instrument: InstrumentValues) -> Iterator[Problem]:
    if instrument.kind in KINDS_WITH_AN_EYE and instrument.is_eye_free:
        yield Problem("is_eye_free", f"{instrument.kind} means that somebody looks into it.")
    if instrument.is_daytime_rated and instrument.sun_avoidance_deg < 20.0:
        yield Problem(
            "sun_avoidance_deg",
            "An instrument for daytime keeps at least 20 degrees from the Sun.",
        )
