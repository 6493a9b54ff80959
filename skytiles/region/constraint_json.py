"""Constraints from the JSON of an alert."""

from collections.abc import Callable, Mapping
from typing import Any

from skytiles.errors import AlertError, MapFileError
from skytiles.region.area_json import (
    MOC_FIELDS,
    POLYGON_FIELDS,
    area_note,
    moc_constraint,
    polygon_constraint,
)
from skytiles.region.arrival_times_json import ARRIVAL_TIMES_FIELDS, arrival_times_from_json
from skytiles.region.constraints import (
    DEFAULT_CONTAINMENT,
    AnyConstraint,
    ConeConstraint,
    EllipseConstraint,
    MapConstraint,
    unknown_type_error,
)
from skytiles.region.json_numbers import number_from
from skytiles.region.read_map import read_sky_map
from skytiles.region.target_json import (
    DISTANCE_FIELDS,
    TARGETS_FIELDS,
    distance_constraint,
    target_list_constraint,
)

# Gives the bytes of a map file that an alert names.
MapOpener = Callable[[str], bytes]

_LARGEST_RADIUS_DEG = 90.0
_SHARED = {"type", "ra_deg", "dec_deg", "containment", "systematic_deg"}
_FIELDS = {
    "cone": _SHARED | {"radius_deg"},
    "ellipse": _SHARED | {"semi_major_deg", "semi_minor_deg", "position_angle_deg"},
    "map": {"type", "file"},
    "arrival times": ARRIVAL_TIMES_FIELDS,
    "moc": MOC_FIELDS,
    "polygon": POLYGON_FIELDS,
    "targets": TARGETS_FIELDS,
    "distance": DISTANCE_FIELDS,
}
# Readers of those that need nothing but their fields.
_READERS: dict[str, Callable[[Mapping[str, Any]], AnyConstraint]] = {
    "arrival times": arrival_times_from_json,
    "polygon": polygon_constraint,
    "targets": target_list_constraint,
    "distance": distance_constraint,
}


def constraint_from_json(
    fields: Mapping[str, Any], *, open_map: MapOpener | None = None
) -> AnyConstraint:
    """One constraint of an alert.

    Parameters
    ----------
    fields : dict    {"type": "cone" | "ellipse" | "map" | ..., ...} (fixtures/alert.schema.json)
    open_map : function of a file name, or None    where maps may be named, gives their bytes

    Returns
    -------
    AnyConstraint    AlertError else

    Source: our own JSON.
    """
    if not isinstance(fields, Mapping):
        raise _shape_error(f"it has a constraint that is {type(fields).__name__}")
    kind = fields.get("type")
    if not isinstance(kind, str) or kind not in _FIELDS:
        raise unknown_type_error(kind)
    unknown = sorted(str(name) for name in set(fields) - _FIELDS[kind])
    if unknown:
        raise AlertError(
            given=f"its {kind} has unknown fields ({', '.join(unknown)[:200]})",
            allowed=f"the fields {', '.join(sorted(_FIELDS[kind]))}",
            advice="correct the spelling or take them out; nothing is ignored silently",
        )
    if kind in _READERS:
        return _READERS[kind](fields)
    if kind == "map":
        return _map(fields, open_map)
    if kind == "moc":
        return moc_constraint(fields, open_map=open_map)
    return _cone(fields) if kind == "cone" else _ellipse(fields)


def containment_note(fields: Mapping[str, Any]) -> str | None:
    """What was taken for granted about a radius, or nothing.

    Parameters
    ----------
    fields : dict    the JSON of a constraint

    Returns
    -------
    str or None    a plain sentence

    Source: our own.
    """
    kind = fields.get("type")
    if "containment" in fields:
        return None
    if kind in ("moc", "polygon"):
        return area_note(str(kind))
    if kind not in ("cone", "ellipse"):
        return None
    return f"The {kind} does not say what its radius holds; 68 % (1.515 sigma) was assumed."


def _shape_error(given: str) -> AlertError:
    return AlertError(
        given=given,
        allowed='an object such as {"type": "cone", "ra_deg": 266.4, ...}',
        advice="compare with the example alerts in fixtures/alerts",
    )


def _position(fields: Mapping[str, Any]) -> dict[str, float]:
    return {
        "ra_deg": number_from(fields, "ra_deg", least=0.0, most=360.0) % 360.0,
        "dec_deg": number_from(fields, "dec_deg", least=-90.0, most=90.0),
        "containment": number_from(
            fields, "containment", least=0.01, most=0.9999, default=DEFAULT_CONTAINMENT
        ),
        "systematic_deg": number_from(
            fields, "systematic_deg", least=0.0, most=_LARGEST_RADIUS_DEG, default=0.0
        ),
    }


def _radius(fields: Mapping[str, Any], name: str) -> float:
    return number_from(fields, name, least=1e-4, most=_LARGEST_RADIUS_DEG)


def _cone(fields: Mapping[str, Any]) -> ConeConstraint:
    return ConeConstraint(radius_deg=_radius(fields, "radius_deg"), **_position(fields))


def _ellipse(fields: Mapping[str, Any]) -> EllipseConstraint:
    major, minor = _radius(fields, "semi_major_deg"), _radius(fields, "semi_minor_deg")
    if minor > major:
        raise AlertError(
            given=f"its semi_minor_deg {minor:g} is above its semi_major_deg {major:g}",
            allowed="the longer half axis as semi_major_deg",
            advice="exchange the two; position_angle_deg is that of the longer one",
        )
    angle = number_from(fields, "position_angle_deg", least=-360.0, most=360.0, default=0.0)
    return EllipseConstraint(
        semi_major_deg=major,
        semi_minor_deg=minor,
        position_angle_deg=angle % 360.0,
        **_position(fields),
    )


def _map(fields: Mapping[str, Any], open_map: MapOpener | None) -> MapConstraint:
    name = fields.get("file")
    if not isinstance(name, str) or not name or "/" in name or "\\" in name or "\0" in name:
        raise AlertError(
            given=f"it names the map file {name!r}"[:300],
            allowed="the plain name of a map file beside the alert",
            advice="put the map in the same folder and name it without a path",
        )
    if open_map is None:
        raise AlertError(
            given=f"it names the map file {name!r}, which is not here"[:300],
            allowed="an alert that stands alone",
            advice="give the map file itself instead of the alert",
        )
    try:
        return MapConstraint(sky_map=read_sky_map(open_map(name)), file=name)
    except MapFileError as error:
        error.about(name)
        raise
