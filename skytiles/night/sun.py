"""Where the Sun is."""

from __future__ import annotations

import numpy as np
import numpy.typing as npt

from skytiles.night.of_date import equatorial_of_date, icrs_from_of_date
from skytiles.sphere.angles import ras_decs_deg
from skytiles.sphere.nutation import ARCSEC_RAD
from skytiles.sphere.time_scales import centuries_since_j2000, tt_mjds

Floats = npt.NDArray[np.float64]

AU_KM = 149597870.7
# Aberration at the mean distance of the Sun.
_ABERRATION_RAD = 20.4898 * ARCSEC_RAD

# Heliocentric longitude of the Earth, mean equinox of date: amplitude (1e-8 rad), phase (rad),
# rate (rad per Julian millennium); one table for each power of the time.
_LONGITUDE = (
    np.array(
        [
            (175347046, 0.0, 0.0), (3341656, 4.6692568, 6283.0758500),
            (34894, 4.62610, 12566.15170), (3497, 2.7441, 5753.3849), (3418, 2.8289, 3.5231),
            (3136, 3.6277, 77713.7715), (2676, 4.4181, 7860.4194), (2343, 6.1352, 3930.2097),
            (1324, 0.7425, 11506.7698), (1273, 2.0371, 529.6910), (1199, 1.1096, 1577.3435),
            (990, 5.233, 5884.927), (902, 2.045, 26.298), (857, 3.508, 398.149),
            (780, 1.179, 5223.694), (753, 2.533, 5507.553), (505, 4.583, 18849.228),
            (492, 4.205, 775.523), (357, 2.920, 0.067), (317, 5.849, 11790.629),
            (284, 1.899, 796.298), (271, 0.315, 10977.079), (243, 0.345, 5486.778),
            (206, 4.806, 2544.314), (205, 1.869, 5573.143), (202, 2.458, 6069.777),
            (156, 0.833, 213.299), (132, 3.411, 2942.463), (126, 1.083, 20.775),
            (115, 0.645, 0.980), (103, 0.636, 4694.003), (102, 0.976, 15720.839),
            (102, 4.267, 7.114),
        ]
    ),
    np.array(
        [
            (628331966747, 0.0, 0.0), (206059, 2.678235, 6283.075850),
            (4303, 2.6351, 12566.1517), (425, 1.590, 3.523), (119, 5.796, 26.298),
            (109, 2.966, 1577.344),
        ]
    ),
    np.array([(52919, 0.0, 0.0), (8720, 1.0721, 6283.0758), (309, 0.867, 12566.152)]),
)  # fmt: skip
_LATITUDE = (np.array([(280, 3.199, 84334.662), (102, 5.422, 5507.553), (80, 3.88, 5223.69)]),)
_DISTANCE = (
    np.array(
        [
            (100013989, 0.0, 0.0), (1670700, 3.0984635, 6283.0758500),
            (13956, 3.05525, 12566.15170), (3084, 5.1985, 77713.7715), (1628, 1.1739, 5753.3849),
            (1576, 2.8469, 7860.4194), (925, 5.453, 11506.770), (542, 4.564, 3930.210),
        ]
    ),
    np.array([(103019, 1.107490, 6283.075850), (1721, 1.0644, 12566.1517)]),
)  # fmt: skip


def sun_radec_deg(mjds: Floats) -> tuple[Floats, Floats]:
    """Apparent direction of the Sun from the centre of the Earth, on ICRS axes.

    Parameters
    ----------
    mjds : (t,) float    MJD, UTC

    Returns
    -------
    (t,) float, (t,) float    right ascension 0..360 and declination, degrees; light time and
        aberration included; error below 2 arcsec, 1980-2060

    Source: Bretagnon & Francou 1988, A&A 202, 309 (VSOP87D), its largest terms as in Meeus 1998,
    Astronomical Algorithms, appendix III.
    """
    mjds_tt = np.atleast_1d(tt_mjds(mjds))
    return ras_decs_deg(icrs_from_of_date(sun_vectors_of_date(mjds_tt), mjds_tt))


def sun_vectors_of_date(mjds_tt: Floats) -> Floats:
    """Apparent direction of the Sun on the true equator of date.

    Parameters
    ----------
    mjds_tt : (t,) float    MJD, TT

    Returns
    -------
    (t, 3) float    unit vectors

    Source: as sun_radec_deg.
    """
    t = centuries_since_j2000(mjds_tt)
    longitudes_rad = np.radians(sun_longitudes_deg(t)) - _ABERRATION_RAD / sun_distances_au(t)
    return equatorial_of_date(longitudes_rad, -_series(_LATITUDE, t), t)


def sun_longitudes_deg(centuries_tt: Floats) -> Floats:
    """Geometric longitude of the Sun, mean equinox of date.

    Parameters
    ----------
    centuries_tt : (t,) float    Julian centuries from J2000.0, TT

    Returns
    -------
    (t,) float    degrees, 0..360

    Source: as sun_radec_deg.
    """
    return np.mod(np.degrees(_series(_LONGITUDE, centuries_tt)) + 180.0, 360.0)


def sun_distances_au(centuries_tt: Floats) -> Floats:
    """Distance of the Sun.

    Parameters
    ----------
    centuries_tt : (t,) float    Julian centuries from J2000.0, TT

    Returns
    -------
    (t,) float    astronomical units; error below 1e-4

    Source: as sun_radec_deg.
    """
    return _series(_DISTANCE, centuries_tt)


def _series(tables: tuple[Floats, ...], centuries_tt: Floats) -> Floats:
    millennia = np.asarray(centuries_tt, dtype=float) / 10.0
    total = np.zeros_like(millennia)
    for power, table in enumerate(tables):
        phases_rad = table[:, 1] + np.multiply.outer(millennia, table[:, 2])
        total = total + (np.cos(phases_rad) @ table[:, 0]) * millennia**power
    return np.asarray(total * 1e-8)
