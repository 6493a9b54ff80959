"""Alerts from VOEvent messages."""

import math
from collections.abc import Iterator

from skytiles.errors import AlertError
from skytiles.region.alert import CITES, Alert, Citation, Cite, Link
from skytiles.region.event_time import mjd_of_words
from skytiles.region.voevent_packet import VoeventPacket, read_voevent_packet
from skytiles.region.voevent_place import read_where_when
from skytiles.region.xml_tree import XmlElement

_MOST_NOTES, _LONGEST_NOTE = 40, 200
_MOST_LINKS, _LONGEST_URI = 40, 500
_MOST_CITATIONS = 100


def looks_like_xml(data: bytes) -> bool:
    """Whether a file begins as XML does, in any of its usual encodings.

    Parameters
    ----------
    data : bytes    the whole file

    Returns
    -------
    bool    True when the first sign is <

    Source: XML 1.0, appendix F.
    """
    begin = data[:200].removeprefix(b"\xef\xbb\xbf").lstrip()
    return begin.startswith((b"<", b"\xff\xfe<", b"\xfe\xff\0<", b"\0<"))


def read_voevent(data: bytes, *, now_mjd: float | None) -> Alert:
    """An alert from a VOEvent message; links in it are kept as text and never fetched.

    Parameters
    ----------
    data : bytes    XML, VOEvent 2.0 or 2.1
    now_mjd : float or None    UTC, for messages without any time

    Returns
    -------
    Alert    without constraints when the message gives no direction; AlertError else

    Source: IVOA VOEvent 2.0 (2011-07-11) and 2.1 (proposed, 2026-02-25).
    """
    packet = read_voevent_packet(data)
    place = read_where_when(packet.part("WhereWhen"), version=packet.version)
    event_mjd, time_notes = _event_mjd(packet, place.event_mjd, now_mjd=now_mjd)
    importance, why_notes = _importance(packet.part("Why"))
    said = [*_citation_notes(packet), *_why_notes(packet.part("Why")), *_parameter_notes(packet)]
    return Alert(
        identifier=packet.ivorn,
        event_mjd=event_mjd,
        kind=_kind(packet),
        role=packet.role,
        constraints=() if place.direction is None else (place.direction,),
        notes=(*place.notes, *time_notes, *why_notes, *_limited(said)),
        citations=tuple(_citations(packet)),
        importance=importance,
        links=_links(packet),
        is_dated=place.event_mjd is not None,
    )


def _event_mjd(
    packet: VoeventPacket, stated: float | None, *, now_mjd: float | None
) -> tuple[float, tuple[str, ...]]:
    if stated is not None:
        return stated, ()
    written = packet.root.text_of("Who", "Date")
    if written:
        note = "The message does not say when the event was; the date of writing was taken."
        return mjd_of_words(written), (note,)
    if now_mjd is None:
        raise AlertError(
            given="it has no time of the event and no date of writing",
            allowed="a message with ISOTime in WhereWhen, or Date in Who",
            advice="type the direction and the time by hand",
        )
    return now_mjd, ("The message has no date at all; the time of reading was taken.",)


def _kind(packet: VoeventPacket) -> str:
    """What the sender thinks it was, in a few words."""
    why = packet.part("Why")
    elements = why.everything() if why else []
    words = (" ".join(e.text.split()) for e in elements if e.name in ("Name", "Concept"))
    return next((said[:80] for said in words if said), "VOEvent message")


# Citations.


def _citations(packet: VoeventPacket) -> Iterator[Citation]:
    part = packet.part("Citations")
    cited = part.all_named("EventIVORN") if part else []
    if len(cited) > _MOST_CITATIONS:
        raise AlertError(
            given=f"it cites {len(cited)} messages",
            allowed=f"at most {_MOST_CITATIONS}",
            advice="ask the sender for the message again",
        )
    for element in cited:
        identifier = " ".join(element.text.split())[:200]
        yield Citation(identifier, _cite(element.attributes.get("cite", ""), identifier))


