"""Raise when a rule says that an instrument may not look there then."""

from datetime import datetime

import campaigns.bridge as bridge
from campaigns.errors import TileNotUp, UnsafeSun
from campaigns.models import Tile
from campaigns.rules.sky import reach_problems, solar_problems
from observers.bridge import mount_of, place_of, solar_rating_of
from observers.models import Instrument
from observers.rules.problem import Problem


def refuse_unsafe_sun(
    instrument: Instrument,
    tile: Tile,
    *,
    starts_at: datetime,
    ends_at: datetime,
    coming_from: Tile | None = None,
) -> None:
    """Solar safety over the whole lease, the way from the tile before included."""
    found = solar_problems(
        place_of(instrument.site),
        solar_rating_of(instrument),
        tile.ra_deg,
        tile.dec_deg,
        start_mjd=bridge.mjd_of(starts_at),
        end_mjd=bridge.mjd_of(ends_at),
        from_ra_deg=coming_from.ra_deg if coming_from else None,
        from_dec_deg=coming_from.dec_deg if coming_from else None,
    )
    if found:
        raise UnsafeSun(
            " ".join(found),
            "Take a tile farther from the Sun, or wait until the Sun is well down.",
            problems=[Problem("starts_at", sentence) for sentence in found],
        )


def refuse_below_horizon(
    instrument: Instrument, tile: Tile, *, starts_at: datetime, ends_at: datetime
) -> None:
    """The tile must stay above the site's skyline and within the mount's reach in its series."""
    found = reach_problems(
        place_of(instrument.site),
        mount_of(instrument),
        tile.ra_deg,
        tile.dec_deg,
        start_mjd=bridge.mjd_of(starts_at),
        end_mjd=bridge.mjd_of(ends_at),
    )
    if found:
        raise TileNotUp(
            " ".join(found),
            "Choose a later start or another tile; Tonight shows the best one now.",
            problems=[Problem("starts_at", sentence) for sentence in found],
        )
