"""Footprints as they are stored with a frame."""

from collections.abc import Mapping
from typing import Any

from skytiles.errors import FootprintError
from skytiles.tiling.footprint import (
    Footprint,
    circle_footprint,
    corner_vectors,
    outline_footprint,
)
from skytiles.tiling.mosaic import mosaic_footprint


def footprint_from_json(fields: Mapping[str, Any]) -> Footprint:
    """Shape of a frame as stored.

    Parameters
    ----------
    fields : dict    {"shape": "polygon", "corners_deg": [[ra, dec], ...]},
        {"shape": "circle", "ra_deg": x, "dec_deg": y, "diameter_deg": d} or
        {"shape": "mosaic", "ra_deg": x, "dec_deg": y, "parts": [...]}

    Returns
    -------
    Footprint    FootprintError for anything else

    Source: our own JSON.
    """
    try:
        if fields["shape"] == "circle":
            names = ("ra_deg", "dec_deg", "diameter_deg")
            return circle_footprint(**{name: float(fields[name]) for name in names})
        if fields["shape"] == "polygon":
            return outline_footprint(corner_vectors(fields["corners_deg"]))
        if fields["shape"] == "mosaic":
            middle = {name: float(fields[name]) for name in ("ra_deg", "dec_deg")}
            return mosaic_footprint([footprint_from_json(p) for p in fields["parts"]], **middle)
    except (KeyError, TypeError) as error:
        raise _json_error(f"a footprint that lacks or garbles {error}") from error
    except FootprintError:
        raise
    except ValueError as error:
        raise _json_error(f"a footprint with {error}") from error
    raise _json_error(f"shape {fields['shape']!r}")


def _json_error(given: str) -> FootprintError:
    return FootprintError(
        given=given,
        allowed='"polygon" with corners_deg, "circle" with ra_deg, dec_deg, diameter_deg, or '
        '"mosaic" with ra_deg, dec_deg, parts',
        advice="send the footprint as the server once gave it",
    )
