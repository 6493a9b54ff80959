import json
from pathlib import Path

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from skytiles.errors import AlertError, MapFileError, SkytilesError
from skytiles.region import read_alert as module
from skytiles.region.constraint_json import constraint_from_json
from skytiles.region.constraints import ConeConstraint, EllipseConstraint, MapConstraint
from skytiles.region.read_alert import read_alert, read_alert_file
from skytiles.sphere.calendar import mjd_from_iso

NOW = mjd_from_iso("2027-03-14T06:00:00Z")
CONE = {"type": "cone", "ra_deg": 266.4, "dec_deg": -29.0, "radius_deg": 5.0, "containment": 0.9}
ELLIPSE = {
    "type": "ellipse",
    "ra_deg": 0.0,
    "dec_deg": 90.0,
    "semi_major_deg": 4.0,
    "semi_minor_deg": 1.0,
}
ALERT = {
    "id": "invented",
    "event_time": "2027-03-14T05:06:07Z",
    "kind": "neutrino burst",
    "role": "observation",
    "constraints": [CONE],
}


def read(fields, *, now_mjd=NOW):
    return read_alert(json.dumps(fields).encode(), filename="alert.json", now_mjd=now_mjd)


def test_our_json_is_read():
    alert = read(ALERT)
    assert alert.identifier == "invented"
    assert alert.event_mjd == mjd_from_iso("2027-03-14T05:06:07Z")
    assert (alert.kind, alert.role) == ("neutrino burst", "observation")
    assert alert.constraints == (ConeConstraint(266.4, -29.0, 5.0, containment=0.9),)
    assert alert.notes == ()


def test_an_unstated_containment_is_68_per_cent_and_said():
    alert = read(ALERT | {"constraints": [CONE, ELLIPSE]})
    assert alert.constraints[1] == EllipseConstraint(0.0, 90.0, 4.0, 1.0, containment=0.68)
    assert len(alert.notes) == 1
    assert "68 %" in alert.notes[0]
    assert "ellipse" in alert.notes[0]


@pytest.mark.parametrize(
    "fields", [CONE, ELLIPSE | {"position_angle_deg": 33.0, "systematic_deg": 2.0}]
)
def test_constraints_go_to_json_and_back(fields):
    first = constraint_from_json(fields)
    assert constraint_from_json(json.loads(json.dumps(first.to_json()))) == first


def test_the_example_alerts_are_read(alerts_folder):
    roles = {read_alert_file(path, NOW).role for path in alerts_folder.glob("*.json")}
    assert roles == {"observation", "test"}


def test_a_map_file_is_an_alert(example_bytes, tmp_path):
    path = tmp_path / "invented.fits"
    path.write_bytes(example_bytes)
    alert = read_alert_file(path, NOW)
    assert alert.identifier == "invented-7"
    assert alert.event_mjd == pytest.approx(mjd_from_iso("2027-03-14T05:06:07"))
    assert isinstance(alert.constraints[0], MapConstraint)
    assert alert.constraints[0].to_json() == {"type": "map", "file": "invented.fits"}


def test_a_map_without_a_date_takes_the_time_of_reading_and_says_so(flat_bytes):
    data = flat_bytes(range(48), ordering="RING")
    alert = read_alert(data, filename="my.map.fits", now_mjd=NOW)
    assert (alert.identifier, alert.event_mjd) == ("my", NOW)
    assert "time of reading" in alert.notes[-1]


def test_json_may_name_a_map_beside_it(example_bytes, tmp_path):
    (tmp_path / "sky.fits").write_bytes(example_bytes)
    path = tmp_path / "alert.json"
    path.write_text(
        json.dumps(ALERT | {"constraints": [{"type": "map", "file": "sky.fits"}, CONE]})
    )
    alert = read_alert_file(path, NOW)
    assert [constraint.kind for constraint in alert.constraints] == ["map", "cone"]


def test_one_hour_of_clock_error_is_forgiven():
    assert read(ALERT | {"event_time": "2027-03-14T06:59:00Z"})
    assert read(ALERT | {"event_time": "2127-03-14T06:59:00Z"}, now_mjd=None)
    with pytest.raises(AlertError, match="in the future"):
        read(ALERT | {"event_time": "2027-03-14T07:01:00Z"})


def test_a_zone_in_the_event_time_is_honoured():
    assert read(ALERT | {"event_time": "2027-03-14T07:06:07+02:00"}) == read(ALERT)


