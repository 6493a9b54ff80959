"""How deep an instrument will go, from its owner's description and the sky."""

from __future__ import annotations

import numpy as np
import numpy.typing as npt

from skytiles.depth.camera import camera_limit_mag
from skytiles.depth.gear import Gear, camera_optics
from skytiles.depth.visual import visual_limit_mag
from skytiles.night.airmass import airmass

Floats = npt.NDArray[np.float64]

# Where nothing is known of the site: an assumption.
USUAL_SEEING_ARCSEC = 3.0


def forecast_limit_mag(
    gear: Gear,
    *,
    sky_mag: Floats | float,
    altitudes_deg: Floats,
    seeing_arcsec: float = USUAL_SEEING_ARCSEC,
    height_m: float = 0.0,
) -> Floats:
    """Expected limit of one series.

    Parameters
    ----------
    gear : Gear
    sky_mag : (n,) float          sky in the band of band_of, magnitudes per square arcsecond
    altitudes_deg : (n,) float    degrees
    seeing_arcsec : float         at the zenith
    height_m : float              of the site, metres

    Returns
    -------
    (n,) float    magnitudes: 5 sigma for a camera, faintest star for eyes; -inf below the horizon

    Raises
    ------
    DepthError    for gear that makes no sense

    Source: camera_limit_mag and visual_limit_mag; airmass after Kasten & Young 1989.
    """
    masses = airmass(np.asarray(altitudes_deg, dtype=float))
    if gear.kind != "camera":
        return visual_limit_mag(
            gear.kind,
            gear.aperture_mm,
            sky_mag,
            masses,
            magnification=gear.magnification,
            obstruction=gear.obstruction,
            height_m=height_m,
        )
    return camera_limit_mag(
        camera_optics(gear, height_m=height_m),
        exposure_s=gear.exposure_s,
        n_exposures=gear.n_exposures,
        sky_mag=sky_mag,
        airmass=masses,
        seeing_arcsec=seeing_arcsec,
    )


def band_of(gear: Gear) -> str:
    """The band in which a piece of gear sees.

    Parameters
    ----------
    gear : Gear

    Returns
    -------
    str    one of BANDS: that of a camera, V for eyes

    Source: definition.
    """
    return gear.band if gear.kind == "camera" else "V"
