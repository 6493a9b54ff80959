"""What the science refuses: one error with three parts, and its children by subject."""


class SkytilesError(ValueError):
    """Input that cannot be used: what was given, what is allowed, what to do.

    Parameters
    ----------
    given : str    what came in, in plain words that follow "cannot be used:"
    allowed : str    what would have been accepted
    advice : str    what the person can do now; it becomes a sentence

    Source: our own.
    """

    code: str = "bad-input"
    # What cannot be used: the first words of the message.
    subject: str = "This"

    def __init__(self, given: str, allowed: str, advice: str) -> None:
        self.given = given
        self.allowed = allowed
        self.advice = _sentence(advice)
        super().__init__(given, allowed, advice)

    def __str__(self) -> str:
        return f"{self.detail} {self.advice}"

    def __reduce__(self) -> tuple[type["SkytilesError"], tuple[str, str, str], dict[str, str]]:
        """Keep the parts when the error crosses a process."""
        return type(self), (self.given, self.allowed, self.advice), dict(vars(self))

    @property
    def detail(self) -> str:
        """What is wrong, in two sentences."""
        return f"{self.subject} cannot be used: {self.given}. What is allowed: {self.allowed}."

    def about(self, subject: str) -> "SkytilesError":
        """Name what cannot be used as the person knows it; the first name given stays.

        Parameters
        ----------
        subject : str    a file name, or words that begin a sentence

        Returns
        -------
        SkytilesError    itself, to be raised

        Source: our own.
        """
        self.__dict__.setdefault("subject", subject)
        return self


def _sentence(words: str) -> str:
    ended = words if words.endswith((".", "!", "?")) else f"{words}."
    return ended[:1].upper() + ended[1:]


class AlertError(SkytilesError):
    """An alert that cannot be read or makes no sense."""

    code = "bad-alert"
    subject = "The alert"


class MapFileError(SkytilesError):
    """A sky map file that cannot be read or is no probability map."""

    code = "bad-map"
    subject = "The sky map"


class RegionError(SkytilesError):
    """Constraints that give no usable region."""

    code = "bad-region"
    subject = "The region"


class FootprintError(SkytilesError):
    """A frame or tile shape that cannot stand on the sky."""

    code = "bad-footprint"
    subject = "The footprint"


class HeaderError(SkytilesError):
    """A frame header without what the ledger needs."""

    code = "bad-header"
    subject = "The header of the frame"


class SourceError(SkytilesError):
    """A source model that cannot be used."""

    code = "bad-source-model"
    subject = "The source model"


class LedgerError(SkytilesError):
    """A frame that the ledger cannot account for."""

    code = "bad-ledger-entry"


class PlannerError(SkytilesError):
    """A planning problem that cannot be stated."""

    code = "bad-plan-problem"
