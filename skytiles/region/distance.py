"""How far away the source is: for the whole sky, or for each pixel of a map."""

from dataclasses import dataclass
from typing import Any, ClassVar, NamedTuple

import numpy as np
from numpy.typing import ArrayLike, NDArray

from skytiles.errors import MapFileError
from skytiles.region.sky_map import SkyMap
from skytiles.sphere.healpix_door import MAX_ORDER

Ints = NDArray[np.int64]
Floats = NDArray[np.float64]

# Distance moduli count from 10 pc.
_MODULUS_ZERO_MPC = 1e-5
_N_NODES = 48
_FOLLOWED_SIGMAS = 6.0


@dataclass(frozen=True)
class DistanceConstraint:
    """Log-normal: half the probability beyond the median, one sigma is a factor.

    It says nothing about the direction by itself: it weighs targets whose distance is known, and
    a source model can turn its magnitudes by it.
    """

    kind: ClassVar[str] = "distance"

    median_mpc: float
    # One sigma: between median / factor and median x factor there are 68 %. Above 1.
    factor: float

    @property
    def modulus_mag(self) -> float:
        """Distance modulus of the median."""
        return float(distance_moduli_mag(self.median_mpc))

    @property
    def modulus_sigma_mag(self) -> float:
        """Standard deviation of the distance modulus, which is Gaussian."""
        return float(5.0 * np.log10(self.factor))

    def likelihoods(self, distances_mpc: ArrayLike) -> Floats:
        """How well distances (n,) agree: 1 at the median, nan where none is given."""
        logs = np.log(np.asarray(distances_mpc, dtype=np.float64) / self.median_mpc)
        return np.asarray(np.exp(-0.5 * (logs / np.log(self.factor)) ** 2))

    def to_json(self) -> dict[str, Any]:
        """The constraint as in an alert file."""
        return {"type": self.kind, "median_mpc": self.median_mpc, "factor": self.factor}


class PixelDistances(NamedTuple):
    """Log-normal distances of pixels (p,), nan where the map says nothing."""

    medians_mpc: Floats
    factors: Floats


def distance_moduli_mag(distances_mpc: ArrayLike) -> Floats:
    """Distance moduli.

    Parameters
    ----------
    distances_mpc : (n,) float or scalar    Mpc

    Returns
    -------
    (n,) float    magnitudes, 5 log10(d / 10 pc)

    Source: definition.
    """
    return np.asarray(5.0 * np.log10(np.asarray(distances_mpc) / _MODULUS_ZERO_MPC))


def pixel_distances(sky_map: SkyMap, order: int, pixels: ArrayLike) -> PixelDistances:
    """Distances that a map gives for pixels, each as the log-normal of the same mean and spread.

    Parameters
    ----------
    sky_map : SkyMap    with the columns DISTMU, DISTSIGMA and DISTNORM
    order : int    0..29
    pixels : (p,) int    NESTED

    Returns
    -------
    PixelDistances    (p,) medians in Mpc and factors; a pixel takes the cell at its middle;
    MapFileError when the map has no distances

    Source: conditional distribution p(r) = DISTNORM / (sqrt(2 pi) s) exp(-(r - m)^2 / (2 s^2))
    r^2 of public alert maps (Singer et al. 2016, ApJL 829, L15, eq. 1); moments by quadrature.
    """
    if not {"DISTMU", "DISTSIGMA"} <= set(sky_map.distances):
        raise MapFileError(
            given="it has no distances",
            allowed="columns DISTMU, DISTSIGMA and DISTNORM",
            advice="give the distance as a constraint of its own",
        )
    shift = 2 * (MAX_ORDER - order)
    places = (np.asarray(pixels, dtype=np.int64) << shift) + (1 << shift) // 2
    cells = np.maximum(np.searchsorted(sky_map.starts, places, side="right") - 1, 0)
    is_known = (sky_map.starts[cells] <= places) & (places < sky_map.ends[cells])
    mus = np.where(is_known, sky_map.distances["DISTMU"][cells], np.nan)
    sigmas = np.where(is_known, sky_map.distances["DISTSIGMA"][cells], np.nan)
    return _log_normals(*_means_and_spreads(mus, sigmas))


def _means_and_spreads(mus_mpc: Floats, sigmas_mpc: Floats) -> tuple[Floats, Floats]:
    """Mean and standard deviation of r^2 times a Gaussian, for r above 0."""
    is_good = np.isfinite(mus_mpc) & np.isfinite(sigmas_mpc) & (sigmas_mpc > 0.0)
    mus, sigmas = np.where(is_good, mus_mpc, 1.0), np.where(is_good, sigmas_mpc, 1.0)
    # Where r^2 times the Gaussian peaks: the outer root of r^2 - m r - 2 s^2 = 0.
    peaks = 0.5 * (mus + np.sqrt(mus**2 + 8.0 * sigmas**2))
    nodes, weights = np.polynomial.legendre.leggauss(_N_NODES)
    lows = np.maximum(peaks - _FOLLOWED_SIGMAS * sigmas, 0.0)
    halves = 0.5 * (peaks + _FOLLOWED_SIGMAS * sigmas - lows)
    distances = lows[:, None] + halves[:, None] * (nodes + 1.0)
    logs = -0.5 * ((distances - mus[:, None]) / sigmas[:, None]) ** 2
    shares = distances**2 * np.exp(logs - logs.max(axis=1, keepdims=True)) * weights
    shares /= shares.sum(axis=1, keepdims=True)
    means = (shares * distances).sum(axis=1)
    variances = (shares * (distances - means[:, None]) ** 2).sum(axis=1)
    return np.where(is_good, means, np.nan), np.where(is_good, np.sqrt(variances), np.nan)


def _log_normals(means_mpc: Floats, spreads_mpc: Floats) -> PixelDistances:
    ratios = 1.0 + (spreads_mpc / means_mpc) ** 2
    return PixelDistances(means_mpc / np.sqrt(ratios), np.exp(np.sqrt(np.log(ratios))))
