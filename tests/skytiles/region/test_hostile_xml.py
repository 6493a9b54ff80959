"""XML that means harm is refused in words, at once and without a look outside."""

import socket
import time

import pytest

from skytiles.errors import AlertError
from skytiles.region.read_alert import read_alert
from skytiles.region.xml_tree import MAX_XML_BYTES, read_xml
from tests.skytiles.region.voevent_words import packet, where_when

NOW = 61500.0
LAUGHS = "".join(f'<!ENTITY l{n} "{f"&l{n - 1};" * 10}">' for n in range(1, 10))
HOSTILE = {
    "billion laughs": f'<!DOCTYPE v [<!ENTITY l0 "ha">{LAUGHS}]><v>&l9;</v>',
    "quadratic": f'<!DOCTYPE v [<!ENTITY a "{"a" * 50_000}">]><v>{"&a;" * 5000}</v>',
    "external entity": '<!DOCTYPE v [<!ENTITY x SYSTEM "file:///etc/passwd">]><v>&x;</v>',
    "external address": '<!DOCTYPE v [<!ENTITY x SYSTEM "http://127.0.0.1:9/">]><v>&x;</v>',
    "parameter entity": '<!DOCTYPE v [<!ENTITY % x SYSTEM "http://127.0.0.1:9/"> %x;]><v/>',
    "external type": '<!DOCTYPE v SYSTEM "http://127.0.0.1:9/v.dtd"><v/>',
    "public type": '<!DOCTYPE v PUBLIC "-//x//y" "http://127.0.0.1:9/v.dtd"><v/>',
    "bare type": "<!DOCTYPE v><v/>",
    "undeclared entity": "<v>&unknown;</v>",
    "deep": "<a>" * 100_000,
    "deep and closed": "<a>" * 50 + "</a>" * 50,
    "many elements": f"<v>{'<a/>' * 30_000}</v>",
    "many attributes": "<v " + " ".join(f"a{n}=''" for n in range(30_000)) + "><a></v>",
    "cut short": packet(where_when()).decode()[:-20],
    "two roots": "<v/><v/>",
    "nothing": "<",
    "unknown encoding": '<?xml version="1.0" encoding="x-invented"?><v/>',
    "no such character": "<v>&#0;</v>",
    "unbound prefix": "<voe:VOEvent/>",
}


@pytest.fixture
def closed_world(monkeypatch):
    """Whatever opens a file or a connection fails the test."""

    def refuse(*args, **_kwargs):
        raise AssertionError(f"looked outside: {args[:1]}")

    monkeypatch.setattr(socket.socket, "connect", refuse)
    monkeypatch.setattr(socket, "getaddrinfo", refuse)
    monkeypatch.setattr("builtins.open", refuse)


@pytest.mark.parametrize("case", HOSTILE)
def test_hostile_xml_is_refused_in_words(case, closed_world):
    begun = time.perf_counter()
    with pytest.raises(AlertError) as refusal:
        read_alert(HOSTILE[case].encode(), filename="a.xml", now_mjd=NOW)
    assert time.perf_counter() - begun < 2.0
    assert len(str(refusal.value)) < 1000
    assert refusal.value.advice


@pytest.mark.parametrize("case", [name for name in HOSTILE if "entity" in name or "type" in name])
def test_a_document_type_is_named_as_the_reason(case):
    if case == "undeclared entity":
        return
    with pytest.raises(AlertError, match="DOCTYPE"):
        read_xml(HOSTILE[case].encode())


def test_100_mb_are_refused_before_they_are_parsed(monkeypatch):
    monkeypatch.setattr("skytiles.region.xml_tree._parser", None)
    data = b"<v>" + b" " * 100_000_000
    with pytest.raises(AlertError, match=f"at most {MAX_XML_BYTES:,} bytes"):
        read_alert(data, filename="large.xml", now_mjd=NOW)


def test_instructions_comments_and_includes_are_left_alone(closed_world):
    words = (
        '<?xml-stylesheet href="http://127.0.0.1:9/s.xsl"?><v xmlns:xi="http://www.w3.org/2001/XInclude">'
        '<!-- &x; --><xi:include href="file:///etc/passwd"/><![CDATA[<b>&amp;]]>&lt;&#65;</v>'
    )
    root = read_xml(words.encode())
    assert root.text == "<b>&amp;<A"
    assert [child.name for child in root.children] == ["include"]
    assert root.children[0].children == []


def test_long_text_between_many_elements_is_read_quickly():
    data = ("<v>" + ("x" * 45 + "<a/>") * 19_000 + "</v>").encode()
    begun = time.perf_counter()
    assert len(read_xml(data).text) == 45 * 19_000
    assert time.perf_counter() - begun < 2.0