def _cite(given: str, identifier: str) -> Cite:
    """There is no default: a retraction that is taken for something else does harm."""
    for cite in CITES:
        if given == cite and identifier:
            return cite
    raise AlertError(
        given=f"it cites {identifier[:60]!r} as {given[:40]!r}",
        allowed="followup, supersedes or retraction of a named message",
        advice="ask the sender what became of the earlier message",
    )


def _citation_notes(packet: VoeventPacket) -> Iterator[str]:
    words = {
        "followup": "The message follows up",
        "supersedes": "The message supersedes",
        "retraction": "The message retracts",
    }
    for citation in _citations(packet):
        yield f"{words[citation.cite]} {citation.identifier}."


# What else it says.


def _importance(why: XmlElement | None) -> tuple[float | None, tuple[str, ...]]:
    given = why.attributes.get("importance", "").strip() if why else ""
    if not given:
        return None, ()
    value = _share(given)
    if value is None:
        return None, (f"The importance {given[:40]!r} is no number from 0 to 1 and was left out.",)
    return value, ()


def _share(words: str) -> float | None:
    try:
        value = float(words)
    except ValueError:
        return None
    return value if math.isfinite(value) and 0.0 <= value <= 1.0 else None


def _why_notes(why: XmlElement | None) -> Iterator[str]:
    for element in why.everything() if why else []:
        words = " ".join(element.text.split())
        if element.name == "Inference":
            yield from _inference_notes(element)
        elif element.name in ("Name", "Concept", "Description") and words:
            yield f"Why, {element.name}: {words}"
    expires = why.attributes.get("expires", "") if why else ""
    if expires:
        yield f"Why, expires: {expires}"


def _inference_notes(inference: XmlElement) -> Iterator[str]:
    given = inference.attributes.get("probability", "").strip()
    relation = inference.attributes.get("relation", "").strip()
    if given and _share(given) is None:
        yield f"Why, probability {given} is no number from 0 to 1."
    elif given or relation:
        yield f"Why, inference: probability {given or 'not given'} {relation}".strip()


def _parameter_notes(packet: VoeventPacket) -> Iterator[str]:
    what = packet.part("What")
    for element in what.everything() if what else []:
        if element.name == "Param":
            yield _parameter_note(element)


def _parameter_note(parameter: XmlElement) -> str:
    value = parameter.attributes.get("value") or parameter.text_of("Value")
    name = parameter.attributes.get("name", "Param")
    return f"What, {name}: {value} {parameter.attributes.get('unit', '')}".strip()


def _limited(notes: list[str]) -> Iterator[str]:
    for note in notes[:_MOST_NOTES]:
        yield " ".join(note.split())[:_LONGEST_NOTE]
    if len(notes) > _MOST_NOTES:
        yield f"{len(notes) - _MOST_NOTES} more statements of the message are not shown."


def _links(packet: VoeventPacket) -> tuple[Link, ...]:
    """References and parameters that are addresses: text to show."""
    found: dict[str, Link] = {}
    for element in packet.root.everything():
        uri = _uri(element)
        if uri and len(uri) <= _LONGEST_URI and len(found) < _MOST_LINKS:
            name = element.attributes.get("name") or element.attributes.get("meaning") or ""
            found.setdefault(uri, Link(uri, " ".join(name.split())[:80]))
    return tuple(found.values())


def _uri(element: XmlElement) -> str:
    if element.name == "Reference":
        return "".join(element.attributes.get("uri", "").split())
    if element.name != "Param":
        return ""
    value = (element.attributes.get("value") or element.text_of("Value")).strip()
    is_typed = any(element.attributes.get(a, "").lower() == "uri" for a in ("dataType", "type"))
    is_address = value.startswith(("http://", "https://", "ivo://", "ftp://"))
    return "".join(value.split()) if is_typed or is_address else ""
