"""Constraints from the JSON of an alert."""

import math
from collections.abc import Callable, Mapping
from typing import Any

from skytiles.errors import AlertError
from skytiles.region.constraints import (
    DEFAULT_CONTAINMENT,
    AnyConstraint,
    ConeConstraint,
    EllipseConstraint,
    MapConstraint,
    unknown_type_error,
)
from skytiles.region.read_map import read_sky_map

# Gives the bytes of a map file that an alert names.
MapOpener = Callable[[str], bytes]

_LARGEST_RADIUS_DEG = 90.0
_SHARED = {"type", "ra_deg", "dec_deg", "containment", "systematic_deg"}
_FIELDS = {
    "cone": _SHARED | {"radius_deg"},
    "ellipse": _SHARED | {"semi_major_deg", "semi_minor_deg", "position_angle_deg"},
    "map": {"type", "file"},
}


def constraint_from_json(
    fields: Mapping[str, Any], *, open_map: MapOpener | None = None
) -> AnyConstraint:
    """One constraint of an alert.

    Parameters
    ----------
    fields : dict    {"type": "cone" | "ellipse" | "map", ...} as in DEVELOPERS.md
    open_map : function of a file name, or None    where maps may be named, gives their bytes

    Returns
    -------
    ConeConstraint, EllipseConstraint or MapConstraint    AlertError else

    Source: our own JSON.
    """
    if not isinstance(fields, Mapping):
        raise _shape_error(f"a constraint that is {type(fields).__name__}")
    kind = fields.get("type")
    if not isinstance(kind, str) or kind not in _FIELDS:
        raise unknown_type_error(kind)
    unknown = sorted(str(name) for name in set(fields) - _FIELDS[kind])
    if unknown:
        raise AlertError(
            given=f"unknown fields in a {kind}: {', '.join(unknown)}",
            allowed=", ".join(sorted(_FIELDS[kind])),
            advice="correct the spelling or take them out; nothing is ignored silently",
        )
    if kind == "map":
        return _map(fields, open_map)
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
    if fields.get("type") == "map" or "containment" in fields:
        return None
    return (
        f"The {fields.get('type')} does not say what its radius holds; "
        "68 % (1.515 sigma) was assumed."
    )


def _shape_error(given: str) -> AlertError:
    return AlertError(
        given=given,
        allowed='an object such as {"type": "cone", "ra_deg": 266.4, ...}',
        advice="compare with the example alerts in fixtures/alerts",
    )


def number_from(
    fields: Mapping[str, Any],
    name: str,
    *,
    least: float,
    most: float,
    default: float | None = None,
) -> float:
    """A number of a JSON object within bounds.

    Parameters
    ----------
    fields : dict    the object
    name : str    which number
    least, most : float    bounds, included
    default : float or None    when it is missing; None: it must be there

    Returns
    -------
    float    AlertError when it is missing, no number or out of bounds

    Source: our own.
    """
    value = fields.get(name, default)
    is_number = isinstance(value, (int, float)) and not isinstance(value, bool)
    if not is_number or not math.isfinite(value) or not least <= value <= most:
        raise AlertError(
            given=f"{name} = {value!r}" if name in fields else f"no {name}",
            allowed=f"a number from {least:g} to {most:g}",
            advice=f"correct {name}; all angles are in degrees",
        )
    return float(value)


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
            given=f"semi_minor_deg {minor:g} above semi_major_deg {major:g}",
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
            given=f"file = {name!r}",
            allowed="the plain name of a map file beside the alert",
            advice="put the map in the same folder and name it without a path",
        )
    if open_map is None:
        raise AlertError(
            given=f"an alert that names the map file {name!r}",
            allowed="an alert that stands alone",
            advice="give the map file itself instead of the alert",
        )
    return MapConstraint(sky_map=read_sky_map(open_map(name)), file=name)
