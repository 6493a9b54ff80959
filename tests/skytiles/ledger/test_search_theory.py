"""The ledger against the textbook results of search theory (fixtures/authority)."""

import json
from pathlib import Path

import numpy as np
import pytest

from skytiles.ledger.ledger import Ledger
from skytiles.ledger.ledger_frame import LedgerFrame
from skytiles.source.presets import steady_model

FIXTURE = Path(__file__).parents[3] / "fixtures" / "authority" / "search_theory.json"
ROWS = {row["id"]: row for row in json.loads(FIXTURE.read_text())["rows"]}

DEEP_MAG = 60.0


def bright_ledger(probabilities):
    """A light far above every limit, no pixel undetectable: D is the completeness alone."""
    return Ledger(
        probabilities,
        1.0 - float(np.sum(probabilities)),
        undetectable=np.zeros(len(probabilities)),
        source_model=steady_model(magnitude=5.0, sigma_mag=0.0),
    )


def look(key, detection):
    """One look of an instrument of its own."""
    return LedgerFrame(key, 0.1, key, 10.0, 20.0, 2.0, True, detection, DEEP_MAG)


def test_posterior_after_a_miss():
    # Stone 1975, Theory of Optimal Search: p .5 .3 .2, the first cell searched with .8.
    row = ROWS["bayes1"]
    ledger = bright_ledger(row["probabilities"])
    ledger.add(look(1, row["detection_in_the_first"]), [0], [1.0])
    assert 1.0 - ledger.searched == pytest.approx(row["miss"], abs=row["tolerance"])
    np.testing.assert_allclose(ledger.residual, row["posterior"], rtol=0, atol=row["tolerance"])


def test_two_independent_looks():
    # 1 - (1 - .6)(1 - .5) = .8.
    row = ROWS["indep"]
    ledger = bright_ledger([1.0])
    for key, detection in enumerate(row["detections"]):
        ledger.add(look(key, detection), [0], [1.0])
    assert ledger.searched == pytest.approx(row["together"], abs=row["tolerance"])


@pytest.mark.parametrize("place", range(6))
def test_many_small_random_looks_follow_koopman(place):
    # Koopman 1946, OEG Report 56; 1956, Operations Research 4, 503: P = 1 - exp(-c). A look that
    # covers 1/N of the area at random finds with chance 1/N; c N of them are random search.
    row = ROWS["koopman"]
    coverage, expected = row["coverage"][place], row["random"][place]
    n_looks = 100
    ledger = bright_ledger([1.0])
    for key in range(n_looks):
        ledger.add(look(key, coverage / n_looks), [0], [1.0])
    # 1 - (1 - c/N)^N differs from the limit by c^2 e^-c / 2N at first order.
    error = coverage**2 * np.exp(-coverage) / (2 * n_looks)
    assert ledger.searched == pytest.approx(expected + error, abs=2e-5)


def test_exhaustive_search_adds_up_to_the_whole():
    # Koopman 1956: without overlap P = min(1, c).
    ledger = bright_ledger(np.full(20, 0.05))
    for key in range(10):
        ledger.add(look(key, 1.0), [key], [1.0])
    assert ledger.searched == pytest.approx(0.5, abs=1e-12)
