"""Tiles under a new revision of the region: the old ones keep their numbers, new ones are added."""

from collections.abc import Iterable, Sequence
from dataclasses import dataclass

from django.db import connection

import campaigns.bridge as bridge
from campaigns.actions.lay_grids import Size, grid_rows, number_from
from campaigns.models import Campaign, Tile
from skytiles.region.region import Region
from skytiles.tiling.lay_tiles import LEAST_PROBABILITY


@dataclass(frozen=True)
class Relaid:
    """What becomes of the tiles; nothing is written yet."""

    # Tiles that were there before, with their new probability.
    moved: Sequence[Tile]
    new: Sequence[Tile]
    # Numbers of tiles that lost the region, and of those that got it back.
    dropped: Sequence[int]
    back: Sequence[int]


def relaid_tiles(campaign: Campaign, region: Region, *, sizes: Iterable[Size]) -> Relaid:
    """The region's probability under every tile, and the tiles that are missing.

    A grid is the same lattice for every region, so that a tile which is there already is found
    again by its place.
    """
    tiles = list(Tile.objects.filter(campaign=campaign).order_by("number"))
    shares = bridge.tile_shares(tiles, region)
    was_dropped = {tile.number for tile in tiles if tile.is_dropped}
    for tile in tiles:
        tile.probability = shares[tile.number]
        tile.is_dropped = tile.probability < LEAST_PROBABILITY
    is_dropped = {tile.number for tile in tiles if tile.is_dropped}
    return Relaid(
        moved=tiles,
        new=_missing_tiles(campaign, region, tiles, sizes=sizes),
        dropped=sorted(is_dropped - was_dropped),
        back=sorted(was_dropped - is_dropped),
    )


def _missing_tiles(
    campaign: Campaign, region: Region, tiles: Sequence[Tile], *, sizes: Iterable[Size]
) -> list[Tile]:
    known = {_place(tile) for tile in tiles}
    # Grids in the order in which they were laid, then those of new gear.
    laid = dict.fromkeys((tile.width_deg, tile.height_deg) for tile in tiles)
    wanted = dict.fromkeys([*laid, *sizes])
    rows = [
        row
        for size in wanted
        for row in grid_rows(campaign, region, size=size, first_number=1)
        if _place(row) not in known
    ]
    number_from(rows, max((tile.number for tile in tiles), default=0) + 1)
    return rows


def _place(tile: Tile) -> tuple[float, float, float, float]:
    return (tile.width_deg, tile.height_deg, round(tile.ra_deg, 7), round(tile.dec_deg, 7))


def write_tiles(relaid: Relaid) -> None:
    """Write them; thousands of rows change, so it is one prepared statement."""
    values = [(tile.probability, tile.is_dropped, tile.pk) for tile in relaid.moved]
    if values:
        with connection.cursor() as cursor:
            cursor.executemany(
                "UPDATE campaigns_tile SET probability = %s, is_dropped = %s WHERE id = %s", values
            )
    Tile.objects.bulk_create(relaid.new, batch_size=200)
