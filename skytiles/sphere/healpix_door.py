"""The one door to HEALPix: everything outside `sphere` asks here.

NESTED numbering and ICRS throughout. The arithmetic is our own (`healpix_nested`), so that this
door costs no import of healpy; healpy is the oracle of its tests.
"""

import numpy as np
from numpy.typing import ArrayLike, NDArray

from skytiles.sphere import healpix_nested as nested
from skytiles.sphere.angles import unit_vectors
from skytiles.sphere.cap_pixels import pixels_inside
from skytiles.sphere.cap_set import CapSet
from skytiles.sphere.solid_angle import SKY_DEG2

Ints = NDArray[np.int64]
Floats = NDArray[np.float64]

MAX_ORDER = nested.MAX_ORDER


def n_pixels(order: int) -> int:
    """Number of pixels on the whole sky.

    Parameters
    ----------
    order : int    0..29

    Returns
    -------
    int    12 x 4^order

    Source: Gorski et al. 2005, ApJ 622, 759, section 4.
    """
    return 12 << 2 * order


def pixel_area_deg2(order: int) -> float:
    """Area of one pixel.

    Parameters
    ----------
    order : int    0..29

    Returns
    -------
    float    square degrees

    Source: Gorski et al. 2005, ApJ 622, 759: all pixels are equal.
    """
    return float(SKY_DEG2 / n_pixels(order))


def pixel_side_deg(order: int) -> float:
    """Side of a square of the area of one pixel.

    Parameters
    ----------
    order : int    0..29

    Returns
    -------
    float    degrees

    Source: Gorski et al. 2005, ApJ 622, 759, Table 1 (resolution).
    """
    return float(np.sqrt(pixel_area_deg2(order)))


def pixel_vectors(order: int, pixels: ArrayLike) -> Floats:
    """Unit vectors of pixel centres.

    Parameters
    ----------
    order : int    0..29
    pixels : (n,) int    NESTED

    Returns
    -------
    (n, 3) float    no unit

    Source: Gorski et al. 2005, ApJ 622, 759, eq. 4 to 9.
    """
    zs, cosines, longitudes = _directions(order, pixels)
    return np.stack([cosines * np.cos(longitudes), cosines * np.sin(longitudes), zs], axis=-1)


def pixel_centres(order: int, pixels: ArrayLike) -> tuple[Floats, Floats]:
    """Right ascensions and declinations of pixel centres.

    Parameters
    ----------
    order : int    0..29
    pixels : (n,) int    NESTED

    Returns
    -------
    (n,) float, (n,) float    degrees

    Source: Gorski et al. 2005, ApJ 622, 759, eq. 4 to 9.
    """
    zs, cosines, longitudes = _directions(order, pixels)
    return np.rad2deg(longitudes), np.rad2deg(np.arctan2(zs, cosines))


def _directions(order: int, pixels: ArrayLike) -> nested.Directions:
    numbers = np.asarray(pixels, dtype=np.int64)
    return nested.directions_of_faces(order, nested.face_from_nest(order, numbers))


def pixels_at(order: int, ras_deg: ArrayLike, decs_deg: ArrayLike) -> Ints:
    """Pixels that hold the positions.

    Parameters
    ----------
    order : int    0..29
    ras_deg, decs_deg : (n,) float or scalars    degrees

    Returns
    -------
    (n,) int    NESTED

    Source: Gorski et al. 2005, ApJ 622, 759, section 5.2.
    """
    ras_rad, decs_rad = np.broadcast_arrays(np.deg2rad(ras_deg), np.deg2rad(decs_deg))
    directions = nested.Directions(np.sin(decs_rad), np.cos(decs_rad), ras_rad)
    faces = nested.faces_of_directions(order, directions)
    return np.asarray(nested.nest_from_face(order, faces))


def ring_to_nest(order: int, pixels: ArrayLike) -> Ints:
    """NESTED numbers of RING numbers.

    Parameters
    ----------
    order : int    0..29
    pixels : (n,) int    RING

    Returns
    -------
    (n,) int    NESTED

    Source: Gorski et al. 2005, ApJ 622, 759, section 4.
    """
    places = nested.ring_places(order, np.asarray(pixels, dtype=np.int64))
    return np.asarray(nested.nest_from_face(order, nested.face_from_ring(order, places)))


def nest_to_ring(order: int, pixels: ArrayLike) -> Ints:
    """RING numbers of NESTED numbers.

    Parameters
    ----------
    order : int    0..29
    pixels : (n,) int    NESTED

    Returns
    -------
    (n,) int    RING

    Source: Gorski et al. 2005, ApJ 622, 759, section 4.
    """
    faces = nested.face_from_nest(order, np.asarray(pixels, dtype=np.int64))
    return np.asarray(nested.ring_numbers(order, nested.ring_from_face(order, faces)))


def pixels_in_disc(order: int, *, ra_deg: float, dec_deg: float, radius_deg: float) -> Ints:
    """Pixels whose centre is inside a circle on the sky.

    Parameters
    ----------
    order : int    0..29
    ra_deg, dec_deg, radius_deg : float    degrees

    Returns
    -------
    (n,) int    NESTED, ascending

    Source: definition.
    """
    circle = CapSet.of_circles(unit_vectors([ra_deg], [dec_deg]), np.deg2rad([radius_deg]))
    return np.sort(pixels_inside(circle, order).pixels)


def warm() -> None:
    """Touch what the first request would otherwise wait for.

    Source: our own.
    """
    pixels_in_disc(8, ra_deg=0.0, dec_deg=0.0, radius_deg=1.0)
