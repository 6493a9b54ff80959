"""From UTC to the time that the Earth turns by (UT1) and the time that planets move by (TT)."""

from __future__ import annotations

import numpy as np
import numpy.typing as npt

Floats = npt.NDArray[np.float64]

DAY_S = 86400.0
MJD_J2000 = 51544.5
JULIAN_CENTURY_D = 36525.0

# TAI - UTC from each MJD on, seconds. Source: IERS Bulletin C (to the announcement that no
# second is added at the end of 2026).
_LEAP_SECONDS = np.array(
    [
        (41317, 10), (41499, 11), (41683, 12), (42048, 13), (42413, 14), (42778, 15),
        (43144, 16), (43509, 17), (43874, 18), (44239, 19), (44786, 20), (45151, 21),
        (45516, 22), (46247, 23), (47161, 24), (47892, 25), (48257, 26), (48804, 27),
        (49169, 28), (49534, 29), (50083, 30), (50630, 31), (51179, 32), (53736, 33),
        (54832, 34), (56109, 35), (57204, 36), (57754, 37),
    ],
    dtype=float,
)  # fmt: skip
_TT_MINUS_TAI_S = 32.184

# UT1 - UTC every 91 days from 2017-01-01, seconds; the last five are predictions. Between them
# the seasons move it by up to 0.04 s. Source: IERS Bulletins A and B, finals2000A of 2026-11.
_UT1_FIRST_MJD = 57754.0
_UT1_STEP_D = 91.0
_UT1_MINUS_UTC_S = np.array(
    [
        0.5913, 0.4689, 0.3590, 0.3152, 0.2172, 0.1340, 0.0707, 0.0492, -0.0341, -0.1183,
        -0.1744, -0.1525, -0.1763, -0.2244, -0.2410, -0.1750, -0.1782, -0.1715, -0.1712, -0.1085,
        -0.1077, -0.0993, -0.0762, -0.0050, -0.0173, -0.0254, -0.0381, 0.0127, 0.0083, -0.0109,
        -0.0090, 0.0568, 0.0475, 0.0421, 0.0352, 0.0902, 0.0768, 0.0557, 0.0117, -0.0100,
        -0.1107, -0.1954, -0.2459, -0.1929, -0.2081,
    ]
)  # fmt: skip


def tt_mjds(mjds: Floats) -> Floats:
    """Terrestrial time of moments given in UTC.

    Parameters
    ----------
    mjds : (t,) float    MJD, UTC; before 1972 the offset of 1972 is used

    Returns
    -------
    (t,) float    MJD, TT

    Source: TT = TAI + 32.184 s; TAI - UTC from IERS Bulletin C.
    """
    mjds = np.asarray(mjds, dtype=float)
    steps = np.searchsorted(_LEAP_SECONDS[:, 0], mjds, side="right") - 1
    offsets_s = _LEAP_SECONDS[np.maximum(steps, 0), 1] + _TT_MINUS_TAI_S
    return np.asarray(mjds + offsets_s / DAY_S, dtype=float)


def ut1_mjds(mjds: Floats) -> Floats:
    """The Earth's own time of moments given in UTC, without asking a network.

    Parameters
    ----------
    mjds : (t,) float    MJD, UTC

    Returns
    -------
    (t,) float    MJD, UT1; error below 0.05 s (0.8 arcsec of altitude) where the table was
        measured, about 0.2 s where it was predicted. Later the last prediction is held, earlier
        UT1 is taken as UTC: below 0.9 s (13.5 arcsec) by the definition of UTC.

    Source: IERS Bulletins A and B.
    """
    mjds = np.asarray(mjds, dtype=float)
    nodes = _UT1_FIRST_MJD + _UT1_STEP_D * np.arange(len(_UT1_MINUS_UTC_S))
    offsets_s = np.interp(mjds, nodes, _UT1_MINUS_UTC_S, left=0.0)
    return np.asarray(mjds + offsets_s / DAY_S, dtype=float)


def centuries_since_j2000(mjds: Floats) -> Floats:
    """Julian centuries from J2000.0, in the time scale that is given.

    Parameters
    ----------
    mjds : (t,) float    MJD

    Returns
    -------
    (t,) float    Julian centuries of 36,525 days
    """
    return np.asarray((np.asarray(mjds, dtype=float) - MJD_J2000) / JULIAN_CENTURY_D)
