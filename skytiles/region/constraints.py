"""Pieces of direction information: sky map, cone, ellipse."""

from dataclasses import dataclass, field
from typing import Any, ClassVar, get_args

import numpy as np
from numpy.typing import NDArray

from skytiles.errors import AlertError
from skytiles.region.areas import MocConstraint, PolygonConstraint
from skytiles.region.arrival_times import ArrivalTimesConstraint
from skytiles.region.containment import DEFAULT_CONTAINMENT, chords_deg, radius_in_sigmas
from skytiles.region.distance import DistanceConstraint
from skytiles.region.sky_map import SkyMap
from skytiles.region.targets import TargetListConstraint
from skytiles.sphere.angles import position_angles_deg, separations_deg

Floats = NDArray[np.float64]


@dataclass(frozen=True)
class EllipseConstraint:
    """Two-dimensional Gaussian with an ellipse of stated containment."""

    kind: ClassVar[str] = "ellipse"

    ra_deg: float
    dec_deg: float
    semi_major_deg: float
    semi_minor_deg: float
    # Direction of the major axis, from north through east.
    position_angle_deg: float = 0.0
    containment: float = DEFAULT_CONTAINMENT
    # In quadrature with both axes, same containment.
    systematic_deg: float = 0.0

    @property
    def sigmas_deg(self) -> tuple[float, float]:
        """Standard deviations along the major and minor axis."""
        axes = np.hypot([self.semi_major_deg, self.semi_minor_deg], self.systematic_deg)
        major, minor = chords_deg(np.minimum(axes, 180.0)) / radius_in_sigmas(self.containment)
        return float(major), float(minor)

    def log_likelihoods(self, ras_deg: Floats, decs_deg: Floats) -> Floats:
        """Natural logarithm of the Gaussian, 0 at the centre."""
        distances = chords_deg(separations_deg(self.ra_deg, self.dec_deg, ras_deg, decs_deg))
        angles = position_angles_deg(self.ra_deg, self.dec_deg, ras_deg, decs_deg)
        turns_rad = np.deg2rad(angles - self.position_angle_deg)
        major, minor = self.sigmas_deg
        along, across = np.cos(turns_rad) / major, np.sin(turns_rad) / minor
        return np.asarray(-0.5 * distances**2 * (along**2 + across**2))

    def to_json(self) -> dict[str, Any]:
        """The constraint as in an alert file."""
        return {
            "type": self.kind,
            "ra_deg": self.ra_deg,
            "dec_deg": self.dec_deg,
            "semi_major_deg": self.semi_major_deg,
            "semi_minor_deg": self.semi_minor_deg,
            "position_angle_deg": self.position_angle_deg,
            "containment": self.containment,
            "systematic_deg": self.systematic_deg,
        }


@dataclass(frozen=True)
class ConeConstraint:
    """Two-dimensional Gaussian with a circle of stated containment."""

    kind: ClassVar[str] = "cone"

    ra_deg: float
    dec_deg: float
    radius_deg: float
    containment: float = DEFAULT_CONTAINMENT
    # In quadrature with the radius, same containment.
    systematic_deg: float = 0.0

    @property
    def sigmas_deg(self) -> tuple[float, float]:
        """Standard deviation, twice: a circle is an ellipse with equal axes."""
        radius = min(float(np.hypot(self.radius_deg, self.systematic_deg)), 180.0)
        sigma = float(chords_deg(radius)) / radius_in_sigmas(self.containment)
        return sigma, sigma

    def log_likelihoods(self, ras_deg: Floats, decs_deg: Floats) -> Floats:
        """Natural logarithm of the Gaussian, 0 at the centre."""
        distances = chords_deg(separations_deg(self.ra_deg, self.dec_deg, ras_deg, decs_deg))
        return np.asarray(-0.5 * (distances / self.sigmas_deg[0]) ** 2)

    def to_json(self) -> dict[str, Any]:
        """The constraint as in an alert file."""
        return {
            "type": self.kind,
            "ra_deg": self.ra_deg,
            "dec_deg": self.dec_deg,
            "radius_deg": self.radius_deg,
            "containment": self.containment,
            "systematic_deg": self.systematic_deg,
        }


@dataclass(frozen=True)
class MapConstraint:
    """A sky map: a probability for each of its cells."""

    kind: ClassVar[str] = "map"

    sky_map: SkyMap = field(repr=False)
    file: str = ""

    def to_json(self) -> dict[str, Any]:
        """The constraint as in an alert file: the map itself stays in its file."""
        return {"type": self.kind, "file": self.file}


# What is given as cells, and all that says where the source is by itself. A target list needs the
# smooth prior beside it, and a distance says nothing about the direction.
MapLike = MapConstraint | MocConstraint | PolygonConstraint
Directional = MapLike | ConeConstraint | EllipseConstraint | ArrivalTimesConstraint
AnyConstraint = Directional | TargetListConstraint | DistanceConstraint
CONSTRAINT_KINDS = tuple(sorted(one.kind for one in get_args(AnyConstraint)))


def unknown_type_error(given: object) -> AlertError:
    """The refusal of a constraint type that we do not read.

    Parameters
    ----------
    given : object    what stood under "type"

    Returns
    -------
    AlertError    to be raised

    Source: our own.
    """
    return AlertError(
        given=f"it has a constraint of type {given!r}",
        allowed="one of " + ", ".join(f'"{kind}"' for kind in CONSTRAINT_KINDS),
        advice="write the direction as one of these, or take the constraint out",
    )
