"""VOEvent 2.0 and 2.1 as the standard has them."""

import socket

import pytest

from skytiles.errors import AlertError, SkytilesError
from skytiles.region.constraints import ConeConstraint, EllipseConstraint
from skytiles.region.read_alert import read_alert, read_alert_file
from skytiles.region.read_voevent import read_voevent
from skytiles.region.voevent_packet import VERSIONS, read_voevent_packet
from skytiles.region.voevent_place import ASSUMED_RADIUS_DEG, SYSTEMS
from skytiles.sphere.calendar import mjd_from_iso
from tests.skytiles.region.voevent_words import packet, where_when

NOW = mjd_from_iso("2027-03-14T06:00:00Z")


def read(*parts, **root):
    return read_voevent(packet(*parts, **root), now_mjd=NOW)


def refused(*parts, **root):
    with pytest.raises(AlertError) as refusal:
        read(*parts, **root)
    assert refusal.value.advice
    return str(refusal.value)


def test_a_message_becomes_an_alert():
    alert = read(where_when(), "<Why><Name>neutrino burst</Name></Why>")
    assert alert.identifier == "ivo://example.invented/a#1"
    assert alert.event_mjd == mjd_from_iso("2027-03-14T05:06:07Z")
    assert alert.kind == "neutrino burst"
    assert alert.constraints == (ConeConstraint(266.4, -29.0, 5.0, containment=0.68),)
    assert any("68 %" in note for note in alert.notes)


def test_read_alert_tells_xml_by_how_it_begins():
    for begin in (b"", b"\xef\xbb\xbf", b"  \n"):
        data = packet(where_when())
        data = data.removeprefix(b'<?xml version="1.0"?>') if begin.strip() == b"" else data
        assert read_alert(begin + data, filename="a.xml", now_mjd=NOW).has_direction
    wide = packet(where_when()).decode().replace('"1.0"', '"1.0" encoding="UTF-16"')
    assert read_alert(wide.encode("utf-16"), filename="a.xml", now_mjd=NOW).has_direction


# The root.


def test_versions_namespaces_and_roles_are_those_of_the_standard(authority):
    row = authority["vo_root"]["expected"]
    assert list(VERSIONS) == row["versions"]
    for version, namespace in zip(row["versions"], row["namespaces"], strict=True):
        assert read(version=version, namespace=namespace).role == row["default_role"]
    assert [read(role=role).role for role in row["roles"]] == row["roles"]


@pytest.mark.parametrize(
    "root",
    [
        {"ivorn": ""},
        {"ivorn": " "},
        {"version": "1.1"},
        {"version": ""},
        {"version": "2.1", "namespace": "http://www.ivoa.net/xml/VOEvent/v2.0"},
        {"namespace": "http://example.invented/other"},
        {"role": "rumour"},
        {"role": ""},
    ],
)
def test_another_root_is_refused(root):
    assert refused(where_when(), **root)


def test_another_document_is_refused():
    with pytest.raises(AlertError, match="root is 'html'"):
        read_alert(b"<html><body/></html>", filename="page", now_mjd=NOW)


# Its parts.


def test_parts_come_in_any_sequence_and_all_may_be_missing(authority):
    parts = [f"<{name}/>" for name in authority["vo_children"]["expected"]]
    for sequence in (parts, parts[::-1], []):
        assert read_voevent_packet(packet(*sequence)).version == "2.0"
    assert read(where_when()).has_direction  # no Who


@pytest.mark.parametrize("count", [2, 3])
def test_no_part_comes_twice(authority, count):
    for name in authority["vo_children"]["expected"]:
        assert f"{name} more than once" in refused(*[f"<{name}/>"] * count)


def test_a_part_of_another_namespace_is_not_ours():
    foreign = '<x:WhereWhen xmlns:x="http://example.invented/x"/>'
    assert read(foreign, where_when()).has_direction


# Where.


def test_every_coordinate_system_of_the_standard_is_read(authority):
    assert sorted(SYSTEMS) == sorted(authority["vo_systems"]["expected"])
    for system in SYSTEMS:
        assert read(where_when(system=system)).has_direction


@pytest.mark.parametrize("system", ["UTC-FK4-TOPO", "UTC-GEOD-TOPO", "utc-icrs-topo", "nonsense"])
def test_another_coordinate_system_is_refused_by_name(system):
    assert system in refused(where_when(system=system))


def test_without_a_system_the_advised_one_is_taken_and_said():
    alert = read(where_when(system=""))
    assert alert.event_mjd == mjd_from_iso("2027-03-14T05:06:07Z")
    assert any("UTC-ICRS-TOPO" in note for note in alert.notes)


