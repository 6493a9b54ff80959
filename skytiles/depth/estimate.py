"""The limit of a frame of which only the exposure is known, and how sure that is."""

from __future__ import annotations

import math
from dataclasses import dataclass, replace

import numpy as np

from skytiles.depth.camera import saturation_mag
from skytiles.depth.depth_error import DepthError
from skytiles.depth.forecast import USUAL_SEEING_ARCSEC, band_of, forecast_limit_mag
from skytiles.depth.gear import Gear, camera_optics
from skytiles.depth.sky_over_place import sky_over_place_mag
from skytiles.night.altitude import altitudes_deg, sun_altitudes_deg
from skytiles.night.place import Place

# How far each thing that we do not know may be off (1 sigma): assumptions, but for the Moon
# (Krisciunas & Schaefer 1991: 8 to 23 %) and for people (0.5, Schaefer 1990).
_THROUGHPUT_FACTOR = 1.5
_SEEING_FACTOR = 1.3
DARK_SKY_ERROR_MAG = 0.3
_TWILIGHT_MAG = 0.8
_HAZE_MAG = 0.1
_PERSON_MAG = 0.5
_OPTICS_MAG = 0.7
_DARK_SUN_DEG = -18.0


@dataclass(frozen=True)
class LimitEstimate:
    """Limit with its 1 sigma error, the sky it was computed with, and what was assumed."""

    limit_mag: float
    uncertainty_mag: float
    sky_mag: float
    altitude_deg: float
    saturation_mag: float | None
    assumptions: tuple[str, ...]


def estimate_limit(
    gear: Gear,
    *,
    place: Place,
    zenith_mag: float,
    seeing_arcsec: float = USUAL_SEEING_ARCSEC,
    ra_deg: float,
    dec_deg: float,
    mid_mjd: float,
    duration_s: float,
) -> LimitEstimate:
    """Estimate of a frame's limit from the gear, the exposure and the sky then.

    Parameters
    ----------
    gear : Gear              its exposure_s tells how the duration was divided
    place : Place
    zenith_mag : float       dark zenith of the site, V magnitudes per square arcsecond
    seeing_arcsec : float    usual at the site
    ra_deg, dec_deg : float  middle of the field, ICRS, degrees
    mid_mjd : float          middle of the exposure, MJD, UTC
    duration_s : float       exposure in all, seconds

    Returns
    -------
    LimitEstimate    5 sigma for a camera, faintest star seen for eyes; an estimate, to be counted
        as one

    Raises
    ------
    DepthError    when the field was below the horizon, or for a duration that is not above 0

    Formula: sigma^2 = sum over unknowns of (limit with it changed by 1 sigma - limit)^2.

    Source: forecast_limit_mag; sizes of the errors are assumptions, stated in the result.
    """
    altitude_deg = float(altitudes_deg([place], [ra_deg], [dec_deg], [mid_mjd])[0, 0, 0])
    if not duration_s > 0.0 or not altitude_deg > 0.0:
        raise DepthError(
            f"{duration_s} s at an altitude of {altitude_deg:.0f} degrees",
            "an exposure above 0 s of a field above the horizon",
            "check position, time (UTC) and exposure",
        )
    taken = _divided(gear, duration_s)
    sky_mag = sky_over_place_mag(
        place,
        zenith_mag,
        ras_deg=np.array([ra_deg]),
        decs_deg=np.array([dec_deg]),
        mjds=np.array([mid_mjd]),
        altitudes_deg=np.array([[altitude_deg]]),
        band=band_of(gear),
    )[0, 0]
    asked = _Asked(taken, float(sky_mag), altitude_deg, seeing_arcsec, place.height_m)
    sky_error_mag = _sky_error_mag(place, mid_mjd)
    return LimitEstimate(
        limit_mag=asked.limit_mag(),
        uncertainty_mag=_uncertainty_mag(asked, sky_error_mag),
        sky_mag=asked.sky_mag,
        altitude_deg=altitude_deg,
        saturation_mag=_saturation_mag(asked),
        assumptions=_assumptions(asked, sky_error_mag),
    )


@dataclass(frozen=True)
class _Asked:
    gear: Gear
    sky_mag: float
    altitude_deg: float
    seeing_arcsec: float
    height_m: float

    def limit_mag(self) -> float:
        return float(
            forecast_limit_mag(
                self.gear,
                sky_mag=self.sky_mag,
                altitudes_deg=np.array([self.altitude_deg]),
                seeing_arcsec=self.seeing_arcsec,
                height_m=self.height_m,
            )[0]
        )


def _divided(gear: Gear, duration_s: float) -> Gear:
    """As many exposures as the duration holds; one when it is shorter than the usual one."""
    n_exposures = max(1, round(duration_s / gear.exposure_s))
    return replace(gear, n_exposures=n_exposures, exposure_s=duration_s / n_exposures)


def _sky_error_mag(place: Place, mid_mjd: float) -> float:
    sun_deg = float(sun_altitudes_deg([place], [mid_mjd])[0, 0])
    return _TWILIGHT_MAG if sun_deg > _DARK_SUN_DEG else DARK_SKY_ERROR_MAG


def _uncertainty_mag(asked: _Asked, sky_error_mag: float) -> float:
    usual_mag = asked.limit_mag()
    changed = [replace(asked, sky_mag=asked.sky_mag - sky_error_mag)]
    own = [_HAZE_MAG]
    if asked.gear.kind == "camera":
        dimmer = replace(asked.gear, throughput=asked.gear.throughput / _THROUGHPUT_FACTOR)
        changed.append(replace(asked, gear=dimmer))
        changed.append(replace(asked, seeing_arcsec=asked.seeing_arcsec * _SEEING_FACTOR))
    else:
        own += [_PERSON_MAG] if asked.gear.kind == "eye" else [_PERSON_MAG, _OPTICS_MAG]
    return math.hypot(*own, *(one.limit_mag() - usual_mag for one in changed))


def _saturation_mag(asked: _Asked) -> float | None:
    if asked.gear.kind != "camera":
        return None
    found = saturation_mag(
        camera_optics(asked.gear, height_m=asked.height_m),
        exposure_s=asked.gear.exposure_s,
        seeing_arcsec=asked.seeing_arcsec,
        full_well_e=asked.gear.full_well_e,
        sky_mag=asked.sky_mag,
    )
    return found if math.isfinite(found) else None


def _assumptions(asked: _Asked, sky_error_mag: float) -> tuple[str, ...]:
    gear = asked.gear
    sky = f"sky of {asked.sky_mag:.1f} mag per square arcsec there then, good to {sky_error_mag:g}"
    if gear.kind != "camera":
        return (sky, "a rested, dark-adapted eye")
    return (
        f"{gear.n_exposures} exposures of {gear.exposure_s:g} s through {gear.band}",
        f"{gear.throughput:.0%} of the light counted, within a factor {_THROUGHPUT_FACTOR:g}",
        f"seeing of {asked.seeing_arcsec:g} arcsec, within a factor {_SEEING_FACTOR:g}",
        sky,
        "clear sky",
    )
