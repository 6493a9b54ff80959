"""The fifteen worked cases of the ledger's definition (fixtures/ledger-cases.json)."""

import json
from pathlib import Path

import numpy as np
import pytest

from skytiles.depth.limit_kinds import default_s_mag, effective_limit_mag, m50_mag
from skytiles.ledger.ledger import Ledger
from skytiles.ledger.ledger_frame import LedgerFrame
from skytiles.source.hypothesis import Hypothesis
from skytiles.source.source_model import SourceModel

FIXTURE = Path(__file__).parents[3] / "fixtures" / "ledger-cases.json"
CASES = json.loads(FIXTURE.read_text())["cases"]
# The cases' words for the kinds of limit, in ours.
KINDS = {
    "5sigma": "5 sigma",
    "3sigma": "3 sigma",
    "90%": "90 %",
    "faintest-star": "faintest star seen",
    "estimated": "estimate",
}


def source_of(case):
    return SourceModel(
        hypotheses=tuple(
            Hypothesis(
                label=str(position),
                weight=row["w"],
                first_light_d=row["first_light_d"],
                m_first=row["m_first"],
                m_peak=row["m_peak"],
                rise_d=row["rise_d"],
                slope_mag_per_d=row["slope"],
            )
            for position, row in enumerate(case["hypotheses"])
        ),
        offsets_mag=np.array(case["b"]),
        offset_weights=np.array(case["q"][0]),
        label="case",
    )


def empty_ledger(case):
    return Ledger(
        case["p"],
        case["outside"],
        undetectable=case["u"],
        source_model=source_of(case),
        offset_weights=case["q"],
    )


def frame_of(key, row):
    # Every case states s = 0.2; "faintest star seen" carries its own 0.4.
    m_eff, s = None, default_s_mag(KINDS[row["kind"]])
    if row["limit"] is not None:
        m50 = m50_mag(row["limit"], KINDS[row["kind"]], s=s)
        m_eff = effective_limit_mag(m50, row["reference"])
    return LedgerFrame(
        key=key,
        t_d=row["t_d"],
        instrument=row["instrument"],
        ra_deg=row["ra"],
        dec_deg=row["dec"],
        field_deg=row["field_deg"],
        is_examined=row["examined"],
        completeness=row["c"],
        m_eff=m_eff,
        s=s,
        saturation_mag=row["m_sat"],
        masks_saturated=row["masks"],
    )


def covers_of(row):
    indices = [int(pixel) for pixel in row["covers"]]
    return np.array(indices, dtype=np.int64), np.array(list(row["covers"].values()))


def assert_as_expected(ledger, expect):
    np.testing.assert_allclose(ledger.detected, expect["D"], rtol=0, atol=1e-9)
    assert ledger.imaged == pytest.approx(expect["imaged"], abs=1e-9)
    assert ledger.searched == pytest.approx(expect["searched"], abs=1e-9)
    np.testing.assert_allclose(ledger.residual, expect["residual"], rtol=0, atol=1e-9)
    assert ledger.residual_outside == pytest.approx(expect["residual_outside"], abs=1e-9)
    assert ledger.n_looks == expect["n_looks"]


def test_there_are_fifteen_cases():
    assert len(CASES) == 15


@pytest.mark.parametrize("case", CASES, ids=[case["name"] for case in CASES])
@pytest.mark.parametrize("order", [1, -1], ids=["as listed", "backwards"])
def test_ledger_gives_the_worked_numbers(case, order):
    ledger = empty_ledger(case["case"])
    for key, row in list(enumerate(case["case"]["frames"]))[::order]:
        ledger.add(frame_of(key, row), *covers_of(row))
    assert_as_expected(ledger, case["expect"])


@pytest.mark.parametrize("case", CASES, ids=[case["name"] for case in CASES])
def test_withdrawing_every_frame_leaves_nothing_searched(case):
    ledger = empty_ledger(case["case"])
    for key, row in enumerate(case["case"]["frames"]):
        ledger.add(frame_of(key, row), *covers_of(row))
    for key in range(len(case["case"]["frames"])):
        ledger.withdraw(key)
    assert ledger.searched == 0.0
    assert ledger.imaged == 0.0
    assert ledger.n_looks == 0
