"""Arrival times from the JSON of an alert."""

import math
from collections.abc import Mapping
from typing import Any

import numpy as np

from skytiles.errors import AlertError
from skytiles.region.arrival_times import ArrivalTimesConstraint, Station
from skytiles.sphere.calendar import mjd_from_iso

ARRIVAL_TIMES_FIELDS = frozenset({"type", "reference_time", "stations", "covariance_s2"})
_STATION_FIELDS = {
    "name",
    "longitude_deg",
    "latitude_deg",
    "height_m",
    "arrival_s",
    "sigma_s",
    "bias_s",
}
_MOST_STATIONS = 50
# No burst is timed better than this against another clock; thinner rings would need more cells
# than are worth having.
_LEAST_SIGMA_S, _MOST_SIGMA_S = 1e-5, 100.0
# Times further apart than this are no burst that crossed the Earth in 43 ms.
_LONGEST_SPREAD_S = 60.0
# The years 1900 and 2500.
_EARLIEST_MJD, _LATEST_MJD = 15020.0, 234167.0


def arrival_times_from_json(fields: Mapping[str, Any]) -> ArrivalTimesConstraint:
    """Arrival times at two or more stations.

    Parameters
    ----------
    fields : dict    {"type": "arrival times", "reference_time", "stations": [{"name",
        "longitude_deg", "latitude_deg", "height_m"?, "arrival_s", "sigma_s"?, "bias_s"?}, ...],
        "covariance_s2"?}; sigma_s of every station stands for a covariance without correlation

    Returns
    -------
    ArrivalTimesConstraint    AlertError else

    Source: our own JSON (DEVELOPERS.md, constraints).
    """
    pieces = _station_fields(fields.get("stations"))
    stations = tuple(_station(piece) for piece in pieces)
    _refuse_bad_network(stations)
    constraint = ArrivalTimesConstraint(
        reference_mjd=_reference_mjd(fields.get("reference_time")),
        stations=stations,
        covariance_s2=_covariance(fields.get("covariance_s2"), pieces),
    )
    _refuse_bad_covariance(constraint)
    return constraint


def _station_fields(pieces: object) -> list[Mapping[str, Any]]:
    is_list = isinstance(pieces, list) and all(isinstance(piece, Mapping) for piece in pieces)
    if not isinstance(pieces, list) or not is_list or not 2 <= len(pieces) <= _MOST_STATIONS:
        raise AlertError(
            given="its stations are not a list of objects, or too few or many",
            allowed=f"a list of 2 to {_MOST_STATIONS} stations",
            advice="give every station with longitude_deg, latitude_deg and arrival_s",
        )
    unknown = sorted({str(name) for piece in pieces for name in set(piece) - _STATION_FIELDS})
    if unknown:
        raise AlertError(
            given=f"a station has unknown fields ({', '.join(unknown)[:200]})",
            allowed=f"the fields {', '.join(sorted(_STATION_FIELDS))}",
            advice="correct the spelling or take them out; nothing is ignored silently",
        )
    return pieces


def _station(fields: Mapping[str, Any]) -> Station:
    name = fields.get("name")
    if not isinstance(name, str) or not 1 <= len(name) <= 80:
        raise AlertError(
            given=f"a station is called {name!r}"[:300],
            allowed="a name of 1 to 80 characters",
            advice="name every station",
        )
    return Station(
        name=name,
        longitude_deg=_number(fields, "longitude_deg", least=-180.0, most=360.0),
        latitude_deg=_number(fields, "latitude_deg", least=-90.0, most=90.0),
        height_m=_number(fields, "height_m", least=-12_000.0, most=100_000.0, default=0.0),
        arrival_s=_number(fields, "arrival_s", least=-3600.0, most=3600.0),
        bias_s=_number(fields, "bias_s", least=0.0, most=_MOST_SIGMA_S, default=0.0),
    )


