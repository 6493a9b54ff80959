"""Alerts in our JSON."""

import json
from collections.abc import Mapping
from typing import Any, NoReturn

from skytiles.errors import AlertError
from skytiles.region.alert import CITES, Alert, Citation, Link, Role
from skytiles.region.constraint_json import MapOpener, constraint_from_json, containment_note
from skytiles.region.constraints import MapConstraint
from skytiles.region.json_numbers import number_from
from skytiles.sphere.calendar import mjd_from_iso

# An alert in JSON is a few hundred bytes, or some hundred thousand with a coverage map in it.
MAX_JSON_BYTES = 1_000_000
MAX_CONSTRAINTS = 20
_MOST_PIECES = 100
_FIELDS = {
    "id",
    "event_time",
    "kind",
    "role",
    "constraints",
    "citations",
    "importance",
    "links",
}


def json_object(data: bytes) -> Mapping[str, Any]:
    """The object in a JSON file.

    Parameters
    ----------
    data : bytes    the whole file, UTF-8

    Returns
    -------
    dict    AlertError for anything else, and for more than 1 MB

    Source: RFC 8259; NaN and infinities are no JSON.
    """
    if len(data) > MAX_JSON_BYTES:
        raise AlertError(
            given=f"it has {len(data):,} bytes and is no FITS file",
            allowed=f"a FITS file, or JSON of at most {MAX_JSON_BYTES:,} bytes",
            advice="choose the alert file itself",
        )
    try:
        fields = json.loads(data.decode("utf-8"), parse_constant=_refuse_constant)
    except (ValueError, RecursionError) as error:
        raise AlertError(
            given=f"it is neither FITS nor XML nor JSON ({error})"[:300],
            allowed="a sky map or MOC in FITS, a VOEvent in XML, or an alert in JSON",
            advice="choose the alert file itself; example alerts are in fixtures/alerts",
        ) from error
    if not isinstance(fields, dict):
        raise AlertError(
            given=f"it is JSON of type {type(fields).__name__}",
            allowed="an object with event_time and constraints",
            advice="compare with the example alerts in fixtures/alerts",
        )
    return fields


def alert_from_json(fields: Mapping[str, Any], *, open_map: MapOpener | None = None) -> Alert:
    """An alert from the parsed fields of our JSON.

    Parameters
    ----------
    fields : dict    id, event_time, kind, role, constraints (DEVELOPERS.md)
    open_map : function of a file name, or None    gives the bytes of maps that are named

    Returns
    -------
    Alert    AlertError else; dates in the future are judged by read_alert

    Source: our own JSON.
    """
    unknown = sorted(str(name) for name in set(fields) - _FIELDS)
    missing = sorted({"event_time", "constraints"} - set(fields))
    if unknown or missing:
        raise AlertError(
            given=_misfits(unknown, missing),
            allowed=f"the fields {', '.join(sorted(_FIELDS))}",
            advice="compare with the example alerts in fixtures/alerts",
        )
    citations = _citations(fields.get("citations", []))
    pieces = _constraint_fields(fields["constraints"], least=0 if citations else 1)
    constraints = tuple(constraint_from_json(piece, open_map=open_map) for piece in pieces)
    notes = [note for piece in pieces if (note := containment_note(piece))]
    maps = [c.sky_map for c in constraints if isinstance(c, MapConstraint)]
    return Alert(
        identifier=_text(fields, "id", default="alert"),
        event_mjd=event_mjd_of(fields["event_time"]),
        kind=_text(fields, "kind", default="not stated"),
        role=_role(fields.get("role", "observation")),
        constraints=constraints,
        notes=(*notes, *(note for sky_map in maps for note in sky_map.notes)),
        citations=citations,
        importance=number_from(fields, "importance", least=0.0, most=1.0)
        if "importance" in fields
        else None,
        links=_links(fields.get("links", [])),
    )


def _misfits(unknown: list[str], missing: list[str]) -> str:
    has = [f"it has unknown fields ({', '.join(unknown)[:200]})"] if unknown else []
    lacks = [f"it lacks {' and '.join(missing)}"] if missing else []
    return " and ".join(has + lacks)


def _refuse_constant(word: str) -> NoReturn:
    raise ValueError(f"{word} is no number")


def _constraint_fields(pieces: object, *, least: int) -> list[dict[str, Any]]:
    is_list = isinstance(pieces, list) and all(isinstance(piece, dict) for piece in pieces)
    if not isinstance(pieces, list) or not is_list or not least <= len(pieces) <= MAX_CONSTRAINTS:
        raise AlertError(
            given="its constraints are no list of objects, or too few or many",
            allowed=f"a list of 1 to {MAX_CONSTRAINTS} constraints",
            advice="compare with the example alerts in fixtures/alerts",
        )
    return pieces


def _text(fields: Mapping[str, Any], name: str, *, default: str) -> str:
    value = fields.get(name, default)
    if not isinstance(value, str) or not 1 <= len(value) <= 200:
        raise AlertError(
            given=f"its {name} is {value!r}"[:300],
            allowed="1 to 200 characters",
            advice=f"give {name} as text, or leave it out",
        )
    return value


def _role(value: object) -> Role:
    if value == "observation":
        return "observation"
    if value == "test":
        return "test"
    raise AlertError(
        given=f"its role is {value!r}"[:300],
        allowed='"observation" or "test"',
        advice='use "test" for exercises; they can only become a rehearsal',
    )


def _citations(pieces: object) -> tuple[Citation, ...]:
    """Earlier messages by name, and what becomes of them: there is no default."""
    if not isinstance(pieces, list) or len(pieces) > _MOST_PIECES:
        raise _pieces_error("citations")
    return tuple(_citation(piece) for piece in pieces)


def _citation(piece: object) -> Citation:
    if not isinstance(piece, dict) or set(piece) != {"id", "cite"}:
        raise _pieces_error("citations")
    for cite in CITES:
        if piece["cite"] == cite:
            return Citation(_text(piece, "id", default=""), cite)
    raise _pieces_error("citations")


def _links(pieces: object) -> tuple[Link, ...]:
    if not isinstance(pieces, list) or len(pieces) > _MOST_PIECES:
        raise _pieces_error("links")
    return tuple(_link(piece) for piece in pieces)


def _link(piece: object) -> Link:
    if not isinstance(piece, dict) or not {"uri"} <= set(piece) <= {"uri", "name"}:
        raise _pieces_error("links")
    uri, name = piece["uri"], piece.get("name", "")
    if not isinstance(uri, str) or not isinstance(name, str) or len(uri) > 500 or len(name) > 80:
        raise _pieces_error("links")
    return Link(uri, name)


def _pieces_error(name: str) -> AlertError:
    shapes = {
        "citations": '{"id": ..., "cite": "followup", "supersedes" or "retraction"}',
        "links": '{"uri": ..., "name": ...} of at most 500 and 80 characters',
    }
    return AlertError(
        given=f"its {name} cannot be understood",
        allowed=f"a list of at most {_MOST_PIECES} objects {shapes[name]}",
        advice="compare with the example alerts in fixtures/alerts",
    )


def event_mjd_of(text: object) -> float:
    """When an event was, from words in UTC.

    Parameters
    ----------
    text : object    ISO 8601; UTC when no zone is written

    Returns
    -------
    float    MJD, UTC; AlertError for what is no time

    Source: ISO 8601.
    """
    try:
        return mjd_from_iso(str(text))
    except (ValueError, OverflowError) as error:
        raise AlertError(
            given=f"its event time is {text!r}"[:300],
            allowed="a UTC time such as 2027-03-14T05:06:07Z",
            advice="correct the time of the event",
        ) from error
