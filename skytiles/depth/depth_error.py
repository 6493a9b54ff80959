"""What went wrong in a depth estimate."""

from skytiles.errors import SkytilesError


class DepthError(SkytilesError):
    """Gear, sky or limit that no depth can be computed from."""

    code = "bad-depth"
