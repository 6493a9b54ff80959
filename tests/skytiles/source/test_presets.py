"""Source models by name and as JSON."""

import json

import numpy as np
import pytest
from scipy.stats import norm

from skytiles.errors import SourceError
from skytiles.source.presets import PRESETS, normal_offsets, steady_model
from skytiles.source.source_json import source_from_json, source_to_json


@pytest.mark.parametrize("sigma_mag", [0.1, 0.5, 1.2, 2.0, 3.7])
def test_offset_grid_is_fine_and_its_weights_are_normal(sigma_mag):
    offsets_mag, weights = normal_offsets(sigma_mag)
    step = np.diff(offsets_mag)
    assert step.max() <= min(0.5, sigma_mag / 2.0) + 1e-12
    assert weights.sum() == pytest.approx(1.0, abs=1e-15)
    assert weights @ offsets_mag == pytest.approx(0.0, abs=1e-12)
    # Sheppard: a cell of width d adds d^2/12 to the variance; the cut at 4 sigma takes little.
    variance = weights @ offsets_mag**2
    assert variance == pytest.approx(sigma_mag**2 + step[0] ** 2 / 12.0, rel=2e-3)
    # Each inner node holds the probability of its cell (scipy.stats.norm as oracle).
    inner = slice(1, -1)
    half = step[0] / 2.0
    cells = norm.cdf(offsets_mag[inner] + half, scale=sigma_mag)
    cells -= norm.cdf(offsets_mag[inner] - half, scale=sigma_mag)
    np.testing.assert_allclose(weights[inner], cells, rtol=0, atol=1e-14)


def test_steady_preset_is_magnitude_twelve_with_a_spread_of_two():
    model = source_from_json("steady")
    assert model.parameters == {"magnitude": 12.0, "sigma_mag": 2.0}
    np.testing.assert_array_equal(model.magnitudes([0.0, 5.0], "V"), [[12.0, 12.0]])
    assert np.diff(model.offsets_mag).max() <= 0.5


def test_no_spread_is_one_offset():
    model = steady_model(magnitude=9.0, sigma_mag=0.0)
    assert model.offsets_mag.tolist() == [0.0]
    assert model.offset_weights.tolist() == [1.0]


@pytest.mark.parametrize("name", sorted(PRESETS))
def test_every_preset_survives_json(name):
    model = source_from_json(name)
    again = source_from_json(json.loads(json.dumps(source_to_json(model))))
    assert again.label == model.label
    np.testing.assert_array_equal(again.node_magnitudes(1.0, "V"), model.node_magnitudes(1.0, "V"))


def test_preset_parameters_can_be_changed():
    model = source_from_json({"preset": "steady", "parameters": {"magnitude": 14.5}})
    assert model.magnitudes([1.0], "V")[0, 0] == 14.5
    assert source_to_json(model)["parameters"] == {"magnitude": 14.5, "sigma_mag": 2.0}


CUSTOM = {
    "label": "two delays",
    "hypotheses": [
        {"weight": 0.7, "first_light_d": 0.8, "m_first": 12, "m_peak": 8, "rise_d": 10},
        {
            "label": "quick",
            "weight": 0.3,
            "first_light_d": 0.003,
            "m_first": 13.0,
            "m_peak": 7.7,
            "rise_d": 18.0,
            "slope_mag_per_d": 0.05,
        },
    ],
    "offsets_mag": [0.0, 0.5],
    "offset_weights": [0.25, 0.75],
}


def test_a_custom_model_survives_json():
    model = source_from_json(CUSTOM)
    again = source_from_json(json.loads(json.dumps(source_to_json(model))))
    assert again.hypotheses == model.hypotheses
    np.testing.assert_array_equal(again.offset_weights, [0.25, 0.75])
    assert model.magnitudes([0.3], "V")[0, 0] == np.inf


@pytest.mark.parametrize(
    "document",
    [
        "no such preset",
        {},
        {"preset": "steady", "parameters": {"brightness": 3.0}},
        {"preset": "steady", "parameters": {"magnitude": "bright"}},
        {"preset": "steady", "parameters": {"magnitude": float("nan")}},
        {"preset": "steady", "parameters": {"sigma_mag": -1.0}},
        {"preset": "steady", "parameters": [1, 2]},
        {"hypotheses": []},
        {"hypotheses": "all"},
        {"hypotheses": [{"weight": 1.0}]},
        CUSTOM | {"offset_weights": [0.5, 0.6]},
        CUSTOM | {"offset_weights": [1.0]},
        CUSTOM | {"offsets_mag": [0.5, 0.0]},
        CUSTOM | {"offsets_mag": 3},
        CUSTOM | {"hypotheses": CUSTOM["hypotheses"][:1]},
        42,
    ],
)
def test_what_makes_no_source_model_is_refused_with_advice(document):
    with pytest.raises(SourceError) as refusal:
        source_from_json(document)
    assert refusal.value.advice


GALACTIC = {
    "label": "a flare",
    "placement": "galactic",
    "parameters": {"spread_mag": 0.5, "centre_extinction_mag": 20.0},
    "hypotheses": [{"weight": 1.0, "first_light_d": 0.0, "m_first": -5, "m_peak": -9, "rise_d": 2}],
}


def test_a_custom_model_may_stand_in_the_galaxy():
    model = source_from_json(GALACTIC)
    again = source_from_json(json.loads(json.dumps(source_to_json(model))))
    assert again.placement == "galactic"
    assert again.parameters == model.parameters
    assert again.parameters["centre_extinction_mag"] == 20.0
    assert again.hypotheses == model.hypotheses


@pytest.mark.parametrize(
    "document",
    [
        CUSTOM | {"colour": "red"},
        CUSTOM | {"placement": "nearby"},
        CUSTOM | {"hypotheses": [CUSTOM["hypotheses"][0] | {"weight": 1.0, "hue": 2}]},
        CUSTOM | {"hypotheses": [CUSTOM["hypotheses"][0] | {"weight": 1.0 / 65}] * 65},
        CUSTOM | {"offsets_mag": list(range(401)), "offset_weights": [1.0 / 401] * 401},
        GALACTIC | {"parameters": {"spread_mag": 9.0}},
        GALACTIC | {"parameters": {"magnitude": 9.0}},
    ],
)
def test_a_custom_model_with_what_nobody_knows_is_refused(document):
    with pytest.raises(SourceError) as refusal:
        source_from_json(document)
    assert refusal.value.allowed
