"""Alerts from files: a sky map, or our JSON."""

import json
from collections.abc import Mapping
from pathlib import Path
from typing import Any, NoReturn

from skytiles.errors import AlertError
from skytiles.region.alert import Alert, Role
from skytiles.region.constraint_json import MapOpener, constraint_from_json, containment_note
from skytiles.region.constraints import MapConstraint
from skytiles.region.fits_header import SIGNATURE
from skytiles.region.read_map import MAX_MAP_BYTES, read_sky_map, too_large_error
from skytiles.region.sky_map import SkyMap
from skytiles.sphere.calendar import mjd_from_iso

# An alert in JSON is a few hundred bytes.
MAX_JSON_BYTES = 1_000_000
MAX_CONSTRAINTS = 20
# How far ahead of us the sender's clock may be.
_CLOCK_SLACK_D = 1.0 / 24.0
# The years 1900 and 2500.
_EARLIEST_MJD, _LATEST_MJD = 15020.0, 234167.0
_FIELDS = {"id", "event_time", "kind", "role", "constraints"}


def read_alert_file(path: Path | str, now_mjd: float | None) -> Alert:
    """An alert from a file; maps that it names are looked for beside it.

    Parameters
    ----------
    path : Path    FITS map (also gzipped) or JSON
    now_mjd : float or None    UTC; None: dates in the future are not refused

    Returns
    -------
    Alert    AlertError or MapFileError else; a file above 2 GB is refused unread

    Source: our own.
    """
    file = Path(path)
    data = _bytes_of(file)
    return read_alert(
        data,
        filename=file.name,
        now_mjd=now_mjd,
        open_map=lambda name: _bytes_of(file.parent / name),
    )


def _bytes_of(file: Path) -> bytes:
    try:
        n_bytes = file.stat().st_size
        if n_bytes > MAX_MAP_BYTES:
            raise too_large_error(f"{file.name} of {n_bytes} bytes")
        return file.read_bytes()
    except OSError as error:
        raise AlertError(
            given=f"{file.name}, which cannot be read ({error.strerror or error})",
            allowed="a readable file",
            advice="check the name and the permissions of the file",
        ) from error


def read_alert(
    data: bytes, *, filename: str, now_mjd: float | None, open_map: MapOpener | None = None
) -> Alert:
    """An alert from the bytes of a file, told apart by how they begin.

    Parameters
    ----------
    data : bytes    FITS map (also gzipped) or JSON
    filename : str    what the file was called
    now_mjd : float or None    UTC; None: dates in the future are not refused
    open_map : function of a file name, or None    gives the bytes of maps that the JSON names

    Returns
    -------
    Alert    AlertError or MapFileError else

    Source: our own.
    """
    if len(data) > MAX_MAP_BYTES:
        raise too_large_error(f"{filename} of {len(data)} bytes")
    is_map = data.startswith((SIGNATURE, b"\x1f\x8b"))
    alert = (
        _map_alert(data, filename, now_mjd=now_mjd)
        if is_map
        else _json_alert(data, filename, open_map=open_map)
    )
    _refuse_impossible_dates(alert.event_mjd, now_mjd)
    return alert


def _refuse_impossible_dates(event_mjd: float, now_mjd: float | None) -> None:
    if not _EARLIEST_MJD <= event_mjd <= _LATEST_MJD:
        raise AlertError(
            given=f"an event at MJD {event_mjd:.3f}",
            allowed="a date between 1900 and 2500",
            advice="correct the date of the event",
        )
    if now_mjd is not None and event_mjd > now_mjd + _CLOCK_SLACK_D:
        ahead_h = 24.0 * (event_mjd - now_mjd)
        raise AlertError(
            given=f"an event {ahead_h:.1f} hours in the future",
            allowed="an event that has happened (one hour of clock error is forgiven)",
            advice="check that event_time is in UTC, and the clock of this computer",
        )


# A map file as an alert.


def _map_alert(data: bytes, filename: str, *, now_mjd: float | None) -> Alert:
    sky_map = read_sky_map(data)
    event_mjd, date_note = _event_of_map(sky_map, now_mjd)
    name = str(sky_map.keywords.get("OBJECT") or "").strip()
    return Alert(
        identifier=name or filename.split(".", maxsplit=1)[0],
        event_mjd=event_mjd,
        kind="sky map",
        role="observation",
        constraints=(MapConstraint(sky_map=sky_map, file=filename),),
        notes=sky_map.notes + date_note,
    )


