"""Several pictures of one exposure: one frame."""

import math
from collections.abc import Sequence

import numpy as np
from numpy.typing import NDArray

from skytiles.errors import FootprintError
from skytiles.sphere.angles import ras_decs_deg, unit_vectors
from skytiles.tiling.footprint import Footprint, refuse_bad_position

Floats = NDArray[np.float64]

_MOST_PARTS = 256


def mosaic_footprint(
    parts: Sequence[Footprint], *, ra_deg: float | None = None, dec_deg: float | None = None
) -> Footprint:
    """Frame of several pictures that were exposed together: one frame, whatever lies between them.

    Parameters
    ----------
    parts : Footprint    1 to 256 polygons or circles
    ra_deg, dec_deg : float or None    the middle of the field; None: the middle of the area

    Returns
    -------
    Footprint    FootprintError for no parts or too many, or for parts round the whole sky

    Source: definition; a pixel is under it when it is under one of its parts.
    """
    leaves = [part for part in parts if part.shape != "mosaic"]
    middle = sum((part.area_deg2 * part.centre for part in leaves), np.zeros(3))
    borders = [_border(part) for part in leaves]
    if ra_deg is not None and dec_deg is not None:
        refuse_bad_position(ra_deg, dec_deg)
        middle = unit_vectors(ra_deg, dec_deg)
    is_near = len(leaves) > 0 and all((border @ middle > 0.0).all() for border in borders)
    if not is_near or len(leaves) < len(parts) or len(leaves) > _MOST_PARTS:
        raise FootprintError(
            given=f"a mosaic of {len(parts)} pictures",
            allowed=f"1 to {_MOST_PARTS} polygons or circles on one side of the sky",
            advice="report frames that were not exposed together one by one",
        )
    ra, dec = ras_decs_deg(middle)
    return Footprint("mosaic", float(ra), float(dec), np.concatenate(borders), pieces=tuple(leaves))


def _border(part: Footprint) -> Floats:
    """Points on the border: the corners, or twelve of a circle."""
    if part.shape != "circle":
        return part.corners
    turns = np.arange(0.0, 360.0, 30.0)
    aside = np.cross(part.centre, np.eye(3)[np.argmin(np.abs(part.centre))])
    aside /= np.linalg.norm(aside)
    across = np.cross(part.centre, aside)
    rim = np.multiply.outer(np.cos(np.deg2rad(turns)), aside)
    rim += np.multiply.outer(np.sin(np.deg2rad(turns)), across)
    radius = math.radians(part.diameter_deg / 2.0)
    return np.asarray(math.cos(radius) * part.centre + math.sin(radius) * rim)
