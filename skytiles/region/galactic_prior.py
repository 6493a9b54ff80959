"""Where in the sky stars of the Galactic disc end: the prior for a core collapse.

Density exp(-R / Rd - |z| / H) along the line of sight, times r^2, plus the Magellanic Clouds and
a floor over the whole sky, so that no direction is excluded.
"""

from dataclasses import dataclass
from itertools import pairwise

import numpy as np
from numpy.typing import NDArray

from skytiles.sphere.angles import separations_deg, unit_vectors
from skytiles.sphere.galactic import galactic_vectors

Floats = NDArray[np.float64]

# Gaussian quadrature on each smooth piece of a line of sight.
_NODES, _WEIGHTS = np.polynomial.legendre.leggauss(24)
_SCALE_HEIGHTS = 30.0
# Small enough for the processor's cache.
_CHUNK = 1_024


@dataclass(frozen=True)
class Cloud:
    """A small galaxy beside ours, as a round Gaussian on the sky."""

    ra_deg: float
    dec_deg: float
    distance_kpc: float
    weight: float
    # Apparent size: an assumption.
    sigma_deg: float


@dataclass(frozen=True)
class GalacticPrior:
    """Density model of Adams et al. 2013, ApJ 778, 164, section 2 (in part from memory).

    The weights of the clouds and of the floor are assumptions, from memory; all are editable.
    """

    disc_scale_kpc: float = 2.9
    disc_height_kpc: float = 0.095
    sun_radius_kpc: float = 8.7
    sun_height_kpc: float = 0.024
    edge_kpc: float = 15.0
    # Dust: the same double exponential, scaled to the extinction from here to the centre.
    dust_scale_kpc: float = 2.9
    dust_height_kpc: float = 0.110
    centre_extinction_mag: float = 30.0
    clouds: tuple[Cloud, ...] = (
        Cloud(80.9, -69.8, 50.0, weight=0.05, sigma_deg=2.0),
        Cloud(13.2, -72.8, 62.0, weight=0.02, sigma_deg=1.0),
    )
    floor: float = 0.01

    def densities(self, ras_deg: Floats, decs_deg: Floats) -> Floats:
        """Probability per share of the sky: 1 everywhere for a flat prior.

        Parameters
        ----------
        ras_deg, decs_deg : (n,) float    degrees

        Returns
        -------
        (n,) float    no unit; its mean over the sky is 1

        Source: Adams et al. 2013, ApJ 778, 164, section 2.
        """
        disc = self.column_densities_kpc3(ras_deg, decs_deg) / self.disc_integral_kpc3()
        total = self.floor + self.disc_weight * 4.0 * np.pi * disc
        for cloud in self.clouds:
            total = total + cloud_densities(cloud, ras_deg, decs_deg)
        return np.asarray(total)

    @property
    def disc_weight(self) -> float:
        """Share of all sources that are in the disc."""
        return 1.0 - self.floor - sum(cloud.weight for cloud in self.clouds)

    def column_densities_kpc3(self, ras_deg: Floats, decs_deg: Floats) -> Floats:
        """Integral of density x r^2 dr along lines of sight, per steradian.

        Parameters
        ----------
        ras_deg, decs_deg : (n,) float    degrees

        Returns
        -------
        (n,) float    kpc^3 per steradian, for a density of 1 at the Galaxy's centre

        Source: Adams et al. 2013, ApJ 778, 164, section 2.
        """
        directions = galactic_vectors(unit_vectors(ras_deg, decs_deg))
        parts = [
            self._columns(directions[first : first + _CHUNK])
            for first in range(0, len(directions), _CHUNK)
        ]
        return np.concatenate(parts) if parts else np.zeros(0)

    def _columns(self, directions: Floats) -> Floats:
        total = np.zeros(len(directions))
        for first, last in pairwise(self._breaks_kpc(directions)):
            half = 0.5 * (last - first)[:, None]
            distances = first[:, None] + half * (_NODES + 1.0)
            integrand = self.densities_at(directions, distances) * distances**2
            total += (integrand * half) @ _WEIGHTS
        return total

    def _breaks_kpc(self, directions: Floats) -> list[Floats]:
        """Ends of the smooth pieces of lines of sight, in ascending order.

        The density has a kink where a line crosses the plane and where it passes the centre.
        """
        sines = directions[:, 2]
        flattest = np.maximum(np.abs(sines), 1e-9)
        high = self.sun_height_kpc + _SCALE_HEIGHTS * self.disc_height_kpc
        ends = np.minimum(self._edge_distances_kpc(directions), high / flattest)
        crossings = np.where(sines < 0.0, self.sun_height_kpc / flattest, 0.0)
        across = np.maximum(1.0 - sines**2, 1e-12)
        nearest = np.maximum(self.sun_radius_kpc * directions[:, 0] / across, 0.0)
        inner = [np.minimum(crossings, ends), np.minimum(nearest, ends)]
        return [np.zeros_like(ends), np.minimum(*inner), np.maximum(*inner), ends]

    def _edge_distances_kpc(self, directions: Floats) -> Floats:
        """Where lines of sight leave the cylinder in which there are stars."""
        across = np.maximum(1.0 - directions[:, 2] ** 2, 1e-12)
        towards_centre = self.sun_radius_kpc * directions[:, 0]
        room = self.edge_kpc**2 - self.sun_radius_kpc**2
        return np.asarray((towards_centre + np.sqrt(towards_centre**2 + across * room)) / across)

    def densities_at(self, directions: Floats, distances_kpc: Floats) -> Floats:
        """Star density at distances along directions.

        Parameters
        ----------
        directions : (n, 3) float    Galactic axes, no unit
        distances_kpc : (n, m) float    from the Sun

        Returns
        -------
        (n, m) float    1 at the centre of the Galaxy, 0 beyond the edge

        Source: Adams et al. 2013, ApJ 778, 164, section 2.
        """
        x = self.sun_radius_kpc - distances_kpc * directions[:, 0:1]
        y = distances_kpc * directions[:, 1:2]
        heights = np.abs(self.sun_height_kpc + distances_kpc * directions[:, 2:3])
        radii = np.hypot(x, y)
        densities = np.exp(-radii / self.disc_scale_kpc - heights / self.disc_height_kpc)
        return np.where(radii <= self.edge_kpc, densities, 0.0)

    def disc_integral_kpc3(self) -> float:
        """Integral of the density over all space.

        Returns
        -------
        float    kpc^3

        Source: 2 pi Rd^2 (1 - (1 + x) exp(-x)) 2 H with x = edge / Rd.
        """
        x = self.edge_kpc / self.disc_scale_kpc
        share = 1.0 - (1.0 + x) * np.exp(-x)
        return float(4.0 * np.pi * self.disc_scale_kpc**2 * self.disc_height_kpc * share)


def cloud_densities(cloud: Cloud, ras_deg: Floats, decs_deg: Floats) -> Floats:
    """Sources of a cloud per share of the sky.

    Parameters
    ----------
    cloud : Cloud    a round Gaussian
    ras_deg, decs_deg : (n,) float    degrees

    Returns
    -------
    (n,) float    no unit; its mean over the sky is the cloud's weight

    Source: our own.
    """
    distances = separations_deg(cloud.ra_deg, cloud.dec_deg, ras_deg, decs_deg)
    variance_rad2 = np.deg2rad(cloud.sigma_deg) ** 2
    gaussian = np.exp(-0.5 * np.deg2rad(distances) ** 2 / variance_rad2)
    return np.asarray(cloud.weight * 2.0 / variance_rad2 * gaussian)
