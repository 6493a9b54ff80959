"""Whether constraints can all be true: a number, and a sentence when they contradict each other."""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

Floats = NDArray[np.float64]

# Below this the product is called contradictory: a hundred times less overlap than directions
# that have nothing to do with each other.
CONTRADICTORY = 0.01


@dataclass(frozen=True)
class Agreement:
    """How well the constraint that fits least agrees with the product of all others."""

    # Above 1 it supports them, 1 is what unrelated directions have on average.
    overlap: float
    # Which of them it is.
    least_fitting: int

    @property
    def is_contradictory(self) -> bool:
        """The product is near zero."""
        return self.overlap < CONTRADICTORY

    def note(self, kinds: Sequence[str]) -> str | None:
        """A sentence when the constraints contradict each other."""
        if not self.is_contradictory:
            return None
        others = "the other one" if len(kinds) == 2 else "the product of the others"
        return (
            f"The constraints contradict each other: constraint {self.least_fitting + 1} of "
            f"{len(kinds)} ({kinds[self.least_fitting]}) has an overlap of {self.overlap:.1e} with "
            f"{others}, where unrelated directions have 1 on average. "
            "Switch one off, or look at the messages again."
        )


def agreement_of(log_densities: Sequence[Floats], shares: Floats) -> Agreement | None:
    """How well constraints agree.

    Parameters
    ----------
    log_densities : (c,) float each    natural logarithm of each constraint's density, 1 for flat
    shares : (c,) float    share of the sky of each cell

    Returns
    -------
    Agreement or None    None for fewer than two: the least over constraints of the mean over the
    sky of its density times the normalised density of the product of all others

    Source: posterior overlap integral, Ashton et al. 2018, ApJ 860, 6 (from memory).
    """
    if len(log_densities) < 2:
        return None
    total = np.sum(log_densities, axis=0)
    highest = float(total.max())
    everything = float(np.sum(shares * np.exp(total - highest)))
    logs = []
    for piece in log_densities:
        others = total - piece
        scale = float(others.max())
        rest = float(np.sum(shares * np.exp(others - scale)))
        logs.append(highest + np.log(everything) - scale - np.log(rest))
    least = int(np.argmin(logs))
    return Agreement(overlap=float(np.exp(logs[least])), least_fitting=least)
