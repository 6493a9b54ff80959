"""What remains to be found, by pixel and by source scenario."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from skytiles.ledger.ledger import Ledger
from skytiles.source.source_model import SourceModel

Floats = npt.NDArray[np.float64]
Ints = npt.NDArray[np.int64]

# Up to this many (hypothesis, offset) nodes are planned with as they are.
MOST_SCENARIOS = 48
# No frame of a network goes deeper, so beyond it one magnitude is as dark as another.
_DARK_MAG = 25.0
# Where dust counts, scenarios are compared in these two bands.
_COMPARED_BANDS = ("clear", "I")
# Pixels at a time where every pixel has its own offset weights.
_CHUNK = 1024


@dataclass(frozen=True, eq=False)
class Scenarios:
    """n source scenarios: each is one node of the source model that stands for its like."""

    source_model: SourceModel
    scenario_of: Ints
    nodes: Ints

    @property
    def n_scenarios(self) -> int:
        """Number of scenarios n."""
        return len(self.nodes)

    def magnitudes(self, ts_d: Floats, band: str) -> Floats:
        """Magnitudes of every scenario.

        Parameters
        ----------
        ts_d : (t,) float    days since the event
        band : str

        Returns
        -------
        (t, n) float    +inf before first light
        """
        n_offsets = len(self.source_model.offsets_mag)
        hypotheses, offsets = np.divmod(self.nodes, n_offsets)
        by_time = self.source_model.magnitudes(ts_d, band).T
        magnitudes: Floats = by_time[:, hypotheses] + self.source_model.offsets_in(band)[offsets]
        return magnitudes

    def remaining(self, ledger: Ledger) -> Floats:
        """Probability that the source is there, can be found, and has been missed so far.

        Parameters
        ----------
        ledger : Ledger    of the same source model

        Returns
        -------
        (p, n) float    its sum is the sum of p (1 - u) less `ledger.searched`
        """
        findable = ledger.probabilities * (1.0 - ledger.undetectable)
        remaining = np.empty((len(findable), self.n_scenarios))
        for pixels, states_of, states in ledger.miss_states():
            weighted = states * self.source_model.weights.astype(states.dtype)[None, :, None]
            if ledger.offset_weights.ndim == 1:
                remaining[pixels] = self._merged(weighted * ledger.offset_weights)[states_of]
                continue
            for start in range(0, len(pixels), _CHUNK):
                rows = slice(start, start + _CHUNK)
                nodes = weighted[states_of[rows]]
                nodes *= ledger.offset_weights[pixels[rows], None, :]
                remaining[pixels[rows]] = self._merged(nodes)
        remaining *= findable[:, None]
        return remaining

    def _merged(self, by_node: Floats) -> Floats:
        """Sum the nodes (g, h, b) of each scenario: (g, n)."""
        flat = by_node.reshape(len(by_node), -1)
        if self.n_scenarios == flat.shape[1]:
            return flat
        belongs = np.zeros((flat.shape[1], self.n_scenarios), flat.dtype)
        belongs[np.arange(flat.shape[1]), self.scenario_of] = 1.0
        return flat @ belongs


def make_scenarios(
    source_model: SourceModel, ts_d: Floats, *, most: int = MOST_SCENARIOS
) -> Scenarios:
    """Scenarios that keep apart what differs in brightness during a plan.

    Parameters
    ----------
    source_model : SourceModel
    ts_d : (t,) float    days since the event: times at which brightness is compared
    most : int           largest number of scenarios

    Returns
    -------
    Scenarios    all nodes as they are when there are at most `most`
    """
    is_dusty = source_model.extinctions_mag is not None
    parts = [_brightness(source_model, ts_d, band) for band in _COMPARED_BANDS[: 1 + is_dusty]]
    brightness = np.minimum(np.concatenate(parts, axis=1), _DARK_MAG)
    weights = np.outer(source_model.weights, source_model.offset_weights).reshape(-1)
    scenario_of = _split(brightness, weights + 1e-12, most=most)
    n_scenarios = int(scenario_of.max()) + 1
    middles = [
        _most_typical(np.flatnonzero(scenario_of == number), brightness, weights + 1e-12)
        for number in range(n_scenarios)
    ]
    return Scenarios(source_model, scenario_of, np.array(middles, dtype=np.int64))


def _brightness(source_model: SourceModel, ts_d: Floats, band: str) -> Floats:
    """(h x b, t) magnitudes of all nodes in one band."""
    by_time = source_model.magnitudes(ts_d, band)
    nodes = by_time[:, None, :] + source_model.offsets_in(band)[None, :, None]
    return nodes.reshape(-1, by_time.shape[1])


def _split(brightness: Floats, weights: Floats, *, most: int) -> Ints:
    """Halve the most spread group until there are enough; deterministic."""
    if len(weights) <= most:
        return np.arange(len(weights))
    groups = [np.arange(len(weights))]
    spreads = [_spread(groups[0], brightness, weights)]
    while len(groups) < most and max(spreads) > 0.0:
        widest = int(np.argmax(spreads))
        for part in _halves(groups.pop(widest), brightness, weights):
            groups.append(part)
            spreads.append(_spread(part, brightness, weights))
        del spreads[widest]
    scenario_of = np.empty(len(weights), dtype=np.int64)
    for number, group in enumerate(sorted(groups, key=lambda nodes: int(nodes[0]))):
        scenario_of[group] = number
    return scenario_of


def _spread(nodes: Ints, brightness: Floats, weights: Floats) -> float:
    return float(np.max(_variances(nodes, brightness, weights)) * weights[nodes].sum())


def _variances(nodes: Ints, brightness: Floats, weights: Floats) -> Floats:
    mean = np.average(brightness[nodes], axis=0, weights=weights[nodes])
    squares = (brightness[nodes] - mean) ** 2
    return np.asarray(np.average(squares, axis=0, weights=weights[nodes]))


def _halves(nodes: Ints, brightness: Floats, weights: Floats) -> tuple[Ints, Ints]:
    axis = int(np.argmax(_variances(nodes, brightness, weights)))
    values = brightness[nodes, axis]
    is_low = values <= np.average(values, weights=weights[nodes])
    return nodes[is_low], nodes[~is_low]


def _most_typical(nodes: Ints, brightness: Floats, weights: Floats) -> int:
    mean = np.average(brightness[nodes], axis=0, weights=weights[nodes])
    return int(nodes[np.argmin(np.sum((brightness[nodes] - mean) ** 2, axis=1))])
