"""What a magnitude is worth in each band."""

from __future__ import annotations

from dataclasses import dataclass

from skytiles.depth.depth_error import DepthError

# Photons per second, square metre and unit of relative band width for one jansky.
PHOTONS_PER_JY = 1.51e7


@dataclass(frozen=True)
class Band:
    """A filter: flux of magnitude 0, width, and what air and night sky do in it."""

    wavelength_um: float
    zero_flux_jy: float
    relative_width: float
    # Loss per airmass at a site near sea level, magnitudes.
    extinction_mag: float
    # Dark sky in this band less dark sky in V, magnitudes.
    sky_colour_mag: float

    @property
    def zero_photons_per_s_m2(self) -> float:
        """Photons per second and square metre from magnitude 0 above the air."""
        return self.zero_flux_jy * PHOTONS_PER_JY * self.relative_width


# Fluxes and widths: Bessell 1979, PASP 91, 589 (U to I); Campins et al. 1985 and Schneider et al.
# 1983 (the rest), as tabulated in the notes of J. Huchra's course Ay145; widths of the rest and of
# G and clear from memory. Extinctions: usual values of low sites, an assumption. Sky colours:
# Benn & Ellison 1998 for U to I, the rest assumed, from memory.
BANDS = {
    "U": Band(0.36, 1810.0, 0.15, 0.55, 0.1),
    "B": Band(0.44, 4260.0, 0.22, 0.30, 0.8),
    "V": Band(0.55, 3640.0, 0.16, 0.20, 0.0),
    "R": Band(0.64, 3080.0, 0.23, 0.14, -0.9),
    "I": Band(0.79, 2550.0, 0.19, 0.09, -1.9),
    "J": Band(1.26, 1600.0, 0.16, 0.08, -6.0),
    "H": Band(1.60, 1080.0, 0.23, 0.06, -8.0),
    "K": Band(2.22, 670.0, 0.23, 0.08, -9.0),
    "g": Band(0.52, 3730.0, 0.14, 0.23, 0.3),
    "r": Band(0.67, 4490.0, 0.14, 0.13, -0.7),
    "i": Band(0.79, 4760.0, 0.16, 0.09, -1.5),
    "z": Band(0.91, 4810.0, 0.13, 0.07, -2.6),
    "G": Band(0.62, 3229.0, 0.60, 0.16, -0.6),
    "clear": Band(0.60, 3300.0, 0.60, 0.17, -0.6),
}


def band_named(name: str) -> Band:
    """Facts of a band.

    Parameters
    ----------
    name : str    one of BANDS

    Returns
    -------
    Band

    Raises
    ------
    DepthError    for an unknown name

    Source: see BANDS.
    """
    if name not in BANDS:
        raise DepthError(
            f"band {name!r}", ", ".join(BANDS), 'choose the nearest of these, or "clear"'
        )
    return BANDS[name]