REFUSED = {
    "list": [],
    "text": "alert",
    "no time": {"constraints": [CONE]},
    "no constraints": {"event_time": "2027-03-14T05:06:07Z"},
    "empty constraints": ALERT | {"constraints": []},
    "too many": ALERT | {"constraints": [CONE] * 21},
    "constraint no object": ALERT | {"constraints": ["cone"]},
    "unknown field": ALERT | {"urgency": 1},
    "unknown type": ALERT | {"constraints": [{"type": "ring"}]},
    "type no text": ALERT | {"constraints": [{"type": ["cone"]}]},
    "unknown constraint field": ALERT | {"constraints": [CONE | {"radius": 1}]},
    "bad date": ALERT | {"event_time": "yesterday"},
    "date a number": ALERT | {"event_time": 61113.2},
    "year 1": ALERT | {"event_time": "0001-01-01T00:00:00Z"},
    "future": ALERT | {"event_time": "2028-01-01T00:00:00Z"},
    "role": ALERT | {"role": "prediction"},
    "id": ALERT | {"id": 7},
    "dec": ALERT | {"constraints": [CONE | {"dec_deg": -91.0}]},
    "ra": ALERT | {"constraints": [CONE | {"ra_deg": 400.0}]},
    "ra text": ALERT | {"constraints": [CONE | {"ra_deg": "266.4"}]},
    "ra true": ALERT | {"constraints": [CONE | {"ra_deg": True}]},
    "radius": ALERT | {"constraints": [CONE | {"radius_deg": 0.0}]},
    "containment": ALERT | {"constraints": [CONE | {"containment": 1.0}]},
    "per cent": ALERT | {"constraints": [CONE | {"containment": 90}]},
    "axes exchanged": ALERT | {"constraints": [ELLIPSE | {"semi_minor_deg": 9.0}]},
    "map alone": ALERT | {"constraints": [{"type": "map", "file": "sky.fits"}]},
    "map path": ALERT | {"constraints": [{"type": "map", "file": "../sky.fits"}]},
}


@pytest.mark.parametrize("case", REFUSED)
def test_bad_alerts_are_refused_with_advice(case):
    with pytest.raises(AlertError) as refusal:
        read(REFUSED[case])
    assert refusal.value.code == "bad-alert"
    assert refusal.value.advice


@pytest.mark.parametrize("name", ["../sky.fits", "/etc/sky.fits", "..\\sky.fits", "", 7])
def test_a_map_is_named_without_a_path(name, example_bytes):
    alert = json.dumps(ALERT | {"constraints": [{"type": "map", "file": name}]}).encode()
    with pytest.raises(AlertError, match="plain name"):
        read_alert(alert, filename="a", now_mjd=NOW, open_map=lambda _name: example_bytes)


def test_an_unknown_type_is_told_what_is_allowed():
    with pytest.raises(AlertError, match=r'"cone", .*"ellipse", "map"'):
        read(REFUSED["unknown type"])


@pytest.mark.parametrize(
    "data",
    [b"", b"{", b"\xff\xfe", b"[" * 100_000, b'{"event_time": NaN}', b"<voe:VOEvent/>", b"SIMPLE"],
)
def test_what_is_neither_a_map_nor_json_is_refused(data):
    with pytest.raises(AlertError):
        read_alert(data, filename="alert", now_mjd=NOW)


def test_a_large_file_that_is_no_map_is_refused():
    with pytest.raises(AlertError, match="at most"):
        read_alert(b" " * 1_000_001, filename="big.json", now_mjd=NOW)


def test_a_file_above_the_limit_is_refused_unread(tmp_path, monkeypatch):
    monkeypatch.setattr(Path, "read_bytes", None)
    path = tmp_path / "large.fits"
    with path.open("wb") as file:
        file.truncate(module.MAX_MAP_BYTES + 1)  # sparse: takes no room on the disk
    with pytest.raises(MapFileError, match="2 GB"):
        read_alert_file(path, NOW)


def test_a_missing_file_is_refused(tmp_path):
    with pytest.raises(AlertError, match="cannot be read"):
        read_alert_file(tmp_path / "none.json", NOW)


JSON = st.recursive(
    st.none() | st.booleans() | st.floats() | st.integers() | st.text(max_size=8),
    lambda inner: (
        st.lists(inner, max_size=3)
        | st.dictionaries(
            st.sampled_from(["type", "ra_deg", "dec_deg", "file", "x"]), inner, max_size=4
        )
    ),
    max_leaves=8,
)


@settings(deadline=None, suppress_health_check=[HealthCheck.too_slow])
@given(st.dictionaries(st.sampled_from(list(ALERT)), JSON, max_size=5))
def test_any_json_gives_an_alert_or_a_clear_refusal(fields):
    try:
        outcome = read(ALERT | fields).identifier
    except SkytilesError as refusal:
        outcome = refusal.advice
    assert outcome
