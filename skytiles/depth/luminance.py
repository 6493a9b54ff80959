"""Sky brightness in the units of other people: candela, Bortle class."""

from __future__ import annotations

import math

import numpy as np
import numpy.typing as npt

Floats = npt.NDArray[np.float64]

# A convention, not physics: for skies at least this dark (V magnitudes per square arcsecond) the
# class, and the faintest stars that practised people report with the naked eye. Bortle 2001, Sky &
# Telescope; the columns in magnitudes are common practice, 4.5 stands between its neighbours.
BORTLE_CLASSES = (
    (21.7, "1", (7.6, 8.0)),
    (21.5, "2", (7.1, 7.5)),
    (21.3, "3", (6.6, 7.0)),
    (20.8, "4", (6.1, 6.5)),
    (20.1, "4.5", (5.6, 6.5)),
    (19.1, "5", (5.6, 6.0)),
    (18.0, "6-7", (4.6, 5.5)),
    (-math.inf, "8-9", (0.0, 4.5)),
)


def luminances_cd_m2(sky_mags: Floats) -> Floats:
    """Luminance of the sky.

    Parameters
    ----------
    sky_mags : (n,) float    V magnitudes per square arcsecond

    Returns
    -------
    (n,) float    candela per square metre

    Formula: L = 108000 x 10^(-0.4 m).

    Source: common practice (from memory); within 0.5 % of Krisciunas & Schaefer 1991, eq. 1.
    """
    return np.asarray(1.08e5 * 10.0 ** (-0.4 * np.asarray(sky_mags, dtype=float)))


def bortle_class(sky_mag: float) -> tuple[str, tuple[float, float]]:
    """Class of a site by the brightness of its dark zenith.

    Parameters
    ----------
    sky_mag : float    V magnitudes per square arcsecond

    Returns
    -------
    str, (float, float)    "1" (darkest) to "8-9", and the faintest naked-eye stars that go with it

    Source: Bortle 2001, Sky & Telescope, with the usual columns in magnitudes: a convention, good
    to 0.3 magnitudes. The eye threshold of Schaefer 1990 is a magnitude brighter at the dark end.
    """
    return next((name, eyes) for darkest, name, eyes in BORTLE_CLASSES if sky_mag >= darkest)