def _number(
    fields: Mapping[str, Any], name: str, *, least: float, most: float, default: float | None = None
) -> float:
    value = fields.get(name, default)
    is_number = isinstance(value, (int, float)) and not isinstance(value, bool)
    if not is_number or not least <= value <= most:
        station = str(fields.get("name"))[:80]
        what = f"{name} is {value!r}" if name in fields else f"{name} is missing"
        raise AlertError(
            given=f"the {what} of station {station}"[:300]
            if name not in fields
            else f"{what} at station {station}"[:300],
            allowed=f"a number from {least:g} to {most:g}",
            advice=f"correct {name}; times are in seconds after reference_time, places in WGS84",
        )
    return float(value)


def _reference_mjd(text: object) -> float:
    try:
        mjd = mjd_from_iso(str(text))
    except (ValueError, OverflowError):
        mjd = math.nan
    if not _EARLIEST_MJD <= mjd <= _LATEST_MJD:
        raise AlertError(
            given=f"its reference_time is {text!r}"[:300],
            allowed="a UTC time such as 2027-03-14T05:06:07Z, from 1900 to 2500",
            advice="give the time from which arrival_s counts",
        )
    return mjd


def _refuse_bad_network(stations: tuple[Station, ...]) -> None:
    names = [station.name for station in stations]
    places = {(s.longitude_deg % 360.0, s.latitude_deg, s.height_m) for s in stations}
    if len(set(names)) < len(names) or len(places) < 2:
        raise AlertError(
            given="two stations have the same name, or all stand at one place",
            allowed="stations of different names, at two places or more",
            advice="combine the times of one detector before sending them",
        )
    times_s = [station.arrival_s for station in stations]
    if max(times_s) - min(times_s) > _LONGEST_SPREAD_S:
        raise AlertError(
            given=f"its times are {max(times_s) - min(times_s):.1f} s apart",
            allowed=f"at most {_LONGEST_SPREAD_S:g} s; light crosses the Earth in 0.043 s",
            advice="leave out the stations that saw something else",
        )


def _covariance(given: object, pieces: list[Mapping[str, Any]]) -> tuple[tuple[float, ...], ...]:
    has_sigmas = [("sigma_s" in piece) for piece in pieces]
    if (given is None) == (not any(has_sigmas)) or (given is None and not all(has_sigmas)):
        raise AlertError(
            given="the errors of its times are missing, or given twice",
            allowed="covariance_s2 for all stations, or sigma_s at each station",
            advice="give one of the two",
        )
    if given is None:
        sigmas = [
            _number(piece, "sigma_s", least=_LEAST_SIGMA_S, most=_MOST_SIGMA_S) for piece in pieces
        ]
        matrix = np.diag(np.square(sigmas))
    else:
        matrix = _square(given, len(pieces))
    return tuple(tuple(float(value) for value in row) for row in matrix)


def _square(given: object, n: int) -> np.ndarray:
    """An N x N matrix of finite numbers that is the same on both sides of the diagonal."""
    rows = given if isinstance(given, list) else []
    is_square = len(rows) == n and all(isinstance(row, list) and len(row) == n for row in rows)
    is_plain = is_square and all(
        isinstance(value, (int, float)) and not isinstance(value, bool) and abs(value) <= 1e4
        for row in rows
        for value in row
    )
    matrix = np.array(rows, dtype=np.float64) if is_plain else np.full((n, n), np.nan)
    if not np.allclose(matrix, matrix.T, rtol=1e-9, atol=0.0):
        raise AlertError(
            given="its covariance_s2 is no symmetric matrix of numbers",
            allowed=f"{n} rows of {n} numbers, seconds squared, as many as there are stations",
            advice="give the covariance of the arrival times in the order of the stations",
        )
    return 0.5 * (matrix + matrix.T)


def _refuse_bad_covariance(constraint: ArrivalTimesConstraint) -> None:
    values = np.linalg.eigvalsh(constraint.total_covariance_s2)
    if values[0] < 0.999 * _LEAST_SIGMA_S**2:
        raise AlertError(
            given=f"its covariance has an eigenvalue of {values[0]:.3g} s2",
            allowed=f"eigenvalues of at least {_LEAST_SIGMA_S**2:g} s2 "
            f"({1e6 * _LEAST_SIGMA_S:g} microseconds)",
            advice="check the signs of the correlations, and give the times their honest errors",
        )
