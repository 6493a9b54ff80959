"""How faint people see: with the eye alone, through binoculars, at an eyepiece."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from skytiles.depth.air_extinction import extinction_mag
from skytiles.depth.depth_error import DepthError
from skytiles.depth.sky_brightness import nanolamberts

Floats = npt.NDArray[np.float64]

EYE_PUPIL_MM = 7.0


@dataclass(frozen=True)
class VisualOptics:
    """What stands before the eye: width of the beam that leaves it and light that it passes."""

    exit_pupil_mm: float
    transmission: float


# Usual gear, an assumption: 5 mm for hand-held binoculars, 2 mm for the power at which people
# search at a telescope.
VISUAL_OPTICS = {
    "eye": VisualOptics(EYE_PUPIL_MM, 1.0),
    "binoculars": VisualOptics(5.0, 0.85),
    "eyepiece": VisualOptics(2.0, 0.75),
}


def eye_threshold_mag(sky_mag: Floats | float) -> Floats:
    """Faintest star that the dark-adapted eye sees against a background.

    Parameters
    ----------
    sky_mag : (n,) float    V magnitudes per square arcsecond

    Returns
    -------
    (n,) float    magnitudes; people scatter by 0.5

    Formula: m = -16.57 - 2.5 log10(C (1 + sqrt(K B))^2); by night C = 10^-9.80, K = 10^-1.90; from
    log10 B = 3.17 on C = 10^-8.350, K = 10^-5.90; B in nanolamberts.

    Source: Schaefer 1990, PASP 102, 212, with the constants of Knoll and Hecht (from memory).
    """
    background_nl = nanolamberts(np.asarray(sky_mag, dtype=float))
    is_night = np.log10(background_nl) < 3.17
    constants = np.where(is_night, 10.0**-9.80, 10.0**-8.350)
    steepness = np.where(is_night, 10.0**-1.90, 10.0**-5.90)
    footcandles = constants * (1.0 + np.sqrt(steepness * background_nl)) ** 2
    return np.asarray(-16.57 - 2.5 * np.log10(footcandles))


def naked_eye_limit_mag(sky_mag: Floats | float) -> Floats:
    """Naked-eye limit from sky brightness by the usual short formula.

    Parameters
    ----------
    sky_mag : (n,) float    V magnitudes per square arcsecond

    Returns
    -------
    (n,) float    magnitudes

    Formula: m = 7.93 - 5 log10(10^(4.316 - sky / 5) + 1).

    Source: common practice after Schaefer 1990 (from memory); shown beside eye_threshold_mag.
    """
    mags = np.asarray(sky_mag, dtype=float)
    return np.asarray(7.93 - 5.0 * np.log10(10.0 ** (4.316 - mags / 5.0) + 1.0))


def visual_limit_mag(
    kind: str,
    aperture_mm: float,
    sky_mag: Floats | float,
    airmass: Floats | float,
    *,
    magnification: float | None = None,
    obstruction: float = 0.0,
    height_m: float = 0.0,
) -> Floats:
    """Faintest star that an observer sees with gear of one kind.

    Parameters
    ----------
    kind : str              one of VISUAL_OPTICS
    aperture_mm : float     width of the front lens or mirror; ignored for the eye
    sky_mag : (n,) float    V magnitudes per square arcsecond
    airmass : (n,) float    of the line of sight
    magnification : float or None    None: usual for the kind (exit pupil 5 mm, at a telescope 2)
    obstruction : float     share of the diameter that is blocked
    height_m : float        of the site, for the extinction

    Returns
    -------
    (n,) float    magnitudes, -inf below the horizon; within 1.5 of what observers report

    Raises
    ------
    DepthError    for an unknown kind or an aperture that is not above 0

    Formula: m = threshold(sky - 2.5 log10(T (pupil / 7 mm)^2)) + 2.5 log10(T (D / 7 mm)^2)
    - k (X - 1), T = transmission (1 - obstruction^2), pupil = D / magnification, at most 7 mm;
    light beyond the eye's pupil is lost.

    Source: eye_threshold_mag behind optics that dim the background by the ratio of the pupils and
    gather light by the ratio of the apertures (Schaefer 1990, PASP 102, 212, simplified).
    """
    _check_visual(kind, aperture_mm, magnification, obstruction)
    optics = VISUAL_OPTICS[kind]
    if kind == "eye":
        aperture_mm, magnification, obstruction = EYE_PUPIL_MM, 1.0, 0.0
    exit_pupil_mm = aperture_mm / magnification if magnification else optics.exit_pupil_mm
    # Small apertures cannot fill the usual exit pupil at less than power one.
    entering_mm = min(exit_pupil_mm, aperture_mm, EYE_PUPIL_MM)
    # What leaves the eyepiece beside the eye's pupil does not count.
    used = (entering_mm / min(exit_pupil_mm, aperture_mm)) ** 2
    passed = optics.transmission * (1.0 - obstruction**2)
    dimming = passed * (entering_mm / EYE_PUPIL_MM) ** 2
    gain = passed * used * (aperture_mm / EYE_PUPIL_MM) ** 2
    thresholds = eye_threshold_mag(np.asarray(sky_mag, dtype=float) - 2.5 * np.log10(dimming))
    masses = np.asarray(airmass, dtype=float)
    # The threshold already holds for stars seen through one airmass.
    losses = extinction_mag("V", height_m=height_m) * (masses - 1.0)
    return np.asarray(thresholds + 2.5 * np.log10(gain) - losses)


def _check_visual(
    kind: str, aperture_mm: float, magnification: float | None, obstruction: float
) -> None:
    is_whole = aperture_mm > 0.0 and 0.0 <= obstruction < 1.0
    is_power = magnification is None or magnification >= 1.0
    if kind not in VISUAL_OPTICS or not is_whole or not is_power:
        raise DepthError(
            f"{kind!r} of {aperture_mm} mm, magnification {magnification}, "
            f"obstruction {obstruction}",
            ", ".join(VISUAL_OPTICS) + " with an aperture above 0 mm, a magnification of at least "
            "1, an obstruction from 0 to 1",
            "correct the instrument",
        )
