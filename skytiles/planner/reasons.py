"""Why somebody gets nothing, in words for that person."""

from __future__ import annotations

NO_INSTRUMENT = "no instrument in use"
TILES_USED_UP = "all tiles for this night are used up"
NO_GRID = "the region has no tiles of this frame size"
BUSY = "busy with claims for all of that time"
TOO_NEAR_SUN = "what is up is too near the Sun for this instrument"
# No numbers: a plan's reasons are public, a skyline gives a home away.
OUT_OF_REACH = "what is up is behind the skyline of the site or out of the mount's reach"
TOO_SHALLOW = "the expected light is too faint for this instrument"
NOT_YET = "no light is expected to show before the end of this plan"
TAKEN = "every tile within reach is taken or offered to somebody else"
NOTHING_LEFT = "nothing left to find for this instrument: what is up has been searched"


def not_free(hours: float) -> str:
    """Sentence for somebody who has no time for a series.

    Parameters
    ----------
    hours : float    length of the plan

    Returns
    -------
    str
    """
    return f"not free for a whole series in the next {hours:g} h"


def no_darkness(hours: float) -> str:
    """Sentence for somebody whose sky stays too bright.

    Parameters
    ----------
    hours : float    length of the plan

    Returns
    -------
    str
    """
    return f"no darkness at this site in the next {hours:g} h"


def never_up(hours: float) -> str:
    """Sentence for somebody for whom the region stays too low while it is dark.

    Everybody may read it: it names no number of the site.

    Parameters
    ----------
    hours : float    length of the plan

    Returns
    -------
    str
    """
    return f"no tile above the site's lowest altitude in darkness in the next {hours:g} h"
