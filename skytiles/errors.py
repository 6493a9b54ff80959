"""What the science refuses: one error with three parts, and its children by subject."""


class SkytilesError(ValueError):
    """Input that cannot be used: what was given, what is allowed, what to do.

    Parameters
    ----------
    given : str    what came in, in plain words
    allowed : str    what would have been accepted
    advice : str    what the person can do now

    Source: our own.
    """

    code: str = "bad-input"

    def __init__(self, given: str, allowed: str, advice: str) -> None:
        self.given = given
        self.allowed = allowed
        self.advice = advice
        super().__init__(f"Given: {given}. Allowed: {allowed}. What to do: {advice}.")

    def __reduce__(self) -> tuple[type["SkytilesError"], tuple[str, str, str]]:
        """Keep the three parts when the error crosses a process."""
        return type(self), (self.given, self.allowed, self.advice)


class AlertError(SkytilesError):
    """An alert that cannot be read or makes no sense."""

    code = "bad-alert"


class MapFileError(SkytilesError):
    """A sky map file that cannot be read or is no probability map."""

    code = "bad-map"


class RegionError(SkytilesError):
    """Constraints that give no usable region."""

    code = "bad-region"


class FootprintError(SkytilesError):
    """A frame or tile shape that cannot stand on the sky."""

    code = "bad-footprint"


class HeaderError(SkytilesError):
    """A frame header without what the ledger needs."""

    code = "bad-header"


class SourceError(SkytilesError):
    """A source model that cannot be used."""

    code = "bad-source-model"


class LedgerError(SkytilesError):
    """A frame that the ledger cannot account for."""

    code = "bad-ledger-entry"


class PlannerError(SkytilesError):
    """A planning problem that cannot be stated."""

    code = "bad-plan-problem"
