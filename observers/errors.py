"""Refusals with a stable code: what every action raises and every edge shows in one shape."""

from collections.abc import Mapping, Sequence
from typing import Any, ClassVar

from observers.rules.problem import Problem


class CampaignError(Exception):
    """A use case that cannot be carried out, with what the person can do about it.

    `code` is stable: programs rely on it. `status` is the HTTP status it becomes at the edge.
    `problems` name single fields. `extras` holds further public fields of the problem object,
    such as an alternative tile.
    """

    code: ClassVar[str] = "refused"
    status: ClassVar[int] = 400
    title: ClassVar[str] = "This cannot be done"

    def __init__(
        self,
        detail: str,
        advice: str,
        *,
        problems: Sequence[Problem] = (),
        extras: Mapping[str, Any] | None = None,
    ) -> None:
        super().__init__(detail)
        self.detail = detail
        self.advice = advice
        self.problems = tuple(problems)
        self.extras: dict[str, Any] = dict(extras or {})


class InvalidInput(CampaignError):
    """Values that break a rule; `problems` names each field."""

    code = "invalid"
    status = 400
    title = "Some values are not allowed"


class NotSignedIn(CampaignError):
    """The request needs an account."""

    code = "not-signed-in"
    status = 401
    title = "Nobody is signed in"


class NotAllowed(CampaignError):
    """The account may not do this."""

    code = "not-allowed"
    status = 403
    title = "This account may not do that"


class NotFound(CampaignError):
    """No such thing, or none that this account may know of."""

    code = "not-found"
    status = 404
    title = "There is no such thing"


class Conflict(CampaignError):
    """The state of things does not allow it (any more)."""

    code = "conflict"
    status = 409
    title = "That does not fit the present state"


def refuse_problems(problems: Sequence[Problem], *, advice: str) -> None:
    """Raise InvalidInput when a rule found something."""
    if problems:
        detail = " ".join(problem.detail for problem in problems)
        raise InvalidInput(detail, advice=advice, problems=problems)
