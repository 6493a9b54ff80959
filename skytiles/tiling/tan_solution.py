"""Plate solutions: gnomonic (TAN) world coordinates of a FITS header."""

import math
import re
from dataclasses import dataclass, field, replace

import numpy as np
from numpy.typing import ArrayLike, NDArray

from skytiles.errors import HeaderError
from skytiles.sphere.angles import ras_decs_deg, unit_vectors
from skytiles.sphere.precession import precession_from_j2000
from skytiles.tiling.footprint import Footprint, outline_footprint
from skytiles.tiling.header_values import Header, number, word

Floats = NDArray[np.float64]

_UNITS_DEG = {"": 1.0, "deg": 1.0, "arcmin": 1 / 60, "arcsec": 1 / 3600, "rad": math.degrees(1)}
# Frames more than this from J2000 are turned to it.
_SAME_EQUINOX_Y = 0.01
_FK5_FROM_Y = 1984.0
# Precession is good between these.
_EARLIEST_EQUINOX_Y, _LATEST_EQUINOX_Y = 1900.0, 2100.0
# Beyond these a solution is damaged: pixels of an image, degrees per pixel.
_MOST_PIXELS, _LARGEST_STEP_DEG = 1e7, 10.0
# A side that bends by more than this gets points along it, at most 16.
_BEND_PX = 0.5
_FINEST_STEPS = 32
_SIP_TERM = re.compile(r"^[AB]_(\d)_(\d)$")


