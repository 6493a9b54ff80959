"""The first moment at which an instrument can shoot a tile."""

from datetime import datetime, timedelta

import campaigns.bridge as bridge
from campaigns.models import Tile
from campaigns.rules.lease import LONGEST, MARGIN, series_length
from observers.bridge import mount_of, place_of, solar_rating_of
from observers.models import Instrument
from skytiles.night.windows import tile_windows


def get_first_start(instrument: Instrument, tile: Tile, *, now: datetime) -> datetime:
    """Now, or when the tile is up in darkness within the reach of a claim; `now` if never."""
    series = series_length(instrument)
    windows = tile_windows(
        place_of(instrument.site),
        tile.ra_deg,
        tile.dec_deg,
        start_mjd=bridge.mjd_of(now),
        hours=(LONGEST + MARGIN).total_seconds() / 3600.0,
        solar=solar_rating_of(instrument),
        mount=mount_of(instrument),
    )
    openings = [
        (_from(start_mjd, now=now), bridge.time_of(end_mjd)) for start_mjd, end_mjd in windows
    ]
    starts = [start for start, end in openings if start + series <= end]
    return starts[0] if starts else now


def _from(start_mjd: float, *, now: datetime) -> datetime:
    """A window's beginning; a second later, so that no rounding puts it before."""
    start = bridge.time_of(start_mjd)
    return now if start <= now else start + timedelta(seconds=1)
