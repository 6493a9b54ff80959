"""Rows of observers as values of skytiles; nothing else translates between them."""

import math
from collections.abc import Sequence

from observers.models import Instrument, InstrumentKind, Site
from skytiles.depth.bands import nearest_band
from skytiles.depth.gear import Gear
from skytiles.night.mount_limits import MountLimits
from skytiles.night.place import Place
from skytiles.night.sun_rule import SolarRating
from skytiles.planner.observers_to_plan import (
    PlannerInstrument,
    PlannerObserver,
    RecentPointing,
)
from skytiles.tiling.tile_size import tile_size_deg

# How a frame will probably be examined: by eye on the image, or at the eyepiece. Assumptions.
_EXPECTED = {True: (0.85, 0.2), False: (0.6, 0.4)}


def place_of(site: Site) -> Place:
    """Where the site is, exactly: never for showing."""
    return Place(
        latitude_deg=site.latitude_deg,
        longitude_deg=site.longitude_deg,
        height_m=site.height_m,
        min_altitude_deg=site.min_altitude_deg,
        horizon=tuple((azimuth, altitude) for azimuth, altitude in site.horizon_mask),
    )


def mount_of(instrument: Instrument) -> MountLimits:
    """Where the instrument can point; an empty field limits nothing."""
    given = {
        "min_altitude_deg": instrument.mount_min_altitude_deg,
        "max_altitude_deg": instrument.mount_max_altitude_deg,
        "min_hour_angle_h": instrument.min_hour_angle_h,
        "max_hour_angle_h": instrument.max_hour_angle_h,
        "min_dec_deg": instrument.min_dec_deg,
        "max_dec_deg": instrument.max_dec_deg,
    }
    limits = {name: value for name, value in given.items() if value is not None}
    return MountLimits(crosses_meridian=instrument.crosses_meridian, **limits)


def solar_rating_of(instrument: Instrument) -> SolarRating:
    """What its owner declares about the Sun."""
    return SolarRating(
        kind=instrument.kind,
        is_daytime_rated=instrument.is_daytime_rated,
        is_eye_free=instrument.is_eye_free,
        sun_avoidance_deg=instrument.sun_avoidance_deg,
        field_radius_deg=math.hypot(instrument.width_deg, instrument.height_deg) / 2.0,
    )


def gear_of(instrument: Instrument) -> Gear:
    """What decides the depth of one series."""
    return Gear(
        kind=instrument.kind,
        aperture_mm=instrument.aperture_mm,
        pixel_arcsec=instrument.pixel_arcsec,
        obstruction=instrument.obstruction,
        throughput=instrument.throughput,
        read_noise_e=instrument.read_noise_e,
        band=nearest_band(instrument.band),
        exposure_s=instrument.exposure_s,
        n_exposures=instrument.n_exposures,
        dark_e_per_s=instrument.dark_e_per_s,
        full_well_e=instrument.full_well_e,
        magnification=instrument.magnification,
    )


def tile_size_of(instrument: Instrument) -> tuple[float, float]:
    """Sides of the tile grid that the instrument uses, degrees."""
    width_deg, height_deg = tile_size_deg(
        instrument.width_deg,
        instrument.height_deg,
        shape=instrument.shape,
        rotation_deg=instrument.rotation_deg,
    )
    return float(width_deg), float(height_deg)


def planner_instrument_of(instrument: Instrument, *, n_tiles_left: int) -> PlannerInstrument:
    """The instrument as the planner sees it."""
    tile_width_deg, tile_height_deg = tile_size_of(instrument)
    completeness, s_mag = _EXPECTED[instrument.kind == InstrumentKind.CAMERA]
    return PlannerInstrument(
        key=instrument.pk,
        gear=gear_of(instrument),
        rating=solar_rating_of(instrument),
        overhead_s=instrument.overhead_s,
        slew_deg_per_s=instrument.slew_deg_per_s,
        tile_width_deg=tile_width_deg,
        tile_height_deg=tile_height_deg,
        n_tiles_left=n_tiles_left,
        completeness=completeness,
        s_mag=s_mag,
        mount=mount_of(instrument),
    )


def planner_observer_of(
    site: Site,
    instruments: Sequence[PlannerInstrument],
    *,
    from_mjd: float,
    until_mjd: float,
    met_chance: float,
    clear_chance: float,
    recent: Sequence[RecentPointing],
) -> PlannerObserver:
    """Somebody at one of their sites, as the planner sees them; the key is the site's."""
    return PlannerObserver(
        key=site.pk,
        place=place_of(site),
        instruments=tuple(instruments),
        free_from_mjd=from_mjd,
        free_until_mjd=until_mjd,
        met_chance=met_chance,
        clear_chance=clear_chance,
        sky_brightness_mag=site.sky_brightness_mag,
        seeing_arcsec=site.seeing_arcsec,
        recent=tuple(recent),
    )
