"""Tiles for every frame size of the network."""

from collections.abc import Iterable
from datetime import datetime

from django.db.models import Max

import campaigns.bridge as bridge
from campaigns.actions.join_campaign import announce_observer
from campaigns.events.append import append_event
from campaigns.events.kinds import TilesLaid
from campaigns.models import Campaign, CampaignStatus, RegionRevision, Tile
from campaigns.rules.clock import campaign_now
from campaigns.selectors.shown import tile_shown
from observers.actions.write_transaction import write_transaction
from observers.bridge import tile_size_of
from observers.models import Instrument
from skytiles.region.region import Region
from skytiles.tiling.lay_tiles import lay_tiles
from skytiles.tiling.tile_size import tile_size_deg

Size = tuple[float, float]
MOST_TILES_PER_GRID = 2000
# Before anybody has registered an instrument: the field of a small telescope with a camera.
USUAL_FIELD_DEG = 2.0


def sizes_of(instruments: Iterable[Instrument]) -> list[Size]:
    """The distinct grid sizes of some instruments; like gear shares a grid."""
    sizes = sorted({tile_size_of(instrument) for instrument in instruments})
    return sizes or [_usual_size()]


def _usual_size() -> Size:
    return tile_size_deg(USUAL_FIELD_DEG, USUAL_FIELD_DEG, shape="rectangle", rotation_deg=0.0)


def grid_rows(campaign: Campaign, region: Region, *, size: Size, first_number: int) -> list[Tile]:
    """The tiles of one grid over the region, not saved yet."""
    width_deg, height_deg = size
    grid = lay_tiles(
        region, width_deg=width_deg, height_deg=height_deg, max_tiles=MOST_TILES_PER_GRID
    )
    places = zip(grid.ras_deg, grid.decs_deg, grid.probabilities, strict=True)
    return [
        Tile(
            campaign=campaign,
            number=first_number + index,
            ra_deg=float(ra_deg),
            dec_deg=float(dec_deg),
            width_deg=width_deg,
            height_deg=height_deg,
            probability=float(probability),
        )
        for index, (ra_deg, dec_deg, probability) in enumerate(places)
    ]


def grids_rows(campaign: Campaign, region: Region, *, sizes: Iterable[Size]) -> list[Tile]:
    """The tiles of several grids, numbered from 1."""
    rows: list[Tile] = []
    for size in sizes:
        rows += grid_rows(campaign, region, size=size, first_number=len(rows) + 1)
    return rows


def show_instrument(instrument: Instrument, *, wall_now: datetime) -> None:
    """Bring a new or changed instrument into every campaign that is not closed."""
    for campaign in Campaign.objects.exclude(status=CampaignStatus.CLOSED).order_by("pk"):
        lay_grid(campaign, instrument, wall_now=wall_now)
        announce_observer(campaign, instrument.owner, wall_now=wall_now)


def lay_grid(campaign: Campaign, instrument: Instrument, *, wall_now: datetime) -> int:
    """Lay the instrument's grid unless it is there already; returns the number of new tiles."""
    size = tile_size_of(instrument)
    if not instrument.is_in_use:
        return 0
    while not _has_grid(campaign, size):
        try:
            return _lay(campaign, size, wall_now=wall_now)
        except _RegionRevised:
            continue
    return 0


class _RegionRevised(Exception):
    """The region was revised while the grid was computed."""


def _lay(campaign: Campaign, size: Size, *, wall_now: datetime) -> int:
    row = _newest_region(campaign)
    # Computed before the transaction, which stays tiny.
    tiles = grid_rows(campaign, bridge.region_of(row), size=size, first_number=1)
    with write_transaction():
        if not tiles or _has_grid(campaign, size):
            return 0
        number_from(tiles, _newest_number(campaign) + 1)
        Tile.objects.bulk_create(tiles, batch_size=200)
        laid = TilesLaid(tiles={str(tile.number): tile_shown(tile) for tile in tiles})
        append_event(campaign.pk, laid, at=campaign_now(campaign, wall_now))
        # Asked last: the event holds the campaign's row, so no revision comes after this.
        if _newest_region(campaign).revision != row.revision:
            raise _RegionRevised
    return len(tiles)


def _newest_region(campaign: Campaign) -> RegionRevision:
    return RegionRevision.objects.filter(campaign=campaign).latest("revision")


def _has_grid(campaign: Campaign, size: Size) -> bool:
    rows = Tile.objects.filter(campaign=campaign, width_deg=size[0], height_deg=size[1])
    return rows.exists()


def _newest_number(campaign: Campaign) -> int:
    rows = Tile.objects.filter(campaign=campaign)
    return int(rows.aggregate(newest=Max("number"))["newest"] or 0)


def number_from(tiles: list[Tile], first: int) -> None:
    """Give tiles their numbers, one after the other."""
    for number, tile in enumerate(tiles, start=first):
        tile.number = number
