"""Where and when in a VOEvent message: any coordinate system of the standard, as UTC and ICRS."""

import math
from dataclasses import dataclass
from itertools import product

from skytiles.errors import AlertError
from skytiles.region.constraints import ConeConstraint, EllipseConstraint
from skytiles.region.event_time import earth_delay_s, mjd_of_words, utc_mjd
from skytiles.region.fk5 import icrs_from_fk5_deg
from skytiles.region.xml_tree import XmlElement
from skytiles.sphere.angles import unit_vectors
from skytiles.sphere.time_scales import DAY_S

# Time scale, frame and place of the clock. Source: IVOA VOEvent 2.0, section 3.4.1.
_CLOCKS = product(("TT", "UTC", "GPS"), ("ICRS", "FK5"), ("TOPO", "GEO"))
SYSTEMS = (*("-".join(clock) for clock in _CLOCKS), "TDB-ICRS-BARY", "TDB-FK5-BARY")
DEFAULT_SYSTEM = "UTC-ICRS-TOPO"
# Words of VOEvent 2.1's TimeFrame and SpaceFrame, and what they are called in the list above.
_FRAME_WORDS = {
    "TOPOCENTER": "TOPO",
    "TOPOCENTRE": "TOPO",
    "GEOCENTER": "GEO",
    "GEOCENTRE": "GEO",
    "BARYCENTER": "BARY",
    "BARYCENTRE": "BARY",
}
# Radius of a position that comes without its error, degrees.
ASSUMED_RADIUS_DEG = 1.0
_LEAST_RADIUS_DEG, _LARGEST_RADIUS_DEG = 1e-4, 90.0
_DEGREES = {"", "deg", "degree", "degrees", "deg deg", "deg-deg"}
_RA_NAMES, _DEC_NAMES = {"", "ra", "alpha"}, {"", "dec", "decl", "delta"}
Placed = ConeConstraint | EllipseConstraint


@dataclass(frozen=True)
class WhereWhen:
    """What could be read; the time is UTC at the Earth."""

    event_mjd: float | None
    direction: Placed | None
    notes: tuple[str, ...]


def read_where_when(part: XmlElement | None, *, version: str) -> WhereWhen:
    """Direction and time of a message.

    Parameters
    ----------
    part : XmlElement or None    its WhereWhen
    version : str    2.0 or 2.1

    Returns
    -------
    WhereWhen    AlertError for what breaks the standard or is no place on the sky

    Source: IVOA VOEvent 2.0, section 3.4; 2.1 adds Error2 and positions without an error.
    """
    location = part.find("ObsDataLocation", "ObservationLocation") if part else None
    if location is None:
        return WhereWhen(None, None, ("The message says neither where nor when.",))
    notes: list[str] = []
    scale, frame, place = _system(location, notes).split("-")
    direction = _direction(location, notes, frame=frame, version=version)
    mjd = _event_mjd(location, notes, scale=scale)
    if mjd is not None and place == "BARY":
        mjd = _at_the_earth(mjd, direction, notes)
    return WhereWhen(mjd, direction, tuple(notes))


def _system(location: XmlElement, notes: list[str]) -> str:
    coords = location.find("AstroCoords")
    stated = location.find("AstroCoordSystem")
    named = [
        coords.attributes.get("coord_system_id", "") if coords else "",
        stated.attributes.get("id", "") if stated else "",
        _system_of_frames(stated) if stated else "",
    ]
    given = next((name.strip() for name in named if name.strip()), "")
    if not given:
        notes.append(f"The message names no coordinate system; {DEFAULT_SYSTEM} was taken.")
        return DEFAULT_SYSTEM
    if given not in SYSTEMS:
        raise AlertError(
            given=f"its coordinate system is {given[:60]!r}",
            allowed=", ".join(SYSTEMS),
            advice="type the direction by hand, in ICRS and UTC",
        )
    return given


def _system_of_frames(stated: XmlElement) -> str:
    """The name of a system spelled out in frames (2.1); elements may hold or be the word."""
    words = [w.upper() for e in stated.everything() for w in (e.name, *e.text.split())]
    plain = [_FRAME_WORDS.get(word, word) for word in words]
    found = [
        next((word for word in plain if word in choices), None)
        for choices in (("TT", "UTC", "GPS", "TDB"), ("ICRS", "FK5"), ("TOPO", "GEO", "BARY"))
    ]
    return "-".join(word for word in found if word) if all(found) else ""


# When.


def _event_mjd(location: XmlElement, notes: list[str], *, scale: str) -> float | None:
    coords = location.find("AstroCoords")
    words = coords.text_of("Time", "TimeInstant", "ISOTime") if coords else ""
    if not words and coords is not None:
        words = _interval_start(coords)
        if words:
            notes.append("The message gives an interval; its start was taken as the event.")
    if not words:
        return None
    mjd = utc_mjd(mjd_of_words(words), scale)
    if scale != "UTC":
        notes.append(f"The event's time was turned from {scale} to UTC.")
    stated = coords.find("Time") if coords else None
    error = stated.text_of("Error") if stated else ""
    if stated is not None and error:
        unit = stated.attributes.get("unit", "s")
        notes.append(f"The event's time has an error of {error[:40]} {unit[:20]}.")
    return mjd


def _interval_start(coords: XmlElement) -> str:
    """The first time in a TimeInterval, wherever the message writes it."""
    intervals = [e for e in coords.everything() if e.name == "TimeInterval"]
    below = [e for interval in intervals for e in interval.everything()]
    return next((e.text.strip() for e in below if "T" in e.text and e.text.strip()), "")


