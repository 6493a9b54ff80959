"""How faint a camera sees."""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from skytiles.depth.air_extinction import extinction_mag
from skytiles.depth.bands import band_named
from skytiles.depth.depth_error import DepthError

Floats = npt.NDArray[np.float64]

_FWHM_PER_SIGMA = 2.0 * math.sqrt(2.0 * math.log(2.0))
# Seeing grows with the airmass to this power (Kolmogorov turbulence).
_SEEING_POWER = 0.6
_POGSON_MAG = 2.5 / math.log(10.0)


@dataclass(frozen=True)
class CameraOptics:
    """What decides how many electrons a star and the sky leave in a pixel.

    `height_m` is the height of the site, for the extinction of the air.
    """

    aperture_mm: float
    pixel_arcsec: float
    obstruction: float = 0.0
    throughput: float = 0.4
    read_noise_e: float = 5.0
    band: str = "clear"
    dark_e_per_s: float = 0.0
    height_m: float = 0.0

    def __post_init__(self) -> None:
        sizes = (self.aperture_mm, self.pixel_arcsec, self.throughput)
        is_sound = all(math.isfinite(size) and size > 0.0 for size in sizes)
        noises = (self.read_noise_e, self.dark_e_per_s)
        is_quiet = all(math.isfinite(noise) and noise >= 0.0 for noise in noises)
        if not is_sound or not 0.0 <= self.obstruction < 1.0 or not is_quiet:
            raise DepthError(
                f"aperture {self.aperture_mm} mm, pixel {self.pixel_arcsec} arcsec, "
                f"obstruction {self.obstruction}, throughput {self.throughput}, "
                f"read noise {self.read_noise_e}, dark current {self.dark_e_per_s}",
                "sizes and throughput above 0, noise and dark current 0 or more, "
                "obstruction (share of the diameter) from 0 to 1",
                "correct the instrument",
            )

    @property
    def electrons_per_s(self) -> float:
        """Electrons per second from magnitude 0 above the air."""
        free_share = 1.0 - self.obstruction**2
        area_m2 = math.pi / 4.0 * (self.aperture_mm / 1000.0) ** 2 * free_share
        return band_named(self.band).zero_photons_per_s_m2 * area_m2 * self.throughput


def signal_to_noise(
    star_e: Floats, *, n_pixels: Floats, sky_e: Floats, read_noise_e: float, dark_e: float = 0.0
) -> Floats:
    """Signal-to-noise ratio of a star in one exposure.

    Parameters
    ----------
    star_e : (n,) float       electrons of the star
    n_pixels : (n,) float     pixels that it is summed over
    sky_e : (n,) float        electrons of the sky in each pixel
    read_noise_e : float      electrons in each pixel
    dark_e : float            electrons of dark current in each pixel

    Returns
    -------
    (n,) float

    Formula: S/N = star / sqrt(star + n (sky + dark + read^2)), all in electrons.

    Source: Merline & Howell 1995, Experimental Astronomy 6, 163 (the CCD equation).
    """
    return np.asarray(star_e / np.sqrt(star_e + n_pixels * (sky_e + dark_e + read_noise_e**2)))


def camera_limit_mag(
    optics: CameraOptics,
    *,
    exposure_s: float,
    n_exposures: int,
    sky_mag: Floats | float,
    airmass: Floats | float,
    seeing_arcsec: float,
    snr: float = 5.0,
) -> Floats:
    """Magnitude of the star that reaches a signal-to-noise ratio in a stack of exposures.

    Parameters
    ----------
    optics : CameraOptics
    exposure_s : float            of one exposure, seconds
    n_exposures : int             in the stack
    sky_mag : (n,) float          sky in this band, magnitudes per square arcsecond
    airmass : (n,) float          of the line of sight
    seeing_arcsec : float         full width at half maximum at the zenith
    snr : float                   signal-to-noise ratio asked for

    Returns
    -------
    (n,) float    magnitudes above the air, -inf below the horizon

    Raises
    ------
    DepthError    when time, number or seeing is not above 0

    Formula: S^2 = snr^2 (S + n (sky + dark + read^2)), S and the sums over the stack;
    m = -2.5 log10(S / (t zero)) - k X; n = 4 pi (seeing^2 X^1.2 / 5.545 + pixel^2 / 12) / pixel^2.

    Source: the CCD equation solved for the star; pixels by the noise-equivalent area of a
    Gaussian image, 4 pi sigma^2 (King 1983, PASP 95, 163); seeing with airmass^0.6.
    """
    _check_exposure(exposure_s, n_exposures, seeing_arcsec)
    masses = np.asarray(airmass, dtype=float)
    is_up = np.isfinite(masses)
    reached = np.where(is_up, masses, 1.0)
    sky_e = _sky_electrons(optics, np.asarray(sky_mag, dtype=float), exposure_s)
    per_exposure = sky_e + optics.dark_e_per_s * exposure_s + optics.read_noise_e**2
    noise = n_exposures * _noise_pixels(optics, seeing_arcsec, reached) * per_exposure
    # Solves star^2 = snr^2 (star + noise), star and noise summed over the stack.
    star_e = (snr**2 + snr * np.sqrt(snr**2 + 4.0 * noise)) / 2.0
    rate = star_e / (n_exposures * exposure_s * optics.electrons_per_s)
    limits = -2.5 * np.log10(rate) - _extinction_mag(optics) * reached
    return np.where(is_up, limits, -np.inf)


