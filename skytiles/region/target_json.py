"""Target lists and distances from the JSON of an alert."""

from collections.abc import Mapping
from typing import Any

from skytiles.errors import AlertError
from skytiles.region.containment import DEFAULT_CONTAINMENT
from skytiles.region.distance import DistanceConstraint
from skytiles.region.json_numbers import number_from
from skytiles.region.targets import DEFAULT_COMPLETENESS, Target, TargetListConstraint

MOST_TARGETS = 2000
TARGETS_FIELDS = {"type", "targets", "completeness", "containment"}
DISTANCE_FIELDS = {"type", "median_mpc", "factor"}
_TARGET_FIELDS = {"ra_deg", "dec_deg", "weight", "radius_deg", "name", "distance_mpc"}
# From a parsec to beyond what can be seen.
_NEAREST_MPC, _FARTHEST_MPC = 1e-6, 1e5
_LEAST_RADIUS_DEG, _LARGEST_RADIUS_DEG = 0.005, 30.0


def target_list_constraint(fields: Mapping[str, Any]) -> TargetListConstraint:
    """Positions with weight and radius.

    Parameters
    ----------
    fields : dict    {"type": "targets", "targets": [{"ra_deg", "dec_deg", "weight"?,
        "radius_deg"?, "name"?, "distance_mpc"?}, ...], "completeness"?, "containment"?}

    Returns
    -------
    TargetListConstraint    AlertError else

    Source: our own JSON.
    """
    pieces = fields.get("targets")
    if not isinstance(pieces, list) or not 1 <= len(pieces) <= MOST_TARGETS:
        raise _list_error("its targets are no list, or too few or many")
    return TargetListConstraint(
        targets=tuple(_target(piece) for piece in pieces),
        completeness=number_from(
            fields, "completeness", least=0.0, most=1.0, default=DEFAULT_COMPLETENESS
        ),
        containment=number_from(
            fields, "containment", least=0.01, most=0.9999, default=DEFAULT_CONTAINMENT
        ),
    )


def distance_constraint(fields: Mapping[str, Any]) -> DistanceConstraint:
    """A log-normal distance.

    Parameters
    ----------
    fields : dict    {"type": "distance", "median_mpc", "factor"}

    Returns
    -------
    DistanceConstraint    AlertError else

    Source: our own JSON.
    """
    return DistanceConstraint(
        median_mpc=number_from(fields, "median_mpc", least=_NEAREST_MPC, most=_FARTHEST_MPC),
        factor=number_from(fields, "factor", least=1.001, most=1000.0),
    )


def _target(piece: object) -> Target:
    if not isinstance(piece, Mapping) or set(piece) - _TARGET_FIELDS:
        raise _list_error(f"one of its targets is {piece!r}"[:300])
    name = piece.get("name", "")
    if not isinstance(name, str) or len(name) > 80:
        raise _list_error(f"one of its targets is called {name!r}"[:300])
    plain = Target(0.0, 0.0)
    is_far = "distance_mpc" in piece
    return Target(
        ra_deg=number_from(piece, "ra_deg", least=0.0, most=360.0) % 360.0,
        dec_deg=number_from(piece, "dec_deg", least=-90.0, most=90.0),
        weight=number_from(piece, "weight", least=1e-9, most=1e9, default=plain.weight),
        radius_deg=number_from(
            piece,
            "radius_deg",
            least=_LEAST_RADIUS_DEG,
            most=_LARGEST_RADIUS_DEG,
            default=plain.radius_deg,
        ),
        name=name,
        distance_mpc=number_from(piece, "distance_mpc", least=_NEAREST_MPC, most=_FARTHEST_MPC)
        if is_far
        else None,
    )


def _list_error(given: str) -> AlertError:
    return AlertError(
        given=given,
        allowed=f"1 to {MOST_TARGETS} objects with {', '.join(sorted(_TARGET_FIELDS))}",
        advice="compare with the example alerts in fixtures/alerts",
    )
