"""How far away the sources of each direction are, and how much dust is before them."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from skytiles.region.galactic_prior import GalacticPrior, cloud_densities
from skytiles.sphere.angles import unit_vectors
from skytiles.sphere.galactic import galactic_vectors

Floats = NDArray[np.float64]
Singles = NDArray[np.float32]

# Shells of equal width in distance modulus, from 40 pc to 70 kpc: 4.7 % of the distance each.
_SHELL_MAG = 0.1
_FIRST_MAG, _LAST_MAG = 3.0, 19.2
_CENTRE_STEPS = 2_000
# Small enough for the cache of the processor.
_CHUNK = 2_048


@dataclass(frozen=True, eq=False)
class Sightlines:
    """Sources and dust along n lines of sight through m shells.

    distance_moduli_mag (m,); shares (n, m): of the direction's sources in each shell, sum 1;
    extinctions_mag (n, m): A_V from here to the middle of each shell.
    """

    distance_moduli_mag: Floats
    shares: Singles
    extinctions_mag: Singles


def shell_moduli_mag() -> Floats:
    """Distance moduli of the middles of all shells.

    Returns
    -------
    (m,) float    magnitudes

    Source: our own.
    """
    n_shells = round((_LAST_MAG - _FIRST_MAG) / _SHELL_MAG)
    return np.asarray(_FIRST_MAG + _SHELL_MAG * (np.arange(n_shells) + 0.5))


def sightlines(prior: GalacticPrior, ras_deg: Floats, decs_deg: Floats) -> Sightlines:
    """Distances and extinctions of the sources of some directions.

    Parameters
    ----------
    prior : GalacticPrior
    ras_deg, decs_deg : (n,) float    degrees

    Returns
    -------
    Sightlines

    Source: Adams et al. 2013, ApJ 778, 164, section 2 (in part from memory): density and dust of
    double exponentials; A_V by line integral. The floor has the distances of the whole disc.
    """
    ras_deg, decs_deg = np.asarray(ras_deg, np.float64), np.asarray(decs_deg, np.float64)
    moduli_mag = shell_moduli_mag()
    directions = galactic_vectors(unit_vectors(ras_deg, decs_deg))
    shares = np.empty((len(ras_deg), len(moduli_mag)), np.float32)
    extinctions_mag = np.empty_like(shares)
    floor = _distances_of_the_disc(prior, moduli_mag)
    for first in range(0, len(ras_deg), _CHUNK):
        rows = slice(first, first + _CHUNK)
        disc, extinctions_mag[rows] = _disc_and_dust(prior, directions[rows], moduli_mag)
        shares[rows] = _all_sources(
            prior, disc, ras_deg[rows], decs_deg[rows], moduli_mag=moduli_mag, floor=floor
        )
    return Sightlines(moduli_mag, shares, extinctions_mag)


def _disc_and_dust(
    prior: GalacticPrior, directions: Floats, moduli_mag: Floats
) -> tuple[Singles, Singles]:
    """Disc sources per share of the sky and shell, and A_V to the middle of each shell."""
    distances_kpc = (10.0 ** (moduli_mag / 5.0 - 2.0)).astype(np.float32)
    x, z = (directions[:, [axis]].astype(np.float32) for axis in (0, 2))
    across = np.maximum(1.0 - z**2, np.float32(0.0))
    radii = (across * distances_kpc - 2.0 * prior.sun_radius_kpc * x) * distances_kpc
    radii += np.float32(prior.sun_radius_kpc**2)
    np.sqrt(np.maximum(radii, np.float32(0.0), out=radii), out=radii)
    heights = np.abs(np.float32(prior.sun_height_kpc) + z * distances_kpc)
    stars = np.exp(-radii / prior.disc_scale_kpc - heights / prior.disc_height_kpc)
    stars[radii > prior.edge_kpc] = 0.0
    log_step = np.log(10.0) / 5.0 * _SHELL_MAG
    stars *= (4.0 * np.pi / prior.disc_integral_kpc3() * log_step) * distances_kpc**3
    dust = np.exp(-radii / prior.dust_scale_kpc - heights / prior.dust_height_kpc)
    steps_mag = dust * (_centre_density_mag_per_kpc(prior) * log_step) * distances_kpc
    # To the middle of a shell: all shells before it and half of it; the first from 0 kpc.
    to_middle = np.cumsum(steps_mag, axis=1) - 0.5 * steps_mag
    to_middle += steps_mag[:, :1] / log_step
    return stars.astype(np.float32), to_middle.astype(np.float32)


def _all_sources(
    prior: GalacticPrior,
    disc: Singles,
    ras_deg: Floats,
    decs_deg: Floats,
    *,
    moduli_mag: Floats,
    floor: Floats,
) -> Singles:
    """Shares of the direction's sources in each shell: disc, floor and clouds."""
    total = np.float32(prior.disc_weight) * disc
    total += (prior.floor * floor).astype(np.float32)
    for cloud in prior.clouds:
        modulus = 5.0 * np.log10(cloud.distance_kpc) + 10.0
        shell = int(np.clip((modulus - _FIRST_MAG) / _SHELL_MAG, 0, len(moduli_mag) - 1))
        total[:, shell] += cloud_densities(cloud, ras_deg, decs_deg).astype(np.float32)
    # Where nothing is left (no floor, off the disc) the distances of the disc stand in.
    sums = total.sum(axis=1, keepdims=True)
    is_empty = sums[:, 0] <= 0.0
    total[is_empty] = floor
    sums[is_empty] = 1.0
    return np.asarray(total / sums)


def _distances_of_the_disc(prior: GalacticPrior, moduli_mag: Floats) -> Floats:
    """(m,) shares of all disc sources in each shell, whatever their direction."""
    lons_rad = np.radians(np.arange(2.5, 360.0, 5.0))
    sines = np.sinh(np.linspace(-8.0, 8.0, 65)) / np.sinh(8.0)
    middles, widths = 0.5 * (sines[1:] + sines[:-1]), np.diff(sines)
    lon, z = (part.ravel() for part in np.meshgrid(lons_rad, middles))
    flat = np.sqrt(1.0 - z * z)
    directions = np.stack([flat * np.cos(lon), flat * np.sin(lon), z], axis=-1)
    disc, _ = _disc_and_dust(prior, directions, moduli_mag)
    shares = np.repeat(widths, len(lons_rad)) @ disc
    return np.asarray(shares / shares.sum())


def _centre_density_mag_per_kpc(prior: GalacticPrior) -> float:
    """Extinction per kiloparsec at the centre that gives the stated one from here to there."""
    length_kpc = float(np.hypot(prior.sun_radius_kpc, prior.sun_height_kpc))
    way = (np.arange(_CENTRE_STEPS) + 0.5) / _CENTRE_STEPS
    logs = prior.sun_radius_kpc * way / prior.dust_scale_kpc
    logs += prior.sun_height_kpc * way / prior.dust_height_kpc
    return prior.centre_extinction_mag / float(np.exp(-logs).mean() * length_kpc)
