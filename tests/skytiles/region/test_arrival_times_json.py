"""Arrival times as JSON: what is read, what is refused, what comes back."""

import json

import numpy as np
import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from skytiles.errors import AlertError
from skytiles.region.constraint_json import constraint_from_json
from skytiles.region.make_region import make_region
from skytiles.sphere.angles import unit_vectors
from tests.skytiles.region.bursts import arrivals_s, burst_json


def fields_of(names="ABC", **more):
    times_s = arrivals_s(names, unit_vectors(100.0, 20.0))
    return json.loads(json.dumps(burst_json(names, times_s, sigma_s=1e-3, **more)))


def changed(path, value):
    fields = fields_of()
    place = fields
    for step in path[:-1]:
        place = place[step]
    place[path[-1]] = value
    return fields


def test_json_comes_back_as_it_went():
    first = constraint_from_json(fields_of())
    again = constraint_from_json(json.loads(json.dumps(first.to_json())))
    assert again == first
    assert again.to_json()["covariance_s2"] == np.diag([1e-6] * 3).tolist()


@pytest.mark.parametrize(
    ("path", "value", "says"),
    [
        (("stations",), [], "list of 2 to 50"),
        (("stations",), "A B", "list of 2 to 50"),
        (("stations", 0, "latitude_deg"), 91.0, "latitude_deg is 91.0 at station A"),
        (("stations", 0, "latitude_deg"), True, "latitude_deg is True"),
        (("stations", 0, "arrival_s"), "soon", "arrival_s is 'soon'"),
        (("stations", 0, "arrival_s"), float("nan"), "arrival_s is nan"),
        (("stations", 0, "arrival_s"), 10**400, "arrival_s"),
        (("stations", 0, "arrival_s"), 61.0, "s apart"),
        (("stations", 0, "sigma_s"), 0.0, "sigma_s is 0.0"),
        (("stations", 0, "sigma_s"), 1e-6, "from 1e-05"),
        (("stations", 0, "bias_s"), -1.0, "bias_s is -1.0"),
        (("stations", 0, "name"), "", "is called ''"),
        (("stations", 0, "name"), "B", "the same name"),
        (("stations", 0, "altitude"), 3.0, "unknown fields (altitude)"),
        (("reference_time",), "yesterday", "reference_time is 'yesterday'"),
        (("reference_time",), None, "reference_time is None"),
        (("reference_time",), "0001-01-01T00:00:00Z", "1900 to 2500"),
        (("covariance_s2",), [[1e-6] * 3] * 3, "given twice"),
        (("sigma",), 1.0, "unknown fields (sigma)"),
    ],
)
def test_what_makes_no_sense_is_refused_by_name(path, value, says):
    with pytest.raises(AlertError) as refusal:
        constraint_from_json(changed(path, value))
    assert says in str(refusal.value)


@pytest.mark.parametrize(
    ("covariance_s2", "says"),
    [
        ([[1e-6, 0.0], [0.0, 1e-6]], "3 rows of 3"),
        ([[1e-6, 0.0, 0.0], [1e-7, 1e-6, 0.0], [0.0, 0.0, 1e-6]], "symmetric"),
        ([[1e-6, 2e-6, 0.0], [2e-6, 1e-6, 0.0], [0.0, 0.0, 1e-6]], "eigenvalue"),
        ([[1e-6, 1e-6, 1e-6]] * 3, "eigenvalue"),
        ([["x"] * 3] * 3, "symmetric"),
        ("none", "symmetric"),
        ([[float("inf")] * 3] * 3, "symmetric"),
    ],
)
def test_a_covariance_that_is_none_is_refused(covariance_s2, says):
    fields = fields_of()
    for station in fields["stations"]:
        del station["sigma_s"]
    with pytest.raises(AlertError, match="errors of its times are missing"):
        constraint_from_json(fields)
    with pytest.raises(AlertError) as refusal:
        constraint_from_json({**fields, "covariance_s2": covariance_s2})
    assert says in str(refusal.value)


_junk = st.recursive(
    st.none() | st.booleans() | st.integers() | st.floats() | st.text(max_size=5),
    lambda inner: st.lists(inner, max_size=3) | st.dictionaries(st.text(max_size=5), inner),
    max_leaves=4,
)
_PATHS = [
    ("stations",),
    ("stations", 0),
    ("reference_time",),
    ("covariance_s2",),
    *[
        ("stations", 1, name)
        for name in ("name", "longitude_deg", "latitude_deg", "height_m", "arrival_s", "sigma_s")
    ],
]


@given(st.sampled_from(_PATHS), _junk)
@settings(max_examples=150, deadline=None, suppress_health_check=[HealthCheck.too_slow])
def test_junk_anywhere_is_a_named_problem_or_a_region(path, junk):
    try:
        constraint = constraint_from_json(changed(path, junk))
    except AlertError:
        return
    assert make_region([constraint], order=5).n_pixels > 0


def test_a_region_of_inconsistent_times_carries_the_warning():
    fields = fields_of("AB")
    fields["stations"][0]["arrival_s"] += 0.05
    region = make_region([constraint_from_json(fields)])
    assert any("Inconsistent times" in note for note in region.notes)
    assert region.probabilities.sum() + region.outside == pytest.approx(1.0)
