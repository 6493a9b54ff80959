"""May this instrument look there then? The Sun first, then the horizon."""

from skytiles.night.altitude import altitudes_deg
from skytiles.night.place import Place
from skytiles.night.solar_safety import solar_problems

__all__ = ["horizon_problems", "solar_problems"]


def horizon_problems(
    place: Place, *, ra_deg: float, dec_deg: float, start_mjd: float, end_mjd: float
) -> list[str]:
    """A tile that is too low at the start or at the end of its series."""
    lowest = min(_altitude_deg(place, ra_deg, dec_deg, mjd) for mjd in (start_mjd, end_mjd))
    limit_deg = place.min_altitude_deg
    if lowest < limit_deg:
        return [f"The tile is at {lowest:.0f} degrees then; this site begins at {limit_deg:.0f}."]
    return []


def _altitude_deg(place: Place, ra_deg: float, dec_deg: float, mjd: float) -> float:
    return float(altitudes_deg([place], [ra_deg], [dec_deg], [mjd])[0, 0, 0])
