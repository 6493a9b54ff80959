"""What a revision of the region changed, in one sentence or two."""

from collections.abc import Mapping


def change_said(
    words: str,
    *,
    area_before_deg2: Mapping[str, float],
    area_deg2: Mapping[str, float],
    n_dropped: int,
    n_back: int,
    n_new: int,
) -> str:
    """The areas before and after, and the tiles that dropped out."""
    areas = (
        f"90 % within {_area(area_deg2['90'])} square degrees "
        f"(before: {_area(area_before_deg2['90'])})"
    )
    counts = ((n_dropped, "dropped out"), (n_back, "came back"), (n_new, "new"))
    tiles = [f"{n_tiles:,} {what}" for n_tiles, what in counts if n_tiles]
    moved = f"tiles: {', '.join(tiles)}" if tiles else "no tile dropped out"
    return f"{words}. {areas}; {moved}."


def _area(area_deg2: float) -> str:
    return f"{area_deg2:,.0f}" if area_deg2 >= 10.0 else f"{area_deg2:.2g}"
