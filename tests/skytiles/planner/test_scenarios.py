"""Source scenarios keep the probability that is left and the brightness that matters."""

import numpy as np
import pytest

from skytiles.ledger.ledger import Ledger
from skytiles.ledger.ledger_frame import LedgerFrame, detection_efficiency
from skytiles.planner.scenarios import make_scenarios
from skytiles.source.hypothesis import Hypothesis
from skytiles.source.presets import normal_offsets, steady_model
from skytiles.source.source_model import SourceModel


def many_delays():
    offsets_mag, weights = normal_offsets(1.2)
    delays_d = 0.05 * 1.5 ** np.arange(12)
    return SourceModel(
        tuple(Hypothesis(f"{d:.2f}", 1 / 12, d, 12.0, 8.0, 10.0, 0.02) for d in delays_d),
        offsets_mag,
        weights,
        "twelve delays",
    )


def ledger_of(model, *, is_shared=True):
    rng = np.random.default_rng(5)
    p = rng.dirichlet(np.ones(30)) * 0.95
    q = None if is_shared else rng.dirichlet(np.ones(len(model.offsets_mag)), size=30)
    ledger = Ledger(p, 0.05, undetectable=np.full(30, 0.02), source_model=model, offset_weights=q)
    for key in range(8):
        pixels = rng.choice(30, size=6, replace=False)
        frame = LedgerFrame(key, 0.1 * key, key, 0.0, 0.0, 2.0, True, 0.85, 9.0 + key)
        ledger.add(frame, pixels, rng.uniform(0.3, 1.0, 6))
    return ledger


@pytest.mark.parametrize("is_shared", [True, False])
@pytest.mark.parametrize("model", [steady_model(), many_delays()], ids=["steady", "delays"])
def test_what_remains_is_what_can_be_found_less_what_was_searched(model, is_shared):
    ledger = ledger_of(model, is_shared=is_shared)
    remaining = make_scenarios(model, np.linspace(0.0, 0.5, 5)).remaining(ledger)
    by_pixel = ledger.probabilities * (1.0 - ledger.undetectable - ledger.detected)
    np.testing.assert_allclose(remaining.sum(axis=1), by_pixel, rtol=0, atol=1e-12)


def test_a_small_model_is_used_as_it_is():
    model = steady_model()
    scenarios = make_scenarios(model, np.array([0.0, 0.5]))
    assert scenarios.n_scenarios == len(model.offsets_mag)
    np.testing.assert_array_equal(
        scenarios.magnitudes(np.array([0.3]), "V")[0], model.node_magnitudes(0.3, "V")[0]
    )


def test_a_large_model_is_merged_without_losing_much():
    model = many_delays()
    times_d = np.linspace(0.1, 0.6, 5)
    scenarios = make_scenarios(model, times_d)
    assert scenarios.n_scenarios <= 48
    ledger = Ledger([1.0], 0.0, undetectable=[0.0], source_model=model)
    weights = scenarios.remaining(ledger)[0]
    nodes = np.outer(model.weights, model.offset_weights)
    for t_d in times_d:
        for limit in (9.0, 11.0, 13.0, 15.0):
            merged = weights @ detection_efficiency(
                scenarios.magnitudes(np.array([t_d]), "V")[0], limit, s=0.2
            )
            exact = np.sum(
                nodes * detection_efficiency(model.node_magnitudes(t_d, "V"), limit, s=0.2)
            )
            assert merged == pytest.approx(exact, abs=0.04)


def test_scenarios_are_the_same_every_time():
    times_d = np.linspace(0.1, 0.6, 5)
    one, other = (make_scenarios(many_delays(), times_d) for _ in range(2))
    np.testing.assert_array_equal(one.scenario_of, other.scenario_of)
    np.testing.assert_array_equal(one.nodes, other.nodes)
