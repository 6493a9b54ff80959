"""What the ledger refuses, and what it leaves alone when it does."""

import numpy as np
import pytest

from skytiles.errors import LedgerError
from skytiles.ledger.ledger import Ledger
from skytiles.ledger.ledger_frame import LedgerFrame, detection_efficiency
from skytiles.source.presets import steady_model


def ledger_of_three(**changes):
    values = {"undetectable": np.zeros(3), "source_model": steady_model()} | changes
    return Ledger([0.5, 0.3, 0.15], 0.05, **values)


def frame(key=1, **changes):
    values = {"t_d": 0.5, "instrument": 7, "ra_deg": 1.0, "dec_deg": 2.0, "field_deg": 2.0}
    values |= {"is_examined": True, "completeness": 0.85, "m_eff": 15.0} | changes
    return LedgerFrame(key, **values)


@pytest.mark.parametrize(
    ("indices", "fractions"),
    [
        ([3], [1.0]),
        ([-1], [1.0]),
        ([0, 0], [1.0, 1.0]),
        ([0], [1.0, 1.0]),
        ([0], [0.0]),
        ([0], [2]),
    ],
)
def test_pixels_that_are_not_the_regions_are_refused(indices, fractions):
    ledger = ledger_of_three()
    with pytest.raises(LedgerError) as refusal:
        ledger.add(frame(), indices, fractions)
    assert refusal.value.code == "bad-ledger-entry"
    assert ledger.n_frames == 0
    assert ledger.imaged == 0.0


def test_a_frame_counts_once():
    ledger = ledger_of_three()
    ledger.add(frame(), [0], [1.0])
    with pytest.raises(LedgerError, match="each frame once"):
        ledger.add(frame(), [1], [1.0])


def test_an_unknown_frame_can_be_neither_withdrawn_nor_replaced():
    ledger = ledger_of_three()
    with pytest.raises(LedgerError):
        ledger.withdraw(5)
    with pytest.raises(LedgerError):
        ledger.replace(frame(5), [0], [1.0])


def test_a_refused_replacement_leaves_the_frame_counted():
    ledger = ledger_of_three()
    ledger.add(frame(), [0], [1.0])
    before = ledger.searched
    with pytest.raises(LedgerError):
        ledger.replace(frame(), [9], [1.0])
    assert ledger.searched == before
    assert ledger.has(1)


@pytest.mark.parametrize(
    "changes",
    [
        {"t_d": float("nan")},
        {"field_deg": 0.0},
        {"completeness": 1.5},
        {"s": 0.0},
        {"m_eff": float("inf")},
    ],
)
def test_frames_that_make_no_sense_are_refused(changes):
    with pytest.raises(LedgerError):
        frame(**changes)


@pytest.mark.parametrize(
    "changes",
    [{"undetectable": np.zeros(2)}, {"offset_weights": np.ones((3, 2))}],
)
def test_shapes_that_do_not_fit_are_refused(changes):
    with pytest.raises(LedgerError):
        ledger_of_three(**changes)


def test_probabilities_must_sum_to_one():
    with pytest.raises(LedgerError, match="Normalise"):
        Ledger([0.5], 0.2, undetectable=[0.0], source_model=steady_model())


def test_a_frame_beside_the_region_changes_nothing():
    ledger = ledger_of_three()
    changed = ledger.add(frame(), [], [])
    assert len(changed) == 0
    assert ledger.searched == 0.0
    assert ledger.n_looks == 1


def test_fading_function():
    # Veres & Chesley 2017: 1/(1 + exp((m - m5)/w)), w = 0.1, at m - m5 = -.3, -.1, 0, .1, .3.
    found = detection_efficiency(20.0 + np.array([-0.3, -0.1, 0.0, 0.1, 0.3]), 20.0, s=0.1)
    expected = [0.9526, 0.7311, 0.5, 0.2689, 0.0474]
    np.testing.assert_allclose(found[:4], expected[:4], rtol=0, atol=1e-4)
    # The cut of the definition lies at 3 s: the last value is the last that counts.
    assert detection_efficiency(20.2999, 20.0, s=0.1) == pytest.approx(expected[4], abs=1e-4)
    assert detection_efficiency(20.3001, 20.0, s=0.1) == 0.0


def test_no_light_is_never_found():
    assert detection_efficiency(np.inf, 25.0, s=0.2) == 0.0
    assert detection_efficiency(np.inf, 25.0, s=0.2, saturation_mag=9.0) == 0.0
