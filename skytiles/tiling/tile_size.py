"""How large a tile is for a field of view."""

import math
from typing import Literal

from skytiles.errors import FootprintError

# Steps of a ladder of 25 to the decade are 9.65 %: below 10 %.
_STEPS_PER_DECADE = 25
_LARGEST_TILE_DEG = 60.0
_SMALLEST_FIELD_DEG, _LARGEST_FIELD_DEG = 0.001, 170.0

FieldShape = Literal["rectangle", "circle"]


def ladder_side_deg(side_deg: float) -> float:
    """A side rounded down to the ladder that like gear shares.

    Parameters
    ----------
    side_deg : float    degrees, positive

    Returns
    -------
    float    degrees, at most 10 % smaller; a side on the ladder stays

    Source: our definition (DEVELOPERS.md, regions and tiles).
    """
    step = math.floor(_STEPS_PER_DECADE * math.log10(side_deg))
    # Rungs are rounded to four digits, so the neighbours are tried as well.
    rungs = [_rung_deg(step + offset) for offset in (2, 1, 0, -1, -2)]
    return next(rung for rung in rungs if rung <= side_deg * (1.0 + 1e-9))


def _rung_deg(step: int) -> float:
    return float(f"{10.0 ** (step / _STEPS_PER_DECADE):.4g}")


def tile_size_deg(
    width_deg: float,
    height_deg: float,
    *,
    shape: FieldShape,
    rotation_deg: float | None,
    margin: float = 0.05,
) -> tuple[float, float]:
    """Sides of the north-up tile that one frame fills wherever the camera points a little off.

    Parameters
    ----------
    width_deg, height_deg : float    field of view, degrees; a circle has its diameter in both
    shape : str    "rectangle" or "circle"
    rotation_deg : float or None    position angle of the frame's height; None: not known
    margin : float    share of the field kept for pointing errors, 0..0.5

    Returns
    -------
    float, float    width and height, degrees, on the ladder

    Source: our definition (DEVELOPERS.md); inscribed squares and rectangles in its plane.
    """
    for name, side in (("width_deg", width_deg), ("height_deg", height_deg)):
        if not _SMALLEST_FIELD_DEG <= side <= _LARGEST_FIELD_DEG:
            raise FootprintError(
                given=f"{name} = {side}",
                allowed=f"{_SMALLEST_FIELD_DEG} to {_LARGEST_FIELD_DEG:g} degrees",
                advice="check the field of view of the instrument; it is in degrees",
            )
    width, height = _plane(width_deg * (1.0 - margin)), _plane(height_deg * (1.0 - margin))
    return _on_ladder(*_inscribed(width, height, shape=shape, rotation_deg=rotation_deg))


def _plane(angle_deg: float) -> float:
    """Full width in the plane that touches the sphere, in units of its distance."""
    return 2.0 * math.tan(math.radians(angle_deg) / 2.0)


def _on_ladder(width: float, height: float) -> tuple[float, float]:
    angles = (math.degrees(2.0 * math.atan(side / 2.0)) for side in (width, height))
    first, second = (ladder_side_deg(min(angle, _LARGEST_TILE_DEG)) for angle in angles)
    return first, second


def _inscribed(
    width: float, height: float, *, shape: FieldShape, rotation_deg: float | None
) -> tuple[float, float]:
    """Largest north-up rectangle inside the frame."""
    square = min(width, height) / math.sqrt(2.0)
    if shape == "circle" or rotation_deg is None:
        return square, square
    rectangle = _upright_rectangle(width, height, math.radians(rotation_deg))
    return max(rectangle, (square, square), key=lambda sides: sides[0] * sides[1])


def _upright_rectangle(width: float, height: float, turn_rad: float) -> tuple[float, float]:
    """The largest upright rectangle inside a turned one.

    A corner (x, y) of the upright one must satisfy x c + y s <= w and x s + y c <= h.
    """
    sin, cos = abs(math.sin(turn_rad)), abs(math.cos(turn_rad))
    short, long = min(width, height), max(width, height)
    if short <= 2.0 * sin * cos * long or abs(sin - cos) < 1e-12:
        # Only the long sides touch: two corners on each of them at most.
        half = short / 2.0
        return (half / sin, half / cos) if width >= height else (half / cos, half / sin)
    across = cos * cos - sin * sin
    return (width * cos - height * sin) / across, (height * cos - width * sin) / across