def _event_of_map(sky_map: SkyMap, now_mjd: float | None) -> tuple[float, tuple[str, ...]]:
    mjd = sky_map.keywords.get("MJD-OBS")
    if isinstance(mjd, (int, float)) and not isinstance(mjd, bool):
        return float(mjd), ()
    date = sky_map.keywords.get("DATE-OBS")
    if isinstance(date, str) and date:
        return _event_mjd(date), ()
    if now_mjd is None:
        raise AlertError(
            given="a sky map without MJD-OBS or DATE-OBS",
            allowed="a map that says when the event happened",
            advice='name the map in a JSON alert: {"type": "map", "file": ...} with event_time',
        )
    note = "The map does not say when the event happened; the time of reading was taken."
    return now_mjd, (note,)


def _event_mjd(text: object) -> float:
    try:
        return mjd_from_iso(str(text))
    except (ValueError, OverflowError) as error:
        raise AlertError(
            given=f"the event time {text!r}",
            allowed="a UTC time such as 2027-03-14T05:06:07Z",
            advice="correct the time of the event",
        ) from error


# Our JSON.


def _json_alert(data: bytes, filename: str, *, open_map: MapOpener | None) -> Alert:
    if len(data) > MAX_JSON_BYTES:
        raise AlertError(
            given=f"{filename}: {len(data)} bytes that are no FITS map",
            allowed=f"a FITS sky map, or JSON of at most {MAX_JSON_BYTES} bytes",
            advice="choose the alert file itself",
        )
    fields = _parsed(data, filename)
    return alert_from_json(fields, open_map=open_map)


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
            given=_named("unknown fields", unknown) + _named("missing fields", missing),
            allowed=", ".join(sorted(_FIELDS)),
            advice="compare with the example alerts in fixtures/alerts",
        )
    pieces = _constraint_fields(fields["constraints"])
    constraints = tuple(constraint_from_json(piece, open_map=open_map) for piece in pieces)
    notes = [note for piece in pieces if (note := containment_note(piece))]
    maps = [c.sky_map for c in constraints if isinstance(c, MapConstraint)]
    return Alert(
        identifier=_text(fields, "id", default="alert"),
        event_mjd=_event_mjd(fields["event_time"]),
        kind=_text(fields, "kind", default="not stated"),
        role=_role(fields.get("role", "observation")),
        constraints=constraints,
        notes=(*notes, *(note for sky_map in maps for note in sky_map.notes)),
    )


def _named(what: str, names: list[str]) -> str:
    return f"{what}: {', '.join(names)[:200]} " if names else ""


def _parsed(data: bytes, filename: str) -> Mapping[str, Any]:
    try:
        fields = json.loads(data.decode("utf-8"), parse_constant=_refuse_constant)
    except (ValueError, RecursionError) as error:
        raise AlertError(
            given=f"{filename}, which is neither a FITS file nor JSON ({error})"[:300],
            allowed="a HEALPix sky map in FITS, or an alert in JSON",
            advice="choose the alert file itself; example alerts are in fixtures/alerts",
        ) from error
    if not isinstance(fields, dict):
        raise AlertError(
            given=f"JSON that is a {type(fields).__name__}",
            allowed="an object with event_time and constraints",
            advice="compare with the example alerts in fixtures/alerts",
        )
    return fields


def _refuse_constant(word: str) -> NoReturn:
    raise ValueError(f"{word} is no number")


def _constraint_fields(pieces: object) -> list[dict[str, Any]]:
    is_list = isinstance(pieces, list) and all(isinstance(piece, dict) for piece in pieces)
    if not isinstance(pieces, list) or not is_list or not 1 <= len(pieces) <= MAX_CONSTRAINTS:
        raise AlertError(
            given="constraints that are not a list of objects, or too few or many",
            allowed=f"a list of 1 to {MAX_CONSTRAINTS} constraints",
            advice="compare with the example alerts in fixtures/alerts",
        )
    return pieces


def _text(fields: Mapping[str, Any], name: str, *, default: str) -> str:
    value = fields.get(name, default)
    if not isinstance(value, str) or not 1 <= len(value) <= 200:
        raise AlertError(
            given=f"{name} = {value!r}"[:300],
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
        given=f"role = {value!r}"[:300],
        allowed='"observation" or "test"',
        advice='use "test" for exercises; they can only become a rehearsal',
    )