@dataclass(frozen=True, eq=False)
class TanSolution:
    """Pixel to sky: crpix and crval (2,), cd (2, 2) in degrees per pixel, distortion."""

    crpix: Floats
    crval_deg: Floats
    cd_deg: Floats
    lonpole_deg: float = 180.0
    equinox_year: float = 2000.0
    # SIP polynomials: coefficients by powers of the two pixel offsets.
    sip_x: dict[tuple[int, int], float] = field(default_factory=dict)
    sip_y: dict[tuple[int, int], float] = field(default_factory=dict)

    def vectors(self, xs: ArrayLike, ys: ArrayLike) -> Floats:
        """Directions of pixel positions.

        Parameters
        ----------
        xs, ys : (n,) float    FITS pixels: the middle of the first pixel is 1

        Returns
        -------
        (n, 3) float    unit vectors, J2000

        Source: Greisen & Calabretta 2002, A&A 395, 1061; Calabretta & Greisen 2002,
        A&A 395, 1077, section 5.1.3; Shupe et al. 2005, ASP Conf. 347, 491 (SIP).
        """
        dx = np.asarray(xs, dtype=np.float64) - self.crpix[0]
        dy = np.asarray(ys, dtype=np.float64) - self.crpix[1]
        du = dx + _polynomial(self.sip_x, dx, dy)
        dv = dy + _polynomial(self.sip_y, dx, dy)
        plane = np.deg2rad(self.cd_deg @ np.stack([du, dv]))
        seen = self._from_plane(plane[0], plane[1])
        if abs(self.equinox_year - 2000.0) <= _SAME_EQUINOX_Y:
            return seen
        return np.asarray(seen @ precession_from_j2000(self.equinox_year))

    def _from_plane(self, lefts: Floats, ups: Floats) -> Floats:
        """Directions of points on the plane that touches the sphere at crval.

        The up axis stands at the position angle LONPOLE - 180 degrees.
        """
        ra, turn = math.radians(self.crval_deg[0]), math.radians(self.lonpole_deg - 180.0)
        centre = unit_vectors(self.crval_deg[0], self.crval_deg[1])
        east = np.array([-math.sin(ra), math.cos(ra), 0.0])
        north = np.cross(centre, east)
        up = math.cos(turn) * north + math.sin(turn) * east
        left = math.cos(turn) * east - math.sin(turn) * north
        points = centre + np.multiply.outer(lefts, left) + np.multiply.outer(ups, up)
        return np.asarray(points / np.linalg.norm(points, axis=1, keepdims=True))

    def ras_decs_deg(self, xs: ArrayLike, ys: ArrayLike) -> tuple[Floats, Floats]:
        """Right ascensions and declinations of pixel positions, J2000, degrees."""
        return ras_decs_deg(self.vectors(xs, ys))

    def footprint(self, *, width_px: float, height_px: float) -> Footprint:
        """The outline of an image, from the outer corners of its corner pixels.

        Where distortion bends its sides by more than half a pixel, points stand along them.
        """
        ras, decs = self.ras_decs_deg([(width_px + 1) / 2], [(height_px + 1) / 2])
        outline = outline_footprint(self._border(width_px, height_px))
        return replace(outline, centre_ra_deg=float(ras[0]), centre_dec_deg=float(decs[0]))

    def _border(self, width_px: float, height_px: float) -> Floats:
        """Directions along the border, no more than it takes."""
        finest = self.vectors(*_border_px(width_px, height_px, steps=_FINEST_STEPS))
        if not self.sip_x and not self.sip_y:
            return np.asarray(finest[::_FINEST_STEPS])
        pixel_rad = math.radians(math.sqrt(abs(float(np.linalg.det(self.cd_deg)))))
        for steps in (1, 2, 4, 8):
            if _bend_rad(finest, _FINEST_STEPS // steps) <= _BEND_PX * pixel_rad:
                return np.asarray(finest[:: _FINEST_STEPS // steps])
        return np.asarray(finest[::2])


def _border_px(width_px: float, height_px: float, *, steps: int) -> tuple[Floats, Floats]:
    """Pixel positions round an image, from corner to corner in equal steps."""
    xs = np.array([0.5, width_px + 0.5, width_px + 0.5, 0.5])
    ys = np.array([0.5, 0.5, height_px + 0.5, height_px + 0.5])
    shares = np.arange(steps) / steps
    return tuple(
        (ends + np.multiply.outer(shares, np.roll(ends, -1) - ends)).T.ravel() for ends in (xs, ys)
    )


def _bend_rad(border: Floats, stride: int) -> float:
    """How far a closed border strays from great circles through every so-manieth point."""
    starts = border[::stride]
    normals = np.cross(starts, np.roll(starts, -1, axis=0))
    normals /= np.linalg.norm(normals, axis=1, keepdims=True)
    between = border.reshape(len(starts), stride, 3)
    return float(np.abs(np.einsum("sij,sj->si", between, normals)).max())


def _polynomial(terms: dict[tuple[int, int], float], dx: Floats, dy: Floats) -> Floats:
    total: Floats = np.zeros_like(dx)
    for (power_x, power_y), coefficient in terms.items():
        total += coefficient * dx**power_x * dy**power_y
    return total


def has_tan_solution(header: Header) -> bool:
    """Whether a header holds a plate solution at all.

    Parameters
    ----------
    header : dict    keywords in capitals

    Returns
    -------
    bool    True when axes and a reference position are named

    Source: Greisen & Calabretta 2002, A&A 395, 1061.
    """
    has_scale = any(key in header for key in ("CD1_1", "CD1_2", "CDELT1"))
    return bool(word(header, "CTYPE1")) and "CRVAL1" in header and has_scale


def read_tan_solution(header: Header) -> TanSolution:
    """The plate solution of a header.

    Parameters
    ----------
    header : dict    CTYPE, CRVAL, CRPIX with CD, or PC and CDELT, or CDELT and CROTA2

    Returns
    -------
    TanSolution    HeaderError for another projection, other coordinates or no solution

    Source: Greisen & Calabretta 2002, A&A 395, 1061; Calabretta & Greisen 2002, A&A 395, 1077.
    """
    axes = _axes(header)
    crval = np.array([_needed(header, f"CRVAL{axis}") for axis in axes])
    units = np.array([_unit_deg(header, axis) for axis in axes])
    rows = [axis - 1 for axis in axes]
    cd = _cd(header)[rows] * units[:, None]
    _refuse_bad_solution(crval * units, cd)
    return TanSolution(
        crpix=np.array([_bounded(header, f"CRPIX{axis}", most=_MOST_PIXELS) for axis in (1, 2)]),
        crval_deg=crval * units,
        cd_deg=cd,
        lonpole_deg=_lonpole_deg(header, dec_deg=float((crval * units)[1])),
        equinox_year=equinox_of(header),
        sip_x=_sip_terms(header, "A"),
        sip_y=_sip_terms(header, "B"),
    )


def _axes(header: Header) -> tuple[int, int]:
    """Numbers of the axes of right ascension and declination."""
    kinds = [word(header, f"CTYPE{axis}").upper() for axis in (1, 2)]
    names = [kind[:4].rstrip("-") for kind in kinds]
    projections = {kind[4:].lstrip("-") for kind in kinds}
    # TPV adds a distortion that is neglected: it moves corners by a few pixels.
    if projections not in ({"TAN"}, {"TAN-SIP"}, {"TPV"}) or sorted(names) != ["DEC", "RA"]:
        raise HeaderError(
            given=f"world coordinates {kinds[0]!r}, {kinds[1]!r}",
            allowed="RA---TAN and DEC--TAN (a plate solution in the tangent plane)",
            advice="solve the frame with a plate solver, or type position, size and rotation",
        )
    return (1, 2) if names[0] == "RA" else (2, 1)


def _needed(header: Header, keyword: str) -> float:
    value = number(header, keyword)
    if value is None:
        raise HeaderError(
            given=f"a plate solution without {keyword}",
            allowed="CTYPE, CRVAL, CRPIX and CD (or CDELT) for both axes",
            advice="solve the frame again, or type position, size and rotation",
        )
    return value


def _bounded(header: Header, keyword: str, *, most: float) -> float:
    """A number that is needed and must not be absurd."""
    value = _needed(header, keyword)
    if abs(value) > most:
        raise HeaderError(
            given=f"{keyword} = {value:g}",
            allowed=f"at most {most:g}",
            advice="solve the frame again; this solution is damaged",
        )
    return value


def _or(value: float | None, default: float) -> float:
    return default if value is None else value


def _lonpole_deg(header: Header, *, dec_deg: float) -> float:
    """LONPOLE; without it 180, and 0 for a frame exactly on the pole (CG02, section 2.4)."""
    return _or(number(header, "LONPOLE"), 0.0 if dec_deg >= 90.0 else 180.0)


def _unit_deg(header: Header, axis: int) -> float:
    unit = word(header, f"CUNIT{axis}").lower()
    if unit not in _UNITS_DEG and not unit.startswith("deg"):
        raise HeaderError(f"CUNIT{axis} = {unit!r}", "deg", "solve the frame again")
    return _UNITS_DEG.get(unit, 1.0)


def _cd(header: Header) -> Floats:
    """Degrees (or units) per pixel from whichever of the three forms the header has."""
    pairs = [(1, 1), (1, 2), (2, 1), (2, 2)]
    if any(f"CD{i}_{j}" in header for i, j in pairs):
        return np.array([_or(number(header, f"CD{i}_{j}"), 0.0) for i, j in pairs]).reshape(2, 2)
    steps = np.array([_needed(header, "CDELT1"), _needed(header, "CDELT2")])
    # PC001001 is how old programs wrote PC1_1.
    forms = [(f"PC{i}_{j}", f"PC{i:03}{j:03}") for i, j in pairs]
    if any(new in header or old in header for new, old in forms):
        identity = (1.0, 0.0, 0.0, 1.0)
        turns = [_or(number(header, *f), unit) for f, unit in zip(forms, identity, strict=True)]
        return np.asarray(np.reshape(turns, (2, 2)) * steps[:, None])
    turn = math.radians(_or(number(header, "CROTA2"), 0.0))
    rotation = np.array([[math.cos(turn), -math.sin(turn)], [math.sin(turn), math.cos(turn)]])
    return np.asarray(rotation * steps)


def _refuse_bad_solution(crval_deg: Floats, cd_deg: Floats) -> None:
    if not (-360.0 <= crval_deg[0] <= 720.0 and -90.0 <= crval_deg[1] <= 90.0):
        raise HeaderError(
            given=f"a reference position of RA {crval_deg[0]:g}, Dec {crval_deg[1]:g} degrees",
            allowed="right ascension 0 to 360, declination -90 to 90 degrees",
            advice="solve the frame again; this solution is damaged",
        )
    is_small = bool((np.abs(cd_deg) <= _LARGEST_STEP_DEG).all())
    if not is_small or not abs(np.linalg.det(cd_deg)) > 1e-16:
        raise HeaderError(
            given="a plate solution whose pixels have no size, or an absurd one",
            allowed="a CD matrix with an inverse, in degrees per pixel",
            advice="solve the frame again; this solution is damaged",
        )


def equinox_of(header: Header) -> float:
    """Equinox of the coordinates of a header, as a Julian year; 2000 for ICRS.

    Parameters
    ----------
    header : dict    RADESYS, EQUINOX or EPOCH

    Returns
    -------
    float    year; HeaderError for coordinates of B1950 (FK4)

    Source: Calabretta & Greisen 2002, A&A 395, 1077, section 3.1.
    """
    system = word(header, "RADESYS", "RADECSYS").upper()
    if system == "ICRS":
        return 2000.0
    year = _or(number(header, "EQUINOX", "EPOCH"), 2000.0)
    is_old = system.startswith("FK4") or (not system and year < _FK5_FROM_Y)
    if is_old or not _EARLIEST_EQUINOX_Y <= year <= _LATEST_EQUINOX_Y:
        raise HeaderError(
            given=f"coordinates of equinox {year:g} ({system or 'no RADESYS'})",
            allowed="ICRS, or FK5 of a year from 1984 to 2100",
            advice="solve the frame again with a present-day catalogue",
        )
    return year


def _sip_terms(header: Header, letter: str) -> dict[tuple[int, int], float]:
    """Distortion coefficients A_p_q or B_p_q, where the axis types say that they apply."""
    if not word(header, "CTYPE1").upper().endswith("-SIP"):
        return {}
    terms = {}
    for keyword in header:
        match = _SIP_TERM.match(keyword)
        if match is not None and keyword[0] == letter:
            terms[int(match[1]), int(match[2])] = _bounded(header, keyword, most=1.0)
    return terms
