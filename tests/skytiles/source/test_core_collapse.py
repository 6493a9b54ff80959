"""Core collapse in the Galaxy: the table of classes, delays, and what can be changed."""

import numpy as np
import pytest
from scipy.stats import norm

from skytiles.errors import SourceError
from skytiles.source.core_collapse import CLASSES, equal_probability_delays_d
from skytiles.source.presets import PRESETS

# The table of DEVELOPERS.md: share, median delay in hours, its factor, number of delays,
# absolute V at first light and at the peak, rise in days, decline in magnitudes per day.
TABLE = {
    "red supergiant (II-P, II-L, IIn)": (0.61, 20.0, 1.8, 12, -13.0, -17.0, 10.0, 0.01),
    "partly stripped (IIb)": (0.11, 5.0, 2.5, 6, -13.0, -17.0, 18.0, 0.05),
    "blue supergiant": (0.02, 2.5, 1.5, 3, -12.5, -15.5, 80.0, 0.01),
    "stripped (Ib, Ic)": (0.26, 5.0 / 60.0, 3.0, 3, -12.0, -17.3, 18.0, 0.05),
}


def of_class(model, label):
    return [one for one in model.hypotheses if one.label == label]


@pytest.mark.parametrize("label", TABLE)
def test_each_class_is_as_the_table_says(label):
    weight, median_h, factor, n_nodes, first, peak, rise, slope = TABLE[label]
    members = of_class(PRESETS["core collapse"](), label)
    assert len(members) == n_nodes
    assert sum(one.weight for one in members) == pytest.approx(weight)
    delays_h = np.array([24.0 * one.first_light_d for one in members])
    assert np.exp(np.log(delays_h).mean()) == pytest.approx(median_h)
    # Each delay is the middle of its share of the log-normal (scipy as oracle).
    shares = norm.cdf(np.log(delays_h / median_h) / np.log(factor))
    assert shares == pytest.approx((np.arange(n_nodes) + 0.5) / n_nodes)
    shapes = {(m.m_first, m.m_peak, m.rise_d, m.slope_mag_per_d) for m in members}
    assert shapes == {(first, peak, rise, slope)}


def test_delays_lie_where_published_ones_do(authority):
    row = authority["sbo_delay"]
    model = PRESETS["core collapse"]()
    for short, (shortest, longest) in zip(
        row["inputs"]["progenitors"], row["expected"], strict=True
    ):
        middle = np.median([24.0 * one.first_light_d for one in of_class(model, CLASSES[short])])
        assert shortest / row["tolerance"] < middle < longest * row["tolerance"]


def test_before_its_delay_a_star_is_dark_then_it_rises_to_its_peak():
    model = PRESETS["core collapse"]()
    last = max(of_class(model, CLASSES["rsg"]), key=lambda one: one.first_light_d)
    number = model.hypotheses.index(last)
    shining = model.magnitudes(last.first_light_d + np.array([-1e-6, 0.0, 0.01, 10.0, 30.0]), "V")
    np.testing.assert_allclose(shining[number], [np.inf, -13.0, -13.0, -17.0, -16.8], atol=1e-9)


def test_half_way_up_in_log_time_is_half_way_up_in_magnitudes():
    model = PRESETS["core collapse"]()
    one = of_class(model, CLASSES["rsg"])[0]
    middle_d = np.sqrt(0.01 * 10.0)
    shining = model.magnitudes([one.first_light_d + middle_d], "V")[model.hypotheses.index(one)]
    assert shining[0] == pytest.approx(-15.0)


def test_no_light_takes_its_share_from_all():
    model = PRESETS["core collapse"](no_light_weight=0.2)
    assert model.weights.sum() == pytest.approx(1.0)
    dark = of_class(model, "no light")
    assert [one.weight for one in dark] == [0.2]
    assert np.isinf(model.magnitudes([1000.0], "K")[-1, 0])
    rsg = sum(one.weight for one in of_class(model, CLASSES["rsg"]))
    assert rsg == pytest.approx(0.8 * 0.61)
    assert not of_class(PRESETS["core collapse"](), "no light")


def test_shares_that_do_not_sum_to_one_are_divided_by_their_sum():
    model = PRESETS["core collapse"](rsg_weight=0.0, stripped_weight=0.11, bsg_weight=0.0)
    assert model.weights.sum() == pytest.approx(1.0)
    assert sum(one.weight for one in of_class(model, CLASSES["stripped"])) == pytest.approx(0.5)


def test_delays_of_no_width_are_one_delay():
    assert equal_probability_delays_d(24.0, 1.0, 3) == pytest.approx([1.0, 1.0, 1.0])


@pytest.mark.parametrize(
    "changed",
    [
        dict.fromkeys(("rsg_weight", "stripped_part_weight", "bsg_weight", "stripped_weight"), 0.0),
        {"rsg_delay_h": 0.0},
        {"rsg_delay_factor": 0.5},
        {"rsg_weight": -0.1},
        {"spread_mag": float("nan")},
        {"no_light_weight": 1.0},
        {"rsg_delay_nodes": 1000},
        {"colour": 1.0},
    ],
)
def test_numbers_that_make_no_sense_are_refused_with_advice(changed):
    with pytest.raises(SourceError) as refusal:
        PRESETS["core collapse"](**changed)
    assert refusal.value.advice


def test_every_assumption_has_label_source_and_a_value_in_its_bounds():
    for preset in PRESETS.values():
        names = [one.name for one in preset.assumptions]
        assert len(names) == len(set(names))
        for one in preset.assumptions:
            assert one.label
            assert one.source
            assert one.lowest <= one.value <= one.highest
        assert set(preset().parameters) == set(names)
