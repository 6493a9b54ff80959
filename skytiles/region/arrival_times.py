"""A direction from when a burst reached several places on the Earth."""

from dataclasses import dataclass
from functools import cached_property
from itertools import combinations
from typing import Any, ClassVar

import numpy as np
from numpy.typing import NDArray

from skytiles.region.nearest_direction import nearest_direction
from skytiles.sphere.angles import unit_vectors
from skytiles.sphere.calendar import iso_from_mjd
from skytiles.sphere.earth_places import LIGHT_M_PER_S, earth_to_icrs_matrix, place_vectors_m

Floats = NDArray[np.float64]

_DAY_S = 86400.0
# Times that miss each other by more than this many sigmas of their fit are said to disagree.
_DISAGREEING_SIGMAS = 3.0


@dataclass(frozen=True)
class Station:
    """A detector of known place, and when the burst reached it."""

    name: str
    longitude_deg: float
    latitude_deg: float
    height_m: float
    # After the reference time of the constraint.
    arrival_s: float
    # Unknown offset of its clock or trigger, one sigma, beside the covariance.
    bias_s: float = 0.0


@dataclass(frozen=True)
class ArrivalTimesConstraint:
    """Times t_j = t0 - n.r_j/c with a full covariance; t0 is marginalised with a flat prior.

    Two stations give a ring about the line between them, three give two mirror spots, four a
    spot. The Earth stands as it did at the reference time.
    """

    kind: ClassVar[str] = "arrival times"

    reference_mjd: float
    stations: tuple[Station, ...]
    # (N, N), seconds squared, without the bias terms.
    covariance_s2: tuple[tuple[float, ...], ...]

    @property
    def event_mjd(self) -> float:
        """When the burst passed, in the mean of the stations."""
        mean_s = float(np.mean(self._arrivals_s))
        return self.reference_mjd + mean_s / _DAY_S

    @property
    def _arrivals_s(self) -> Floats:
        return np.array([station.arrival_s for station in self.stations])

    @cached_property
    def total_covariance_s2(self) -> Floats:
        """(N, N): the stated covariance with the bias of each station on its diagonal."""
        biases = np.array([station.bias_s for station in self.stations])
        return np.array(self.covariance_s2) + np.diag(biases**2)

    @cached_property
    def delays_s(self) -> Floats:
        """(N, 3): how much earlier each station is reached per unit of the direction, ICRS."""
        places_m = place_vectors_m(
            [station.longitude_deg for station in self.stations],
            [station.latitude_deg for station in self.stations],
            [station.height_m for station in self.stations],
        )
        return np.asarray(places_m @ earth_to_icrs_matrix(self.reference_mjd).T / LIGHT_M_PER_S)

    @cached_property
    def slopes(self) -> Floats:
        """(N - 1, 3): the misfit in sigmas is `slopes n - targets`."""
        return np.asarray(self._whitening @ self.delays_s)

    @cached_property
    def targets(self) -> Floats:
        """(N - 1,): see slopes."""
        times_s = self._arrivals_s - float(np.mean(self._arrivals_s))
        return np.asarray(-self._whitening @ times_s)

    @cached_property
    def _whitening(self) -> Floats:
        """(N - 1, N): times to independent numbers of unit variance that do not know t0.

        With a flat prior on t0 the likelihood depends on the times through
        C^-1 - C^-1 1 1^T C^-1 / (1^T C^-1 1) alone, which has rank N - 1.
        """
        inverse = np.linalg.inv(self.total_covariance_s2)
        sums = inverse.sum(axis=1)
        projected = inverse - np.outer(sums, sums) / sums.sum()
        values, axes = np.linalg.eigh(0.5 * (projected + projected.T))
        return np.asarray(np.sqrt(values[1:])[:, None] * axes[:, 1:].T)

    @cached_property
    def best_direction(self) -> Floats:
        """(3,) ICRS: where the times fit best, or one of several such places."""
        return nearest_direction(self.slopes, self.targets)

    @cached_property
    def best_misfit(self) -> Floats:
        """(N - 1,): the misfit in sigmas at the best direction."""
        return np.asarray(self.slopes @ self.best_direction - self.targets)

    def excess(self, vectors: Floats) -> Floats:
        """How much chi squared exceeds its smallest value; vectors (n, 3) ICRS."""
        # The difference is taken before the squares: times that contradict each other have a
        # huge chi squared everywhere.
        moved = (vectors - self.best_direction) @ self.slopes.T
        return np.asarray(np.sum(moved * (moved + 2.0 * self.best_misfit), axis=-1))

    def log_likelihoods(self, ras_deg: Floats, decs_deg: Floats) -> Floats:
        """Natural logarithm of the likelihood, 0 at its best."""
        return np.asarray(-0.5 * self.excess(unit_vectors(ras_deg, decs_deg)))

    @property
    def notes(self) -> tuple[str, ...]:
        """Warnings: times that no direction explains."""
        pairs = [self._pair_note(i, j) for i, j in combinations(range(len(self.stations)), 2)]
        late = tuple(note for note in pairs if note)
        return late or self._misfit_notes()

    def _pair_note(self, first: int, second: int) -> str | None:
        """Two stations further apart in time than light needs between them."""
        one, other = self.stations[first], self.stations[second]
        apart_s = abs(one.arrival_s - other.arrival_s)
        light_s = float(np.linalg.norm(self.delays_s[first] - self.delays_s[second]))
        if apart_s <= light_s:
            return None
        c = self.total_covariance_s2
        sigma_s = float(np.sqrt(c[first, first] + c[second, second] - 2.0 * c[first, second]))
        return (
            f"Inconsistent times: {one.name} and {other.name} differ by {1e3 * apart_s:.2f} ms, "
            f"but light needs {1e3 * light_s:.2f} ms between them "
            f"({(apart_s - light_s) / sigma_s:.1f} sigma too long)."
        )

    def _misfit_notes(self) -> tuple[str, ...]:
        """More than three stations test themselves: one direction must explain all of them."""
        sigmas = float(np.linalg.norm(self.best_misfit))
        if sigmas <= _DISAGREEING_SIGMAS:
            return ()
        return (f"Inconsistent times: the best direction misses them by {sigmas:.1f} sigma.",)

    def to_json(self) -> dict[str, Any]:
        """The constraint as in an alert file."""
        return {
            "type": self.kind,
            "reference_time": iso_from_mjd(self.reference_mjd),
            "stations": [dict(vars(station)) for station in self.stations],
            "covariance_s2": [list(row) for row in self.covariance_s2],
        }