def saturation_mag(
    optics: CameraOptics,
    *,
    exposure_s: float,
    seeing_arcsec: float,
    full_well_e: float = 50000.0,
    sky_mag: float | None = None,
) -> float:
    """Magnitude of the star that fills its brightest pixel in one exposure at the zenith.

    Parameters
    ----------
    optics : CameraOptics
    exposure_s : float        seconds
    seeing_arcsec : float     full width at half maximum
    full_well_e : float       electrons that a pixel holds; the default is an assumption
    sky_mag : float or None   sky in this band, magnitudes per square arcsecond; None: left out

    Returns
    -------
    float    magnitudes; brighter stars are saturated. inf where the sky alone fills the pixel.
        Extinction is left out, so that fainter ones never saturate

    Raises
    ------
    DepthError    when time or seeing is not above 0

    Formula: m = -2.5 log10((well - sky - dark) / (t zero share)), share = erf(pixel / 2 / sigma /
    sqrt 2)^2 of a Gaussian image on the middle pixel.

    Source: share of a Gaussian image that falls on a pixel centred on it.
    """
    _check_exposure(exposure_s, 1, seeing_arcsec)
    half_pixel_sigmas = optics.pixel_arcsec / 2.0 / (seeing_arcsec / _FWHM_PER_SIGMA)
    share = math.erf(half_pixel_sigmas / math.sqrt(2.0)) ** 2
    left_e = full_well_e - optics.dark_e_per_s * exposure_s
    if sky_mag is not None:
        left_e -= float(_sky_electrons(optics, np.asarray(sky_mag, dtype=float), exposure_s))
    if left_e <= 0.0:
        return math.inf
    return -2.5 * math.log10(left_e / (optics.electrons_per_s * exposure_s * share))


def magnitude_error_mag(signal_to_noise: Floats | float) -> Floats:
    """Error of a magnitude measured at a signal-to-noise ratio.

    Parameters
    ----------
    signal_to_noise : (n,) float    above 0; good for ratios above 5

    Returns
    -------
    (n,) float    magnitudes, 1 sigma

    Formula: sigma = 2.5 / ln 10 / snr = 1.0857 / snr.

    Source: Howell, Handbook of CCD Astronomy, section 4.4 (from memory); first order.
    """
    return np.asarray(_POGSON_MAG / np.asarray(signal_to_noise, dtype=float))


def _extinction_mag(optics: CameraOptics) -> float:
    return extinction_mag(optics.band, height_m=optics.height_m)


def _sky_electrons(optics: CameraOptics, sky_mag: Floats, exposure_s: float) -> Floats:
    per_arcsec2 = optics.electrons_per_s * 10.0 ** (-0.4 * sky_mag)
    return np.asarray(per_arcsec2 * optics.pixel_arcsec**2 * exposure_s)


def _noise_pixels(optics: CameraOptics, seeing_arcsec: float, airmasses: Floats) -> Floats:
    sigmas_arcsec = seeing_arcsec * airmasses**_SEEING_POWER / _FWHM_PER_SIGMA
    # A pixel blurs like a box of its own width: a star is never sharper than one pixel.
    variances = sigmas_arcsec**2 + optics.pixel_arcsec**2 / 12.0
    return np.asarray(4.0 * np.pi * variances / optics.pixel_arcsec**2)


def _check_exposure(exposure_s: float, n_exposures: int, seeing_arcsec: float) -> None:
    if not (exposure_s > 0.0 and n_exposures >= 1 and seeing_arcsec > 0.0):
        raise DepthError(
            f"{n_exposures} exposures of {exposure_s} s at seeing {seeing_arcsec} arcsec",
            "at least one exposure, time and seeing above 0",
            "correct the exposure or the site's seeing",
        )
