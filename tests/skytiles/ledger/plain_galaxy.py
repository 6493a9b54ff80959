"""Sources of the Galaxy drawn one by one, from the published density and dust alone.

Imports nothing of skytiles. Density and dust: Adams, Kochanek, Beacom, Vagins & Stanek 2013, ApJ
778, 164, section 2 (in part from memory). Extinction ratios: Cardelli, Clayton & Mathis 1989,
table 3 with R_V = 3.1; clear: eq. 3 at 0.60 micrometres, by the package `extinction` 0.4.9.
"""

import math

import numpy as np

RATIOS = {"U": 1.569, "B": 1.337, "V": 1.0, "R": 0.751, "I": 0.479, "K": 0.114, "clear": 0.9067}
R_D, H, SUN_R, SUN_Z, EDGE = 2.9, 0.095, 8.7, 0.024, 15.0
DUST_R, DUST_H, A_CENTRE = 2.9, 0.110, 30.0
FLOOR, CLOUDS = 0.01, 0.07
# North pole and zero of longitude of the Galaxy, ICRS: ESA 1997 (Hipparcos), vol. 1, 1.5.11.
POLE_RA, POLE_DEC, ASCENDING_L = math.radians(192.85948), math.radians(27.12825), 32.93192


def galactic_deg(ra_deg, dec_deg):
    ra, dec = math.radians(ra_deg), math.radians(dec_deg)
    sin_b = math.sin(dec) * math.sin(POLE_DEC)
    sin_b += math.cos(dec) * math.cos(POLE_DEC) * math.cos(ra - POLE_RA)
    y = math.sin(dec) * math.cos(POLE_DEC)
    y -= math.cos(dec) * math.sin(POLE_DEC) * math.cos(ra - POLE_RA)
    x = math.cos(dec) * math.sin(ra - POLE_RA)
    return math.degrees(math.atan2(y, x)) + ASCENDING_L, math.degrees(math.asin(sin_b))


def along(ra_deg, dec_deg, distances_kpc):
    """Density of stars, and of dust in magnitudes per kpc, along one direction."""
    l_rad, b_rad = (math.radians(angle) for angle in galactic_deg(ra_deg, dec_deg))
    x = SUN_R - distances_kpc * math.cos(b_rad) * math.cos(l_rad)
    y = distances_kpc * math.cos(b_rad) * math.sin(l_rad)
    z = np.abs(SUN_Z + distances_kpc * math.sin(b_rad))
    radii = np.sqrt(x**2 + y**2)
    stars = np.where(radii < EDGE, np.exp(-radii / R_D - z / H), 0.0)
    way = np.linspace(0.0, 1.0, 100_001)
    to_centre = np.exp(-(SUN_R / DUST_R + SUN_Z / DUST_H) * way)
    scale = A_CENTRE / (np.trapezoid(to_centre, way) * SUN_R)
    return stars, scale * np.exp(-radii / DUST_R - z / DUST_H)


def draw_sources(rng, ra_deg, dec_deg, n):
    """Distances (kpc) and A_V (mag) of n sources that are in one direction."""
    distances = np.linspace(0.0, 24.0, 48_001)
    stars, dust = along(ra_deg, dec_deg, distances)
    step = distances[1]
    extinctions = np.concatenate([[0.0], np.cumsum(0.5 * (dust[1:] + dust[:-1])) * step])
    weights = stars * distances**2
    volume = 4 * math.pi * R_D**2 * H * (1 - (1 + EDGE / R_D) * math.exp(-EDGE / R_D))
    disc = (1 - FLOOR - CLOUDS) * 4 * math.pi * weights.sum() * step / volume
    reached = np.cumsum(weights) / weights.sum()
    drawn = np.interp(rng.random(n), reached, distances)
    is_floor = rng.random(n) < FLOOR / (FLOOR + disc)
    drawn[is_floor] = draw_disc_distances(rng, int(is_floor.sum()))
    return drawn, np.interp(drawn, distances, extinctions)


def draw_disc_distances(rng, n):
    """Distances of n sources anywhere in the disc."""
    radii = np.empty(0)
    while len(radii) < n:
        more = rng.gamma(2.0, R_D, size=2 * n + 10)
        radii = np.concatenate([radii, more[more < EDGE]])
    angles = rng.uniform(0, 2 * math.pi, n)
    heights = rng.laplace(0.0, H, n) - SUN_Z
    x = radii[:n] * np.cos(angles) - SUN_R
    return np.sqrt(x**2 + (radii[:n] * np.sin(angles)) ** 2 + heights**2)
