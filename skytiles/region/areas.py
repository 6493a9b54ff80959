"""Constraints that are flat inside an area: a coverage map, a polygon."""

from dataclasses import dataclass, field
from functools import cached_property
from typing import Any, ClassVar

import numpy as np

from skytiles.errors import AlertError
from skytiles.region.moc import Moc
from skytiles.region.polygon import polygon_moc
from skytiles.region.sky_map import SkyMap
from skytiles.sphere.healpix_door import MAX_ORDER

# What an area holds when a message does not say.
DEFAULT_AREA_CONTAINMENT = 0.9


@dataclass(frozen=True)
class MocConstraint:
    """Flat inside a coverage map with a stated containment, the rest over the remaining sky."""

    kind: ClassVar[str] = "moc"

    moc: Moc = field(repr=False)
    containment: float = DEFAULT_AREA_CONTAINMENT

    @cached_property
    def sky_map(self) -> SkyMap:
        """The area as a map of the whole sky."""
        return flat_map(self.moc, self.containment)

    def to_json(self) -> dict[str, Any]:
        """The constraint as in an alert file; it stands alone."""
        return {"type": self.kind, "moc": self.moc.to_ascii(), "containment": self.containment}


@dataclass(frozen=True)
class PolygonConstraint:
    """Flat inside a polygon of great circles with a stated containment, the rest outside."""

    kind: ClassVar[str] = "polygon"

    # Right ascension and declination of each corner, ICRS, once around in either direction.
    corners_deg: tuple[tuple[float, float], ...]
    containment: float = DEFAULT_AREA_CONTAINMENT

    @cached_property
    def moc(self) -> Moc:
        """The polygon's inside as cells."""
        return polygon_moc(self.corners_deg)

    @cached_property
    def sky_map(self) -> SkyMap:
        """The area as a map of the whole sky."""
        return flat_map(self.moc, self.containment)

    def to_json(self) -> dict[str, Any]:
        """The constraint as in an alert file."""
        return {
            "type": self.kind,
            "corners_deg": [list(corner) for corner in self.corners_deg],
            "containment": self.containment,
        }


def flat_map(moc: Moc, containment: float) -> SkyMap:
    """A map of the whole sky that is flat inside an area and flat outside it.

    Parameters
    ----------
    moc : Moc    the area
    containment : float    share of the probability inside, 0..1

    Returns
    -------
    SkyMap    AlertError for an area of nothing; an area that is the whole sky holds everything

    Source: definition.
    """
    if moc.n_covered == 0:
        raise AlertError(
            given="its coverage map covers nothing",
            allowed="an area of the sky",
            advice="give the area where the source may be",
        )
    rest = moc.complement()
    orders, pixels, probabilities = [], [], []
    for area, share in ((moc, containment if rest.n_covered else 1.0), (rest, 1.0 - containment)):
        area_orders, area_pixels = area.cells()
        shares = 4.0 ** -area_orders.astype(np.float64) / 12.0
        orders.append(area_orders)
        pixels.append(area_pixels)
        probabilities.append(shares * (share / max(area.sky_share, 1e-300)))
    all_orders, all_pixels = np.concatenate(orders), np.concatenate(pixels)
    sequence = np.argsort(all_pixels << 2 * (MAX_ORDER - all_orders), kind="stable")
    return SkyMap(
        orders=all_orders[sequence],
        pixels=all_pixels[sequence],
        probabilities=np.concatenate(probabilities)[sequence],
    )
