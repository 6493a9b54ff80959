"""Precession and nutation: from ICRS axes to the true equator and equinox of date."""

from __future__ import annotations

import numpy as np
import numpy.typing as npt

from skytiles.sphere.time_scales import centuries_since_j2000

Floats = npt.NDArray[np.float64]

ARCSEC_RAD = np.pi / 648000.0

# Largest terms of the IAU 2000B series: multiples of l, l', F, D, Omega; longitude (sine) and
# obliquity (cosine), arcsec. What is left out adds up to less than 0.01 arcsec.
_TERMS = np.array(
    [
        (0, 0, 0, 0, 1, -17.2064161, 9.2052331),
        (0, 0, 2, -2, 2, -1.3170906, 0.5730336),
        (0, 0, 2, 0, 2, -0.2276413, 0.0978459),
        (0, 0, 0, 0, 2, 0.2074554, -0.0897492),
        (0, 1, 0, 0, 0, 0.1475877, 0.0073871),
        (0, 1, 2, -2, 2, -0.0516821, 0.0224386),
        (1, 0, 0, 0, 0, 0.0711159, -0.0006750),
        (0, 0, 2, 0, 1, -0.0387298, 0.0200728),
        (1, 0, 2, 0, 2, -0.0301461, 0.0129025),
        (0, -1, 2, -2, 2, 0.0215829, -0.0095929),
        (0, 0, 2, -2, 1, 0.0128227, -0.0068982),
        (-1, 0, 2, 0, 2, 0.0123457, -0.0053311),
        (-1, 0, 0, 2, 0, 0.0156994, -0.0001235),
        (1, 0, 0, 0, 1, 0.0063110, -0.0033228),
        (-1, 0, 0, 0, 1, -0.0057976, 0.0031429),
        (-1, 0, 2, 2, 2, -0.0059641, 0.0025543),
        (1, 0, 2, 0, 1, -0.0051613, 0.0026366),
        (-2, 0, 2, 0, 1, 0.0045893, -0.0024236),
        (0, 0, 0, 2, 0, 0.0063384, -0.0001220),
        (0, 0, 2, 2, 2, -0.0038571, 0.0016452),
    ]
)


def fundamental_arguments_rad(centuries_tt: Floats) -> Floats:
    """The five angles of Moon and Sun that nutation depends on.

    Parameters
    ----------
    centuries_tt : (t,) float    Julian centuries from J2000.0, TT

    Returns
    -------
    (t, 5) float    l, l', F, D and Omega, radians

    Source: Simon et al. 1994, A&A 282, 663, linear and quadratic parts.
    """
    t = np.asarray(centuries_tt, dtype=float)
    arcsecs = [
        485868.249036 + (1717915923.2178 + 31.8792 * t) * t,
        1287104.79305 + (129596581.0481 - 0.5532 * t) * t,
        335779.526232 + (1739527262.8478 - 12.7512 * t) * t,
        1072260.70369 + (1602961601.2090 - 6.3706 * t) * t,
        450160.398036 + (-6962890.5431 + 7.4722 * t) * t,
    ]
    return np.stack(arcsecs, axis=-1) * ARCSEC_RAD


def nutation_rad(centuries_tt: Floats) -> tuple[Floats, Floats]:
    """Nutation in longitude and in obliquity.

    Parameters
    ----------
    centuries_tt : (t,) float    Julian centuries from J2000.0, TT

    Returns
    -------
    (t,) float, (t,) float    radians; error below 0.02 arcsec

    Source: IAU 2000B (McCarthy & Luzum 2003, CeMDA 85, 37), its 20 largest terms.
    """
    phases_rad = fundamental_arguments_rad(centuries_tt) @ _TERMS[:, :5].T
    longitudes = np.sin(phases_rad) @ _TERMS[:, 5]
    obliquities = np.cos(phases_rad) @ _TERMS[:, 6]
    return longitudes * ARCSEC_RAD, obliquities * ARCSEC_RAD


def mean_obliquity_rad(centuries_tt: Floats) -> Floats:
    """Angle between the mean equator and the ecliptic of date.

    Parameters
    ----------
    centuries_tt : (t,) float    Julian centuries from J2000.0, TT

    Returns
    -------
    (t,) float    radians

    Source: Capitaine, Wallace & Chapront 2003, A&A 412, 567 (IAU 2006).
    """
    t = np.asarray(centuries_tt, dtype=float)
    arcsecs = 84381.406 + (-46.836769 + (-0.0001831 + 0.00200340 * t) * t) * t
    return np.asarray(arcsecs * ARCSEC_RAD)


def equator_of_date_matrices(mjds_tt: Floats) -> Floats:
    """Rotations from ICRS axes to the true equator and equinox of date.

    Parameters
    ----------
    mjds_tt : (t,) float    MJD, TT; a single number gives a single matrix

    Returns
    -------
    (t, 3, 3) float    multiply column vectors from the left; error below 0.05 arcsec, 1980-2060

    Source: Capitaine, Wallace & Chapront 2003, A&A 412, 567, the four Fukushima-Williams angles
    (frame bias included); nutation as in nutation_rad.
    """
    t = centuries_since_j2000(mjds_tt)
    gamma = -0.052928 + (10.556378 + (0.4932044 - 0.00031238 * t) * t) * t
    phi = 84381.412819 + (-46.811016 + (0.0511268 + 0.00053289 * t) * t) * t
    psi = -0.041775 + (5038.481484 + (1.5584175 - 0.00018522 * t) * t) * t
    longitudes_rad, obliquities_rad = nutation_rad(t)
    mean_equator = _turns_about_x(phi * ARCSEC_RAD) @ _turns_about_z(gamma * ARCSEC_RAD)
    ecliptic = _turns_about_z(-psi * ARCSEC_RAD - longitudes_rad) @ mean_equator
    return _turns_about_x(-mean_obliquity_rad(t) - obliquities_rad) @ ecliptic


def _turns_about_x(angles_rad: Floats) -> Floats:
    cosines, sines = np.cos(angles_rad), np.sin(angles_rad)
    turns = np.zeros((*np.shape(angles_rad), 3, 3))
    turns[..., 0, 0] = 1.0
    turns[..., 1, 1] = turns[..., 2, 2] = cosines
    turns[..., 1, 2], turns[..., 2, 1] = sines, -sines
    return turns


def _turns_about_z(angles_rad: Floats) -> Floats:
    cosines, sines = np.cos(angles_rad), np.sin(angles_rad)
    turns = np.zeros((*np.shape(angles_rad), 3, 3))
    turns[..., 2, 2] = 1.0
    turns[..., 0, 0] = turns[..., 1, 1] = cosines
    turns[..., 0, 1], turns[..., 1, 0] = sines, -sines
    return turns
