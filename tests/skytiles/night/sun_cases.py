"""Questions to the solar rule, and its limit written a second time."""

from skytiles.night.solar_safety import solar_problems

MINUTE = 1.0 / 1440.0


def ask(place, rating, target, start_mjd, end_mjd, before=None):
    """Problems of a lease; without a direction before, the instrument already points there."""
    from_ra_deg, from_dec_deg = before or target
    return solar_problems(
        place,
        rating,
        *target,
        start_mjd=start_mjd,
        end_mjd=end_mjd,
        from_ra_deg=from_ra_deg,
        from_dec_deg=from_dec_deg,
    )


def limit_deg(place):
    """The rule as the design states it: -1 degree less the dip of the horizon."""
    return -1.0 - 0.03 * max(place.height_m, 0.0) ** 0.5
