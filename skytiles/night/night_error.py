"""What went wrong in a question about the night."""

from skytiles.errors import SkytilesError


class NightError(SkytilesError):
    """A place, time or direction that no night can be computed from."""

    code = "bad-night"