def test_a_system_may_be_spelled_out_in_frames():
    frames = (
        "<AstroCoordSystem><TimeFrame><TimeScale>TT</TimeScale><GEOCENTER/></TimeFrame>"
        "<SpaceFrame><ICRS/><GEOCENTER/></SpaceFrame></AstroCoordSystem>"
    )
    words = where_when(system="").replace('<AstroCoordSystem id=""/>', frames)
    moved = read(words, version="2.1").event_mjd - mjd_from_iso("2027-03-14T05:06:07Z")
    assert moved * 86400.0 == pytest.approx(-69.184, abs=1e-4)


def test_a_position_may_lack_its_error_in_2_1_only(authority):
    allowed = authority["vo_diff"]["expected"]
    for version in VERSIONS:
        if version in allowed:
            alert = read(where_when(error=""), version=version)
            assert alert.constraints[0].radius_deg == ASSUMED_RADIUS_DEG
            assert any("no error of its position" in note for note in alert.notes)
        else:
            assert "Error2Radius" in refused(where_when(error=""), version=version)


def test_an_error_along_each_axis_is_an_ellipse():
    error = "<Error2><C1>{}</C1><C2>{}</C2></Error2>"
    wide = read(where_when(error=error.format(3.0, 1.0)), version="2.1").constraints[0]
    tall = read(where_when(error=error.format(1.0, 3.0)), version="2.1").constraints[0]
    even = read(where_when(error=error.format(2.0, 2.0)), version="2.1").constraints[0]
    assert wide == EllipseConstraint(266.4, -29.0, 3.0, 1.0, position_angle_deg=90.0)
    assert tall == EllipseConstraint(266.4, -29.0, 3.0, 1.0, position_angle_deg=0.0)
    assert even == ConeConstraint(266.4, -29.0, 2.0)


def test_coordinates_may_be_in_radians_or_exchanged():
    words = where_when(ra=0.5, dec=-0.25, error="<Error2Radius>0.1</Error2Radius>")
    cone = read(words.replace('unit="deg"', 'unit="rad"')).constraints[0]
    assert (cone.ra_deg, cone.dec_deg) == pytest.approx((28.6478898, -14.3239449))
    assert cone.radius_deg == pytest.approx(5.7295780)
    exchanged = where_when(ra=-29.0, dec=266.4).replace("Name1>RA", "Name1>Dec")
    exchanged = exchanged.replace("Name2>Dec", "Name2>RA")
    assert read(exchanged).constraints == read(where_when()).constraints


@pytest.mark.parametrize(
    ("old", "new"),
    [
        ("<C1>266.4</C1>", "<C1>four</C1>"),
        ("<C1>266.4</C1>", "<C1/>"),
        ("<C1>266.4</C1>", ""),
        ("<C1>266.4</C1>", "<C1>nan</C1>"),
        ("<C1>266.4</C1>", "<C1>400</C1>"),
        ("<C2>-29.0</C2>", "<C2>-91</C2>"),
        ("<C2>-29.0</C2>", "<C2>-inf</C2>"),
        (">5.0<", ">-5.0<"),
        (">5.0<", ">95<"),
        (">5.0<", ">1e400<"),
        ('unit="deg"', 'unit="hours"'),
        ("Name1>RA", "Name1>GLON"),
        ("2027-03-14T05:06:07", "this morning"),
        ("2027-03-14T05:06:07", "2027-02-30T00:00:00"),
    ],
)
def test_bad_places_and_times_are_refused_by_name(old, new):
    words = where_when()
    assert old in words
    assert refused(words.replace(old, new))


def test_without_a_direction_there_is_no_constraint():
    named = "<PositionName>an invented galaxy</PositionName>"
    assert not read().has_direction
    alert = read(where_when(place=named), version="2.1")
    assert alert.constraints == ()
    assert any("an invented galaxy" in note for note in alert.notes)


# When.


def test_the_start_of_an_interval_is_the_event():
    interval = (
        "<TimeInterval><ISOTimeStart>2027-03-14T05:00:00</ISOTimeStart>"
        "<ISOTimeStop>2027-03-14T05:30:00</ISOTimeStop></TimeInterval>"
    )
    words = where_when().replace(
        "<TimeInstant><ISOTime>2027-03-14T05:06:07</ISOTime></TimeInstant>", interval
    )
    assert read(words, version="2.1").event_mjd == mjd_from_iso("2027-03-14T05:00:00Z")


