"""Areas on the sphere, in square degrees."""

import numpy as np
from numpy.typing import ArrayLike, NDArray

Floats = NDArray[np.float64]

# 4 pi steradian in square degrees.
SKY_DEG2 = 4.0 * np.pi * np.degrees(1.0) ** 2
STERADIAN_DEG2 = np.degrees(1.0) ** 2


def cap_area_deg2(radii_deg: ArrayLike) -> Floats:
    """Area of spherical caps.

    Parameters
    ----------
    radii_deg : (n,) float or scalar    angular radius, degrees, 0..180

    Returns
    -------
    (n,) float    square degrees

    Source: 2 pi (1 - cos r), written as 4 pi sin^2(r/2) to stay exact for small radii.
    """
    return np.asarray(SKY_DEG2 * np.sin(np.deg2rad(radii_deg) / 2.0) ** 2)


def rectangle_area_deg2(width_deg: ArrayLike, height_deg: ArrayLike) -> Floats:
    """Area of fields bounded by four great circles, from their apex angles.

    Parameters
    ----------
    width_deg, height_deg : (n,) float or scalars    full angles across the middle, 0..180

    Returns
    -------
    (n,) float    square degrees

    Source: solid angle of a pyramid, 4 asin(sin(a/2) sin(b/2)).
    """
    sines = np.sin(np.deg2rad(width_deg) / 2.0) * np.sin(np.deg2rad(height_deg) / 2.0)
    return np.asarray(4.0 * np.arcsin(sines) * STERADIAN_DEG2)


def polygon_area_deg2(corners: ArrayLike) -> float:
    """Area of a convex polygon bounded by great circles.

    Parameters
    ----------
    corners : (v, 3) float    unit vectors in order, either winding

    Returns
    -------
    float    square degrees

    Source: sum of triangles by the formula of van Oosterom & Strackee 1983,
    IEEE Trans. Biomed. Eng. 30, 125 (from memory); exact for small and large triangles.
    """
    c = np.asarray(corners, dtype=np.float64)
    a, b, d = c[0], c[1:-1], c[2:]
    volume = np.cross(b, d) @ a
    rest = 1.0 + b @ a + d @ a + np.einsum("ij,ij->i", b, d)
    return float(abs(np.sum(2.0 * np.arctan2(volume, rest))) * STERADIAN_DEG2)
