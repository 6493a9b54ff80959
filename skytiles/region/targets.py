"""Target lists: galaxies or stars where the source may be, blended with the smooth prior."""

from dataclasses import dataclass
from functools import cached_property
from typing import Any, ClassVar

import numpy as np
from numpy.typing import NDArray

from skytiles.region.containment import DEFAULT_CONTAINMENT, chords_deg, radius_in_sigmas
from skytiles.region.distance import DistanceConstraint
from skytiles.sphere.angles import unit_vectors
from skytiles.sphere.cap_pixels import pixels_inside
from skytiles.sphere.cap_set import CapSet
from skytiles.sphere.healpix_door import pixel_side_deg
from skytiles.sphere.solid_angle import SKY_DEG2

Ints = NDArray[np.int64]
Floats = NDArray[np.float64]
Bools = NDArray[np.bool_]

# Share of the probability that a list holds when it does not say: an assumption.
DEFAULT_COMPLETENESS = 0.5
# A target is followed to this many sigmas (beyond: 3e-4 of it), in cells of this share of its
# sigma: the sum of a Gaussian over such cells is right to exp(-2 (pi x 1.2)^2).
_FOLLOWED_SIGMAS = 4.0
_CELLS_PER_SIGMA = 1.2


@dataclass(frozen=True)
class Target:
    """A place with its weight; the radius is of the list's containment."""

    ra_deg: float
    dec_deg: float
    weight: float = 1.0
    radius_deg: float = 0.02
    name: str = ""
    # None: not known, so that a distance says nothing of this target.
    distance_mpc: float | None = None

    def to_json(self) -> dict[str, Any]:
        """The target as in an alert file."""
        fields: dict[str, Any] = {
            "ra_deg": self.ra_deg,
            "dec_deg": self.dec_deg,
            "weight": self.weight,
            "radius_deg": self.radius_deg,
        }
        if self.name:
            fields["name"] = self.name
        if self.distance_mpc is not None:
            fields["distance_mpc"] = self.distance_mpc
        return fields


@dataclass(frozen=True)
class TargetListConstraint:
    """completeness x targets + (1 - completeness) x smooth prior."""

    kind: ClassVar[str] = "targets"

    targets: tuple[Target, ...]
    completeness: float = DEFAULT_COMPLETENESS
    # What each target's radius holds.
    containment: float = DEFAULT_CONTAINMENT

    def to_json(self) -> dict[str, Any]:
        """The constraint as in an alert file."""
        return {
            "type": self.kind,
            "targets": [target.to_json() for target in self.targets],
            "completeness": self.completeness,
            "containment": self.containment,
        }

    @cached_property
    def vectors(self) -> Floats:
        """Directions of the targets (m, 3)."""
        ras = [target.ra_deg for target in self.targets]
        return unit_vectors(ras, [target.dec_deg for target in self.targets])

    @cached_property
    def sigmas_rad(self) -> Floats:
        """Standard deviations of the targets (m,)."""
        radii_deg = np.array([target.radius_deg for target in self.targets])
        return np.deg2rad(chords_deg(radii_deg) / radius_in_sigmas(self.containment))

    def weights(self, distances: tuple[DistanceConstraint, ...] = ()) -> Floats:
        """Weights of the targets (m,), sum 1, with what is known of the source's distance."""
        weights = np.array([target.weight for target in self.targets])
        known = np.array([target.distance_mpc or np.nan for target in self.targets])
        for distance in distances:
            weights = weights * np.nan_to_num(distance.likelihoods(known), nan=1.0)
        return np.asarray(weights / weights.sum())

    def needs_split(self, order: int, pixels: Ints) -> Bools:
        """Which pixels are too coarse for a target on or near them."""
        side_rad = float(np.deg2rad(pixel_side_deg(order)))
        is_fine = side_rad <= self.sigmas_rad / _CELLS_PER_SIGMA
        if is_fine.all():
            return np.zeros(len(pixels), dtype=np.bool_)
        # A pixel reaches at most 1.1 sides from its centre (order 3 and up).
        reaches = np.minimum(_FOLLOWED_SIGMAS * self.sigmas_rad[~is_fine] + 1.1 * side_rad, np.pi)
        circles = CapSet.of_circles(self.vectors[~is_fine], reaches)
        return np.isin(pixels, pixels_inside(circles, order).pixels)

    def densities(
        self, vectors: Floats, *, distances: tuple[DistanceConstraint, ...] = ()
    ) -> Floats:
        """Probability per share of the sky at points (n, 3), of the targets alone; mean 1."""
        # In sequence of z, the points near a target are among those of a narrow band.
        sequence = np.argsort(vectors[:, 2])
        points = vectors[sequence]
        reaches = 1.25 * _FOLLOWED_SIGMAS * self.sigmas_rad
        firsts = np.searchsorted(points[:, 2], self.vectors[:, 2] - reaches)
        ends = np.searchsorted(points[:, 2], self.vectors[:, 2] + reaches)
        heights = self.weights(distances) * _peaks(self.sigmas_rad)
        values = np.zeros(len(points))
        for k, (first, end) in enumerate(zip(firsts, ends, strict=True)):
            squares = ((points[first:end] - self.vectors[k]) ** 2).sum(axis=1)
            near = np.flatnonzero(squares <= reaches[k] ** 2)
            shape = np.exp(-0.5 * squares[near] / self.sigmas_rad[k] ** 2)
            values[first + near] += heights[k] * shape
        found = np.empty(len(points))
        found[sequence] = values
        return found


def _peaks(sigmas_rad: Floats) -> Floats:
    """Density of round Gaussians at their middle: chords make them exact on the sphere."""
    sigmas_deg = np.rad2deg(sigmas_rad)
    return np.asarray(SKY_DEG2 / (2.0 * np.pi * sigmas_deg**2))
