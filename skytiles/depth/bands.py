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
    # Loss per airmass in the gases of the air (ozone, water), magnitudes.
    gases_mag: float
    # Brightness in this band less brightness in V of the dark sky and of the Moon, magnitudes.
    sky_colour_mag: float
    moon_colour_mag: float

    @property
    def zero_photons_per_s_m2(self) -> float:
        """Photons per second and square metre from magnitude 0 above the air."""
        return self.zero_flux_jy * PHOTONS_PER_JY * self.relative_width


# Fluxes and widths: Bessell 1979, PASP 91, 589 (U to I); Campins et al. 1985 and Schneider et al.
# 1983 (the rest), as tabulated in the notes of J. Huchra's course Ay145; widths of the rest and of
# G and clear from memory. Gases: an assumption. Sky colours: Benn & Ellison 1998 for U to I, the
# rest assumed, from memory. Colours of the Moon: Allen 1973 for U and B, the rest those of a
# reddened Sun, from memory.
BANDS = {
    "U": Band(0.36, 1810.0, 0.15, 0.01, 0.1, 1.4),
    "B": Band(0.44, 4260.0, 0.22, 0.0, 0.8, 0.9),
    "V": Band(0.55, 3640.0, 0.16, 0.03, 0.0, 0.0),
    "R": Band(0.64, 3080.0, 0.23, 0.04, -0.9, -0.5),
    "I": Band(0.79, 2550.0, 0.19, 0.01, -1.9, -1.0),
    "J": Band(1.26, 1600.0, 0.16, 0.06, -6.0, -1.5),
    "H": Band(1.6, 1080.0, 0.23, 0.04, -8.0, -1.9),
    "K": Band(2.22, 670.0, 0.23, 0.06, -9.0, -2.0),
    "g": Band(0.52, 3730.0, 0.14, 0.02, 0.3, 0.3),
    "r": Band(0.67, 4490.0, 0.14, 0.03, -0.7, -0.5),
    "i": Band(0.79, 4760.0, 0.16, 0.01, -1.5, -0.8),
    "z": Band(0.91, 4810.0, 0.13, 0.03, -2.6, -1.1),
    "G": Band(0.62, 3229.0, 0.6, 0.03, -0.6, -0.4),
    "clear": Band(0.6, 3300.0, 0.6, 0.03, -0.6, -0.4),
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


# What people write for filters, in small letters without spaces, by the band that serves best.
_WRITTEN = {
    "luminance": "clear",
    "lum": "clear",
    "l": "clear",
    "none": "clear",
    "unfiltered": "clear",
    "c": "clear",
    "cv": "clear",
    "cr": "clear",
    "red": "R",
    "rc": "R",
    "tr": "R",
    "green": "V",
    "tg": "V",
    "blue": "B",
    "tb": "B",
    "ic": "I",
    "visual": "V",
    "vis": "V",
}


def nearest_band(name: str) -> str:
    """The band of BANDS that serves best for a filter as somebody wrote it.

    Parameters
    ----------
    name : str    such as "V", "g'", "sdss r", "Luminance"

    Returns
    -------
    str    one of BANDS; "clear" for what is not known

    Source: common practice.
    """
    plain = name.strip().rstrip("'").removesuffix("-band").strip()
    if plain in BANDS:
        return plain
    word = plain.lower().replace(" ", "")
    for system in ("johnson", "cousins", "bessell", "sdss", "sloan", "gaia"):
        if word.startswith(system):
            letter = plain[-1:]
            return letter if letter in BANDS else "clear"
    return _WRITTEN.get(word, "clear")
