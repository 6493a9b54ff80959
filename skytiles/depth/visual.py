"""How faint people see: with the eye alone, through binoculars, at an eyepiece."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from skytiles.depth.bands import BANDS
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

    Source: common practice after Schaefer 1990 (from memory); shown beside eye_threshold_mag.
    """
    mags = np.asarray(sky_mag, dtype=float)
    return np.asarray(7.93 - 5.0 * np.log10(10.0 ** (4.316 - mags / 5.0) + 1.0))


def visual_limit_mag(
    kind: str, aperture_mm: float, sky_mag: Floats | float, airmass: Floats | float
) -> Floats:
    """Faintest star that an observer sees with gear of one kind.

    Parameters
    ----------
    kind : str              one of VISUAL_OPTICS
    aperture_mm : float     width of the front lens or mirror; ignored for the eye
    sky_mag : (n,) float    V magnitudes per square arcsecond
    airmass : (n,) float    of the line of sight

    Returns
    -------
    (n,) float    magnitudes, -inf below the horizon; within 1.5 of what observers report

    Raises
    ------
    DepthError    for an unknown kind or an aperture that is not above 0

    Source: eye_threshold_mag behind optics that dim the background by the ratio of the pupils and
    gather light by the ratio of the apertures (Schaefer 1990, PASP 102, 212, simplified).
    """
    _check_visual(kind, aperture_mm)
    optics = VISUAL_OPTICS[kind]
    aperture = EYE_PUPIL_MM if kind == "eye" else aperture_mm
    # Small apertures cannot fill the usual exit pupil at less than power one.
    exit_pupil_mm = min(optics.exit_pupil_mm, aperture, EYE_PUPIL_MM)
    dimming = optics.transmission * (exit_pupil_mm / EYE_PUPIL_MM) ** 2
    gain = optics.transmission * (aperture / EYE_PUPIL_MM) ** 2
    thresholds = eye_threshold_mag(np.asarray(sky_mag, dtype=float) - 2.5 * np.log10(dimming))
    masses = np.asarray(airmass, dtype=float)
    # The threshold already holds for stars seen through one airmass.
    losses = BANDS["V"].extinction_mag * (masses - 1.0)
    return np.asarray(thresholds + 2.5 * np.log10(gain) - losses)


def _check_visual(kind: str, aperture_mm: float) -> None:
    if kind not in VISUAL_OPTICS or not aperture_mm > 0.0:
        raise DepthError(
            f"{kind!r} of {aperture_mm} mm",
            ", ".join(VISUAL_OPTICS) + " with an aperture above 0 mm",
            "correct the instrument",
        )
