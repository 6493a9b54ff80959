"""The schema of our alert form and its reader: every example, and what both must refuse."""

import json

import jsonschema
import pytest

from skytiles.errors import SkytilesError
from skytiles.region.constraints import CONSTRAINT_KINDS
from skytiles.region.read_alert import read_alert, read_alert_file

NOW = 61500.0
CONE = {"type": "cone", "ra_deg": 10.0, "dec_deg": 5.0, "radius_deg": 2.0}
ALERT = {"event_time": "2027-03-14T05:06:07Z", "constraints": [CONE]}
TARGET = {"ra_deg": 1.0, "dec_deg": 2.0}
CORNERS = [[1.0, 2.0], [3.0, 2.0], [2.0, 4.0]]


@pytest.fixture(scope="module")
def judge(alerts_folder):
    schema = json.loads((alerts_folder.parent / "alert.schema.json").read_text())
    jsonschema.Draft202012Validator.check_schema(schema)
    return jsonschema.Draft202012Validator(schema)


def examples(folder):
    return sorted(folder.glob("*.json"))


def with_constraint(**fields):
    return ALERT | {"constraints": [fields]}


def read(fields):
    return read_alert(json.dumps(fields).encode(), filename="alert.json", now_mjd=None)


def test_every_example_follows_the_schema(judge, alerts_folder):
    faults = {
        path.name: judge.is_valid(json.loads(path.read_text())) for path in examples(alerts_folder)
    }
    assert len(faults) >= 7
    assert all(faults.values()), faults


def test_every_example_is_read(alerts_folder):
    kinds = {
        constraint.kind
        for path in sorted(alerts_folder.iterdir())
        for constraint in read_alert_file(path, NOW).constraints
    }
    assert kinds >= {"cone", "ellipse", "moc", "polygon", "targets", "distance"}


def test_the_schema_names_every_kind_of_constraint(judge):
    named = {
        shape["properties"]["type"]["const"]
        for shape in judge.schema["$defs"].values()
        if "const" in shape.get("properties", {}).get("type", {})
    }
    assert named == set(CONSTRAINT_KINDS)


def test_what_constraints_write_of_themselves_follows_the_schema(judge, alerts_folder):
    for path in examples(alerts_folder):
        alert = read_alert_file(path, NOW)
        written = json.loads(json.dumps([c.to_json() for c in alert.constraints]))
        again = ALERT | {"constraints": written, "citations": [{"id": "x", "cite": "followup"}]}
        assert judge.is_valid(again), path.name
        assert [c.to_json() for c in read(again).constraints] == written


REFUSED = {
    "no constraint and no citation": ALERT | {"constraints": []},
    "unknown field": ALERT | {"urgency": 1},
    "no time": {"constraints": [CONE]},
    "importance above one": ALERT | {"importance": 1.5},
    "unknown cite": ALERT | {"citations": [{"id": "x", "cite": "repeats"}]},
    "no cite": ALERT | {"citations": [{"id": "x"}]},
    "link without an address": ALERT | {"links": [{"name": "x"}]},
    "link no text": ALERT | {"links": [{"uri": 7}]},
    "links no list": ALERT | {"links": "x"},
    "moc of nothing": with_constraint(type="moc"),
    "moc twice": with_constraint(type="moc", moc="1/2", file="a.fits"),
    "moc a number": with_constraint(type="moc", moc=7),
    "moc with a path": with_constraint(type="moc", file="../a.fits"),
    "moc of a negative cell": with_constraint(type="moc", moc={"1": [-1]}),
    "moc of half a cell": with_constraint(type="moc", moc={"1": [1.5]}),
    "moc of true": with_constraint(type="moc", moc={"1": [True]}),
    "moc with a name": with_constraint(type="moc", moc={"one": [1]}),
    "two corners": with_constraint(type="polygon", corners_deg=CORNERS[:2]),
    "a corner of three": with_constraint(type="polygon", corners_deg=[*CORNERS, [1.0, 2.0, 3.0]]),
    "a corner off the sky": with_constraint(type="polygon", corners_deg=[*CORNERS, [1.0, 91.0]]),
    "area containment": with_constraint(type="polygon", corners_deg=CORNERS, containment=1.0),
    "no targets": with_constraint(type="targets", targets=[]),
    "target with a colour": with_constraint(type="targets", targets=[TARGET | {"colour": "red"}]),
    "target of no weight": with_constraint(type="targets", targets=[TARGET | {"weight": 0.0}]),
    "completeness": with_constraint(type="targets", targets=[TARGET], completeness=1.1),
    "distance zero": with_constraint(type="distance", median_mpc=0.0, factor=2.0),
    "distance factor one": with_constraint(type="distance", median_mpc=40.0, factor=1.0),
    "distance factor missing": with_constraint(type="distance", median_mpc=40.0),
}


@pytest.mark.parametrize("case", REFUSED)
def test_schema_and_reader_refuse_the_same(judge, case):
    assert not judge.is_valid(REFUSED[case])
    with pytest.raises(SkytilesError) as refusal:
        read(REFUSED[case])
    assert refusal.value.advice


READER_ONLY = {
    "sides that cross": with_constraint(
        type="polygon", corners_deg=[[0.0, 0.0], [10.0, 10.0], [10.0, 0.0], [0.0, 10.0]]
    ),
    "corners that are one": with_constraint(type="polygon", corners_deg=[[1.0, 1.0]] * 3),
    "half the sky": with_constraint(
        type="polygon", corners_deg=[[0.0, 0.0], [90.0, 0.0], [180.0, 0.0], [270.0, 0.0]]
    ),
    "cells beyond the sky": with_constraint(type="moc", moc={"1": [48]}),
    "words in a moc": with_constraint(type="moc", moc="here and there"),
    "a moc too deep": with_constraint(type="moc", moc="30/1"),
    "a moc of nothing": with_constraint(type="moc", moc="8/"),
}


@pytest.mark.parametrize("case", READER_ONLY)
def test_the_reader_refuses_what_a_schema_cannot_tell(case):
    with pytest.raises(SkytilesError) as refusal:
        read(READER_ONLY[case])
    assert refusal.value.advice


def test_a_distance_alone_gives_no_region_and_a_retraction_names_what_it_takes_back(alerts_folder):
    assert not read(with_constraint(type="distance", median_mpc=40.0, factor=2.0)).has_direction
    alert = read_alert_file(alerts_folder / "example-retraction.json", NOW)
    assert (alert.retracted, alert.superseded) == (("invented-cone",), ())
    assert alert.importance == 0.1
    assert alert.links[0].uri.startswith("https://")
