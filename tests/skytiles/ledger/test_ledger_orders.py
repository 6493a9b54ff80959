"""Random frames in random orders: the live ledger, a rebuilt one, and the plain formulas agree."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from skytiles.ledger.ledger import Ledger
from skytiles.ledger.ledger_frame import LedgerFrame
from skytiles.source.hypothesis import Hypothesis
from skytiles.source.source_model import SourceModel
from tests.skytiles.ledger import plain_ledger

N_PIXELS = 6
OFFSETS = [-2.0, -1.5, -1.0, -0.5, 0.0, 0.5, 1.0]


def random_case(rng, *, is_shared):
    p = rng.dirichlet(np.ones(N_PIXELS + 1))
    q = rng.dirichlet(np.ones(len(OFFSETS)), size=1 if is_shared else N_PIXELS)
    weights = rng.dirichlet(np.ones(3))
    return {
        "p": p[:-1].tolist(),
        "outside": float(p[-1]),
        "u": rng.uniform(0.0, 0.1, N_PIXELS).tolist(),
        "b": OFFSETS,
        "q": np.broadcast_to(q, (N_PIXELS, len(OFFSETS))).tolist(),
        "hypotheses": [
            {
                "w": float(weight),
                "first_light_d": float(rng.choice([-1e9, 0.05, 0.2, 0.4])),
                "m_first": float(rng.uniform(12.0, 15.0)),
                "m_peak": float(rng.uniform(9.0, 13.0)),
                "rise_d": float(rng.uniform(0.1, 20.0)),
                "slope": float(rng.uniform(0.0, 0.4)),
            }
            for weight in weights
        ],
    }


def random_frame(rng, key):
    pixels = rng.choice(N_PIXELS, size=int(rng.integers(1, 5)), replace=False)
    is_tiny = rng.random() < 0.3
    return {
        "key": key,
        # Half an hour of slots over half a night: looks form, grow, split and merge.
        "t_d": 0.1 + int(rng.integers(24)) * 0.0131,
        "instrument": str(rng.choice(["A", "B"])),
        "ra": 10.0 + 0.7 * int(rng.integers(3)),
        "dec": 60.0,
        "field_deg": 1.0,
        "covers": {int(i): float(rng.uniform(0.2, 0.9)) if is_tiny else 1.0 for i in pixels},
        "examined": bool(rng.random() < 0.85),
        "c": float(rng.choice([0.6, 0.85, 0.9, 0.97])),
        "m_eff": float(rng.uniform(9.0, 15.0)) if rng.random() < 0.9 else None,
        "s": float(rng.choice([0.2, 0.4])),
        "m_sat": 10.0,
        "masks": bool(rng.random() < 0.3),
    }


def empty_ledger(case, *, is_shared):
    rows = case["hypotheses"]
    source = SourceModel(
        hypotheses=tuple(
            Hypothesis(
                str(number),
                row["w"],
                row["first_light_d"],
                row["m_first"],
                row["m_peak"],
                row["rise_d"],
                row["slope"],
            )
            for number, row in enumerate(rows)
        ),
        offsets_mag=np.array(case["b"]),
        offset_weights=np.array(case["q"][0]),
        label="random",
    )
    weights = None if is_shared else case["q"]
    return Ledger(
        case["p"],
        case["outside"],
        undetectable=case["u"],
        source_model=source,
        offset_weights=weights,
    )


def arguments(frame):
    values = LedgerFrame(
        key=frame["key"],
        t_d=frame["t_d"],
        instrument=frame["instrument"],
        ra_deg=frame["ra"],
        dec_deg=frame["dec"],
        field_deg=frame["field_deg"],
        is_examined=frame["examined"],
        completeness=frame["c"],
        m_eff=frame["m_eff"],
        s=frame["s"],
        saturation_mag=frame["m_sat"],
        masks_saturated=frame["masks"],
    )
    return values, list(frame["covers"]), list(frame["covers"].values())


def rebuilt(case, frames, *, is_shared):
    ledger = empty_ledger(case, is_shared=is_shared)
    for key in sorted(frames):
        ledger.add(*arguments(frames[key]))
    return ledger


def random_walk(rng, ledger, n_steps):
    """Add, withdraw and replace at random; returns the frames that stay."""
    frames = {}
    for step in range(n_steps):
        before = np.array(ledger.detected)
        choice = rng.random()
        if frames and choice < 0.25:
            key = int(rng.choice(sorted(frames)))
            del frames[key]
            changed = ledger.withdraw(key)
        elif frames and choice < 0.5:
            key = int(rng.choice(sorted(frames)))
            frames[key] = random_frame(rng, key)
            changed = ledger.replace(*arguments(frames[key]))
        else:
            frames[step] = random_frame(rng, step)
            changed = ledger.add(*arguments(frames[step]))
        moved = np.flatnonzero(np.array(ledger.detected) != before)
        assert set(moved.tolist()) <= set(changed.tolist())
    return frames


def assert_same(ledger, expect, *, tolerance):
    np.testing.assert_allclose(ledger.detected, expect["D"], rtol=0, atol=tolerance)
    np.testing.assert_allclose(ledger.residual, expect["residual"], rtol=0, atol=tolerance)
    assert ledger.searched == pytest.approx(expect["searched"], abs=tolerance)
    assert ledger.imaged == pytest.approx(expect["imaged"], abs=tolerance)
    assert ledger.residual_outside == pytest.approx(expect["residual_outside"], abs=tolerance)
    assert ledger.n_looks == expect["n_looks"]


@settings(max_examples=60, deadline=None)
@given(seed=st.integers(0, 2**32 - 1), is_shared=st.booleans(), n_steps=st.integers(1, 40))
def test_any_order_of_changes_equals_a_rebuild_and_the_plain_formulas(seed, is_shared, n_steps):
    rng = np.random.default_rng(seed)
    case = random_case(rng, is_shared=is_shared)
    ledger = empty_ledger(case, is_shared=is_shared)
    frames = random_walk(rng, ledger, n_steps)
    again = rebuilt(case, frames, is_shared=is_shared)
    np.testing.assert_allclose(ledger.detected, again.detected, rtol=0, atol=1e-12)
    assert ledger.searched == pytest.approx(again.searched, abs=1e-12)
    assert ledger.imaged == again.imaged
    assert_same(ledger, plain_ledger.account(case, list(frames.values())), tolerance=1e-9)


@settings(max_examples=30, deadline=None)
@given(seed=st.integers(0, 2**32 - 1))
def test_probability_is_kept_and_detection_is_a_probability(seed):
    rng = np.random.default_rng(seed)
    case = random_case(rng, is_shared=False)
    ledger = empty_ledger(case, is_shared=False)
    random_walk(rng, ledger, 25)
    assert ledger.detected.min() >= 0.0
    assert ledger.detected.max() <= 1.0
    assert ledger.searched <= ledger.imaged + 1e-12
    assert ledger.residual.sum() + ledger.residual_outside == pytest.approx(1.0, abs=1e-12)


@settings(max_examples=30, deadline=None)
@given(seed=st.integers(0, 2**32 - 1))
def test_one_more_frame_of_a_new_look_never_lowers_searched(seed):
    rng = np.random.default_rng(seed)
    case = random_case(rng, is_shared=True)
    ledger = empty_ledger(case, is_shared=True)
    random_walk(rng, ledger, 15)
    before = ledger.searched
    frame = random_frame(rng, 1000) | {"instrument": "C"}
    ledger.add(*arguments(frame))
    assert ledger.searched >= before - 1e-12


@settings(max_examples=30, deadline=None)
@given(seed=st.integers(0, 2**32 - 1), is_shared=st.booleans())
def test_miss_states_give_the_same_detection(seed, is_shared):
    rng = np.random.default_rng(seed)
    case = random_case(rng, is_shared=is_shared)
    ledger = empty_ledger(case, is_shared=is_shared)
    random_walk(rng, ledger, 20)
    weights = [row["w"] for row in case["hypotheses"]]
    missed = np.full(len(case["p"]), np.nan)
    for pixels, state_of, states in ledger.miss_states(n_most=3):
        offset_weights = np.array(case["q"])[pixels]
        missed[pixels] = np.einsum("h,ihb,ib->i", weights, states[state_of], offset_weights)
    expected = (1.0 - np.array(case["u"])) * (1.0 - missed)
    np.testing.assert_allclose(ledger.detected, expected, rtol=0, atol=1e-12)