def _at_the_earth(mjd: float, direction: Placed | None, notes: list[str]) -> float:
    if direction is None:
        notes.append(
            "The event's time is that at the barycentre; without a direction it may be 8.4 minutes "
            "off at the Earth."
        )
        return mjd
    delay_s = earth_delay_s(mjd, unit_vectors(direction.ra_deg, direction.dec_deg))
    notes.append(
        f"The event's time was turned from the barycentre to the Earth ({-delay_s:+.1f} s)."
    )
    return mjd - delay_s / DAY_S


# Where.


def _direction(
    location: XmlElement, notes: list[str], *, frame: str, version: str
) -> Placed | None:
    coords = location.find("AstroCoords")
    position = coords.find("Position2D") if coords else None
    values = position.find("Value2") if position else None
    if coords is not None and position is None:
        position = coords.find("Position3D")
        values = position.find("Value3") if position else None
    if position is None or values is None:
        named = coords.text_of("PositionName") if coords else ""
        lookup = f" It names {named[:60]!r}, which is not looked up." if named else ""
        notes.append(f"The message gives no position.{lookup}")
        return None
    scale = _degrees_per_unit(position)
    first, second = (scale * _number(values, name) for name in ("C1", "C2"))
    is_turned = _is_declination_first(position)
    ra_deg, dec_deg = (second, first) if is_turned else (first, second)
    _refuse_bad_position(ra_deg, dec_deg)
    if frame == "FK5":
        ra_deg, dec_deg = icrs_from_fk5_deg(ra_deg, dec_deg)
        notes.append("The position was turned from FK5 to ICRS.")
    radii = _radii_deg(position, version=version, scale=scale)
    return _placed(ra_deg % 360.0, dec_deg, radii[::-1] if is_turned else radii, notes)


def _placed(
    ra_deg: float, dec_deg: float, radii_deg: tuple[float, ...], notes: list[str]
) -> Placed:
    if not radii_deg or max(radii_deg) == 0.0:
        notes.append(
            "The message gives no error of its position; "
            f"a radius of {ASSUMED_RADIUS_DEG:g} degree (68 %) was assumed."
        )
        return ConeConstraint(ra_deg, dec_deg, ASSUMED_RADIUS_DEG)
    notes.append("The message does not say what its radius holds; 68 % (1.515 sigma) was assumed.")
    sizes = [max(radius, _LEAST_RADIUS_DEG) for radius in radii_deg]
    if len(set(sizes)) == 1:
        return ConeConstraint(ra_deg, dec_deg, sizes[0])
    is_tall = sizes[1] > sizes[0]
    return EllipseConstraint(
        ra_deg, dec_deg, max(sizes), min(sizes), position_angle_deg=0.0 if is_tall else 90.0
    )


def _radii_deg(position: XmlElement, *, version: str, scale: float) -> tuple[float, ...]:
    """One radius, or one along each axis on the sky; none when the message gives none."""
    if position.find("Error2Radius") is not None:
        radii: tuple[float, ...] = (_number(position, "Error2Radius"),)
    elif version == "2.0" and position.name == "Position2D":
        raise AlertError(
            given="its Position2D has no Error2Radius",
            allowed="an Error2Radius beside each position (VOEvent 2.0; 2.1 may leave it out)",
            advice="type the direction by hand with a radius that you trust",
        )
    else:
        errors = position.find("Error2")
        radii = tuple(_number(errors, name) for name in ("C1", "C2")) if errors else ()
    radii = tuple(scale * radius for radius in radii)
    if any(not 0.0 <= radius <= _LARGEST_RADIUS_DEG for radius in radii):
        raise AlertError(
            given=f"its position has an error of {max(radii, key=abs):g} degrees",
            allowed=f"0 to {_LARGEST_RADIUS_DEG:g} degrees",
            advice="type the direction by hand with a radius that you trust",
        )
    return radii


def _degrees_per_unit(position: XmlElement) -> float:
    unit = " ".join(position.attributes.get("unit", "").lower().split())
    if unit in _DEGREES:
        return 1.0
    if unit in ("rad", "radian", "radians"):
        return math.degrees(1.0)
    raise AlertError(
        given=f"its position is in {unit[:40]!r}",
        allowed="degrees (deg) or radians (rad)",
        advice="type the direction by hand, in degrees",
    )


def _is_declination_first(position: XmlElement) -> bool:
    first, second = (position.text_of(name).lower() for name in ("Name1", "Name2"))
    if first in _RA_NAMES and second in _DEC_NAMES:
        return False
    if first in _DEC_NAMES and second in _RA_NAMES:
        return True
    raise AlertError(
        given=f"its coordinates are called {first[:30]!r} and {second[:30]!r}",
        allowed="RA and Dec",
        advice="type the direction by hand, as right ascension and declination",
    )


def _number(parent: XmlElement, name: str) -> float:
    words = parent.text_of(name)
    try:
        value = float(words)
    except ValueError:
        value = math.nan
    if not math.isfinite(value):
        raise AlertError(
            given=f"its {parent.name} has {name} = {words[:40]!r}",
            allowed="a finite number",
            advice="ask the sender for the message again, or type the direction by hand",
        )
    return value


def _refuse_bad_position(ra_deg: float, dec_deg: float) -> None:
    if not (-360.0 <= ra_deg <= 360.0 and -90.0 <= dec_deg <= 90.0):
        raise AlertError(
            given=f"its position is RA {ra_deg:g}, Dec {dec_deg:g} degrees",
            allowed="right ascension 0 to 360 and declination -90 to 90",
            advice="ask the sender for the message again, or type the direction by hand",
        )
