"""Refusals that only campaigns know; the general ones stand in observers.errors."""

from observers.errors import (
    CampaignError,
    Conflict,
    InvalidInput,
    NotAllowed,
    NotFound,
    NotSignedIn,
    refuse_problems,
)


class TileTaken(Conflict):
    """Somebody else holds the tile; `extras["alternative"]` is the best tile now, or null."""

    code = "tile-taken"
    title = "The tile is taken"


class CampaignClosed(Conflict):
    """The campaign takes nothing more."""

    code = "campaign-closed"
    title = "The campaign is closed"


class CampaignNotOpen(Conflict):
    """The campaign is still a draft."""

    code = "campaign-not-open"
    title = "The campaign is not open yet"


class ClaimEnded(Conflict):
    """The claim was met, released or lapsed before."""

    code = "claim-ended"
    title = "The claim has ended"


class TileDropped(Conflict):
    """A revision of the region left nothing in the tile."""

    code = "tile-dropped"
    title = "The tile dropped out of the region"


class RegionMoved(Conflict):
    """Somebody else revised the region first, again and again."""

    code = "region-moved"
    title = "The region was revised meanwhile"


class MessagesApart(Conflict):
    """Messages more than 10 s apart are combined only on a coordinator's word."""

    code = "messages-apart"
    title = "The messages are far apart in time"


class UnsafeSun(CampaignError):
    """Solar safety: never softened, for nobody."""

    code = "unsafe-sun"
    status = 422
    title = "The Sun is too near or not down"


class TileNotUp(CampaignError):
    """The tile cannot be seen from that site at that time."""

    code = "tile-not-up"
    status = 422
    title = "The tile is not up then"


class TestAlertRefused(CampaignError):
    """A message marked as a test can only become a rehearsal."""

    code = "test-alert"
    status = 422
    title = "A test alert opens no real campaign"


class KeyUsedOtherwise(CampaignError):
    """The same idempotency key came with another body."""

    code = "key-used-otherwise"
    status = 422
    title = "This key belongs to another request"


class ClockRefused(Conflict):
    """The campaign clock cannot be moved like that."""

    code = "clock-refused"
    title = "The clock cannot be moved so"


__all__ = [
    "CampaignClosed",
    "CampaignError",
    "CampaignNotOpen",
    "ClaimEnded",
    "ClockRefused",
    "Conflict",
    "InvalidInput",
    "KeyUsedOtherwise",
    "MessagesApart",
    "NotAllowed",
    "NotFound",
    "NotSignedIn",
    "RegionMoved",
    "TestAlertRefused",
    "TileDropped",
    "TileNotUp",
    "TileTaken",
    "UnsafeSun",
    "refuse_problems",
]
