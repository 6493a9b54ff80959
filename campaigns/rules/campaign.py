"""What a campaign may say of itself, and what its status allows."""

from collections.abc import Iterator

from observers.rules.problem import Problem


def title_problems(title: str) -> list[Problem]:
    """Judge the title."""
    if not 0 < len(title.strip()) <= 120:
        return [Problem("title", "A campaign needs a title of at most 120 letters.")]
    return []


def role_problems(alert_role: str, *, is_rehearsal: bool) -> list[Problem]:
    """A message marked as a test can only become a rehearsal."""
    if alert_role == "test" and not is_rehearsal:
        return [Problem("is_rehearsal", "The alert is marked as a test.")]
    return []


def launch_problems(title: str, *, clock_is_set: bool, is_rehearsal: bool) -> Iterator[Problem]:
    """Judge what the coordinator typed."""
    yield from title_problems(title)
    if clock_is_set and not is_rehearsal:
        yield Problem("clock_now", "Only a rehearsal has a clock of its own.")
