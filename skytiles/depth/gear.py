"""An instrument as its owner describes it."""

from __future__ import annotations

from dataclasses import dataclass

from skytiles.depth.camera import CameraOptics

# Where the owner gave no pixel size: an assumption.
USUAL_PIXEL_ARCSEC = 2.0


@dataclass(frozen=True)
class Gear:
    """What decides the depth of one series; `obstruction` is a share of the diameter.

    `magnification` belongs to eyepieces and binoculars; None: the usual one of the kind.
    """

    kind: str
    aperture_mm: float
    pixel_arcsec: float | None = None
    obstruction: float = 0.0
    throughput: float = 0.4
    read_noise_e: float = 5.0
    band: str = "clear"
    exposure_s: float = 60.0
    n_exposures: int = 4
    dark_e_per_s: float = 0.0
    full_well_e: float = 50000.0
    magnification: float | None = None


def camera_optics(gear: Gear, *, height_m: float = 0.0) -> CameraOptics:
    """The optics of a camera, with a usual pixel where the owner gave none.

    Parameters
    ----------
    gear : Gear         of kind "camera"
    height_m : float    of the site, metres

    Returns
    -------
    CameraOptics

    Raises
    ------
    DepthError    for sizes that make no sense
    """
    return CameraOptics(
        aperture_mm=gear.aperture_mm,
        pixel_arcsec=gear.pixel_arcsec or USUAL_PIXEL_ARCSEC,
        obstruction=gear.obstruction,
        throughput=gear.throughput,
        read_noise_e=gear.read_noise_e,
        band=gear.band,
        dark_e_per_s=gear.dark_e_per_s,
        height_m=height_m,
    )