def test_a_message_without_a_time_takes_that_of_writing_and_says_so():
    written = read("<Who><Date>2027-03-14T05:30:00</Date></Who>")
    assert written.event_mjd == mjd_from_iso("2027-03-14T05:30:00Z")
    assert any("date of writing" in note for note in written.notes)
    assert (written.is_dated, read(where_when()).is_dated) == (False, True)
    assert read().event_mjd == NOW
    with pytest.raises(AlertError, match="no time"):
        read_voevent(packet(), now_mjd=None)


def test_only_a_prediction_may_lie_ahead():
    words = where_when(time="2027-04-01T00:00:00")
    ahead = packet(words, role="prediction")
    assert read_alert(ahead, filename="a", now_mjd=NOW).role == "prediction"
    with pytest.raises(AlertError, match="in the future"):
        read_alert(packet(words), filename="a", now_mjd=NOW)


# What it cites and says.


def citing(cite, ivorn="ivo://example.invented/a#0"):
    return f'<Citations><EventIVORN cite="{cite}">{ivorn}</EventIVORN></Citations>'


def test_citations_are_kept(authority):
    for cite in authority["vo_role"]["expected"]:
        alert = read(where_when(), citing(cite))
        assert [(c.identifier, c.cite) for c in alert.citations] == [
            ("ivo://example.invented/a#0", cite)
        ]
    assert read(citing("retraction")).retracted == ("ivo://example.invented/a#0",)
    assert read(citing("supersedes")).superseded == ("ivo://example.invented/a#0",)


@pytest.mark.parametrize("words", [citing(""), citing("Retraction"), citing("followup", "")])
def test_a_citation_has_no_default(words):
    assert "cites" in refused(words)
    assert "cites" in refused("<Citations><EventIVORN>ivo://a/b#c</EventIVORN></Citations>")


@pytest.mark.parametrize(
    ("given", "kept"), [("0", 0.0), ("1.0", 1.0), ("0.25", 0.25), ("", None), ("1.01", None)]
)
def test_importance_is_from_0_to_1(given, kept):
    alert = read(f'<Why importance="{given}"/>')
    assert alert.importance == kept
    assert any("importance" in note for note in alert.notes) == (given == "1.01")


@pytest.mark.parametrize("given", ["nan", "inf", "-0.1", "high"])
def test_a_probability_outside_0_to_1_is_said_to_be_none(given):
    alert = read(f'<Why importance="{given}"><Inference probability="{given}"/></Why>')
    assert alert.importance is None
    assert sum("no number from 0 to 1" in note for note in alert.notes) == 2


def test_parameters_become_notes():
    what = '<What><Group name="g"><Param name="snr" value="12.5" unit="1"/></Group></What>'
    assert "What, snr: 12.5 1" in read(what).notes


def test_many_parameters_are_cut_short_and_said():
    what = "<What>" + '<Param name="x" value="y"/>' * 5000 + "</What>"
    notes = read(what).notes
    assert len(notes) < 60
    assert "more statements" in notes[-1]


def test_links_are_kept_as_text_and_never_fetched(monkeypatch):
    def refuse(*_args, **_kwargs):
        raise AssertionError("a link was followed")

    monkeypatch.setattr(socket.socket, "connect", refuse)
    monkeypatch.setattr(socket, "getaddrinfo", refuse)
    alert = read(
        where_when(),
        '<What><Param name="map" value="http://127.0.0.1:9/map.fits"/>'
        '<Param name="page" dataType="uri" value="notes/today"/><Param name="n" value="3"/></What>',
        '<Reference uri="file:///etc/passwd" name="not opened"/>',
    )
    assert [(link.name, link.uri) for link in alert.links] == [
        ("map", "http://127.0.0.1:9/map.fits"),
        ("page", "notes/today"),
        ("not opened", "file:///etc/passwd"),
    ]


def test_the_examples_are_read(alerts_folder):
    found = {path.name: read_alert_file(path, 61500.0) for path in alerts_folder.glob("*.xml")}
    assert found["example-voevent-test.xml"].role == "test"
    assert found["example-voevent-retraction.xml"].retracted
    first = found["example-voevent-2.0.xml"]
    # 05:07:16.184 TT is 69.184 s after 05:06:07 UTC.
    assert first.event_mjd == pytest.approx(mjd_from_iso("2026-03-14T05:06:07Z"), abs=1e-8)
    assert isinstance(found["example-voevent-2.1.xml"].constraints[0], EllipseConstraint)


def test_every_refusal_is_a_named_problem():
    with pytest.raises(SkytilesError) as refusal:
        read_alert(packet(role="rumour"), filename="night.xml", now_mjd=NOW)
    assert str(refusal.value).startswith("night.xml cannot be used")
