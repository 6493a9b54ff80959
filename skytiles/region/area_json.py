"""Coverage maps and polygons from the JSON of an alert."""

from collections.abc import Callable, Mapping
from typing import Any

from skytiles.errors import AlertError
from skytiles.region.areas import DEFAULT_AREA_CONTAINMENT, MocConstraint, PolygonConstraint
from skytiles.region.json_numbers import number_from
from skytiles.region.moc import Moc
from skytiles.region.polygon import MOST_CORNERS
from skytiles.region.read_moc import moc_from_ascii, moc_from_json, read_moc

MOC_FIELDS = {"type", "moc", "file", "containment"}
POLYGON_FIELDS = {"type", "corners_deg", "containment"}


def moc_constraint(
    fields: Mapping[str, Any], *, open_map: Callable[[str], bytes] | None = None
) -> MocConstraint:
    """A coverage map, written out or named as a file.

    Parameters
    ----------
    fields : dict    {"type": "moc", "moc": text or object, or "file": name, "containment"?}
    open_map : function of a file name, or None    where files may be named, gives their bytes

    Returns
    -------
    MocConstraint    AlertError else

    Source: IVOA MOC 2.0, section 4.3.2 and appendix on JSON.
    """
    made = MocConstraint(moc=_moc(fields, open_map), containment=_containment(fields))
    _ = made.sky_map  # refuses what covers nothing while its sender can still be asked
    return made


def polygon_constraint(fields: Mapping[str, Any]) -> PolygonConstraint:
    """A polygon of great circles.

    Parameters
    ----------
    fields : dict    {"type": "polygon", "corners_deg": [[ra, dec], ...], "containment"?}

    Returns
    -------
    PolygonConstraint    AlertError else

    Source: our own JSON.
    """
    pieces = fields.get("corners_deg")
    if not isinstance(pieces, list) or not 3 <= len(pieces) <= MOST_CORNERS:
        raise _corners_error("its corners_deg is no list of corners")
    corners = tuple(_corner(piece) for piece in pieces)
    made = PolygonConstraint(corners_deg=corners, containment=_containment(fields))
    _ = made.sky_map  # refuses what is no polygon while its sender can still be asked
    return made


def area_note(kind: str) -> str:
    """What is taken for granted about an area that does not say what it holds.

    Parameters
    ----------
    kind : str    what the area is called

    Returns
    -------
    str    a plain sentence

    Source: our own.
    """
    share = 100.0 * DEFAULT_AREA_CONTAINMENT
    return f"The {kind} does not say what it holds; {share:g} % inside was assumed."


def _containment(fields: Mapping[str, Any]) -> float:
    return number_from(
        fields, "containment", least=0.01, most=0.9999, default=DEFAULT_AREA_CONTAINMENT
    )


def _moc(fields: Mapping[str, Any], open_map: Callable[[str], bytes] | None) -> Moc:
    given, name = fields.get("moc"), fields.get("file")
    if (given is None) == (name is None):
        raise _moc_error("its moc has neither or both of moc and file")
    if isinstance(given, str):
        return moc_from_ascii(given)
    if isinstance(given, Mapping):
        return moc_from_json(given)
    if given is not None:
        raise _moc_error(f"its moc is of type {type(given).__name__}")
    is_plain = isinstance(name, str) and name != "" and not set(name) & set("/\\\0")
    if not isinstance(name, str) or not is_plain or open_map is None:
        raise _moc_error(f"it names the coverage map {name!r}, which cannot be looked for"[:300])
    return read_moc(open_map(name))


def _corner(piece: object) -> tuple[float, float]:
    if not isinstance(piece, list) or len(piece) != 2:
        raise _corners_error(f"a corner of its polygon is {piece!r}"[:300])
    named = {"ra_deg": piece[0], "dec_deg": piece[1]}
    ra_deg = number_from(named, "ra_deg", least=0.0, most=360.0) % 360.0
    return ra_deg, number_from(named, "dec_deg", least=-90.0, most=90.0)


def _corners_error(given: str) -> AlertError:
    return AlertError(
        given=given,
        allowed=f"3 to {MOST_CORNERS} corners, each [right ascension, declination] in degrees",
        advice="compare with the example alerts in fixtures/alerts",
    )


def _moc_error(given: str) -> AlertError:
    return AlertError(
        given=given,
        allowed='moc as text ("1/1 2 4 8/") or an object, or file: a plain name beside the alert',
        advice="write the coverage map into the alert, or give the MOC file itself",
    )
