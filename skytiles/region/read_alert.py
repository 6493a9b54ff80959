"""Alerts from files: a sky map or coverage map, a VOEvent message, or our JSON."""

from pathlib import Path

from skytiles.errors import AlertError, SkytilesError
from skytiles.region.alert import Alert
from skytiles.region.alert_json import alert_from_json, event_mjd_of, json_object
from skytiles.region.area_json import area_note
from skytiles.region.areas import MocConstraint
from skytiles.region.constraint_json import MapOpener
from skytiles.region.constraints import AnyConstraint, MapConstraint
from skytiles.region.fits_header import SIGNATURE, Header
from skytiles.region.fits_table import read_table
from skytiles.region.moc import Moc
from skytiles.region.read_map import (
    GZIP,
    MAX_MAP_BYTES,
    read_sky_map,
    too_large_error,
    unpacked,
)
from skytiles.region.read_moc import (
    is_moc_key,
    is_moc_table,
    looks_like_moc_text,
    moc_from_json,
    moc_from_table,
    read_moc,
)
from skytiles.region.read_voevent import looks_like_xml, read_voevent

# How far ahead of us the sender's clock may be.
_CLOCK_SLACK_D = 1.0 / 24.0
# The years 1900 and 2500.
_EARLIEST_MJD, _LATEST_MJD = 15020.0, 234167.0


def read_alert_file(path: Path | str, now_mjd: float | None) -> Alert:
    """An alert from a file; maps that it names are looked for beside it.

    Parameters
    ----------
    path : Path    anything that read_alert reads
    now_mjd : float or None    UTC; None: dates in the future are not refused

    Returns
    -------
    Alert    AlertError or MapFileError else; a file above 2 GB is refused unread

    Source: our own.
    """
    file = Path(path)
    return read_alert(
        _bytes_of(file),
        filename=file.name,
        now_mjd=now_mjd,
        open_map=lambda name: _bytes_of(file.parent / name),
    )


def _bytes_of(file: Path) -> bytes:
    try:
        n_bytes = file.stat().st_size
        if n_bytes > MAX_MAP_BYTES:
            raise too_large_error(f"it has {n_bytes:,} bytes").about(file.name)
        return file.read_bytes()
    except OSError as error:
        raise AlertError(
            given=f"it cannot be read ({error.strerror or error})",
            allowed="a readable file",
            advice="check the name and the permissions of the file",
        ).about(file.name) from error


def read_alert(
    data: bytes, *, filename: str, now_mjd: float | None, open_map: MapOpener | None = None
) -> Alert:
    """An alert from the bytes of a file, told apart by how they begin.

    Parameters
    ----------
    data : bytes    FITS map or MOC (also gzipped), VOEvent, MOC in text or JSON, our JSON
    filename : str    what the person calls it: the first words of every refusal
    now_mjd : float or None    UTC; None: dates in the future are not refused
    open_map : function of a file name, or None    gives the bytes of maps that the JSON names

    Returns
    -------
    Alert    AlertError or MapFileError else

    Source: our own.
    """
    try:
        if len(data) > MAX_MAP_BYTES:
            raise too_large_error(f"it has {len(data):,} bytes")
        alert = _alert(data, filename, now_mjd=now_mjd, open_map=open_map)
        # What is foretold may lie ahead.
        latest = None if alert.role == "prediction" else now_mjd
        _refuse_impossible_dates(alert.event_mjd, latest)
    except SkytilesError as error:
        error.about(filename)
        raise
    return alert


def _alert(
    data: bytes, filename: str, *, now_mjd: float | None, open_map: MapOpener | None
) -> Alert:
    if data.startswith((SIGNATURE, GZIP)):
        return _fits_alert(unpacked(data), filename, now_mjd=now_mjd)
    if looks_like_xml(data):
        return read_voevent(data, now_mjd=now_mjd)
    if looks_like_moc_text(data):
        return _moc_alert(read_moc(data), {}, filename, now_mjd=now_mjd)
    fields = json_object(data)
    if fields and all(is_moc_key(name) for name in fields):
        return _moc_alert(moc_from_json(fields), {}, filename, now_mjd=now_mjd)
    return alert_from_json(fields, open_map=open_map)


def _refuse_impossible_dates(event_mjd: float, now_mjd: float | None) -> None:
    if not _EARLIEST_MJD <= event_mjd <= _LATEST_MJD:
        raise AlertError(
            given=f"its event is at MJD {event_mjd:.3f}",
            allowed="a date between 1900 and 2500",
            advice="correct the date of the event",
        )
    if now_mjd is not None and event_mjd > now_mjd + _CLOCK_SLACK_D:
        ahead_h = 24.0 * (event_mjd - now_mjd)
        raise AlertError(
            given=f"its event lies {ahead_h:.1f} hours in the future",
            allowed="an event that has happened (one hour of clock error is forgiven)",
            advice="check that event_time is in UTC, and the clock of this computer",
        )


# A map file as an alert.


def _fits_alert(data: bytes, filename: str, *, now_mjd: float | None) -> Alert:
    table = read_table(data)
    if is_moc_table(table):
        return _moc_alert(moc_from_table(table), table.header, filename, now_mjd=now_mjd)
    sky_map = read_sky_map(data)
    return _file_alert(
        MapConstraint(sky_map=sky_map, file=filename),
        sky_map.keywords,
        filename,
        now_mjd=now_mjd,
        notes=sky_map.notes,
    )


def _moc_alert(moc: Moc, keywords: Header, filename: str, *, now_mjd: float | None) -> Alert:
    constraint = MocConstraint(moc=moc)
    _ = constraint.sky_map  # refuses what covers nothing
    notes = (area_note("coverage map"),)
    return _file_alert(constraint, keywords, filename, now_mjd=now_mjd, notes=notes)


def _file_alert(
    constraint: AnyConstraint,
    keywords: Header,
    filename: str,
    *,
    now_mjd: float | None,
    notes: tuple[str, ...],
) -> Alert:
    event_mjd, date_note = _event_of_map(keywords, now_mjd)
    name = str(keywords.get("OBJECT") or "").strip()
    return Alert(
        identifier=name or filename.split(".", maxsplit=1)[0],
        event_mjd=event_mjd,
        kind="sky map" if isinstance(constraint, MapConstraint) else "coverage map",
        role="observation",
        constraints=(constraint,),
        notes=notes + date_note,
        is_dated=not date_note,
    )


def _event_of_map(keywords: Header, now_mjd: float | None) -> tuple[float, tuple[str, ...]]:
    mjd = keywords.get("MJD-OBS")
    if isinstance(mjd, (int, float)) and not isinstance(mjd, bool):
        return float(mjd), ()
    date = keywords.get("DATE-OBS")
    if isinstance(date, str) and date:
        return event_mjd_of(date), ()
    if now_mjd is None:
        raise AlertError(
            given="it is a sky map without MJD-OBS or DATE-OBS",
            allowed="a map that says when the event happened",
            advice='name the map in a JSON alert: {"type": "map", "file": ...} with event_time',
        )
    note = "The map does not say when the event happened; the time of reading was taken."
    return now_mjd, (note,)
