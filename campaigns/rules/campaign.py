"""What a campaign may say of itself, and what its status allows."""

from collections.abc import Iterator, Sequence

from observers.rules.problem import Problem


def title_problems(title: str) -> list[Problem]:
    """Judge the title."""
    if not 0 < len(title.strip()) <= 120:
        return [Problem("title", "A campaign needs a title of at most 120 letters.")]
    return []


def role_problems(alert_role: str, *, is_rehearsal: bool) -> list[Problem]:
    """Only what was observed opens a campaign; a test or a prediction can become a rehearsal."""
    if alert_role != "observation" and not is_rehearsal:
        return [Problem("is_rehearsal", f"This alert is marked as a {alert_role}.")]
    return []


def message_problems(
    alert_role: str, *, retracted: Sequence[str], has_direction: bool
) -> list[Problem]:
    """What a message must not be to become a campaign of any kind."""
    if retracted:
        names = ", ".join(retracted)[:200]
        return [Problem("upload", f"This message opens nothing: it takes back {names}.")]
    if alert_role == "utility":
        return [Problem("upload", "This message is about its sender's system, not about the sky.")]
    if not has_direction:
        return [Problem("upload", "This message gives no direction on the sky.")]
    return []


def launch_problems(title: str, *, clock_is_set: bool, is_rehearsal: bool) -> Iterator[Problem]:
    """Judge what the coordinator typed."""
    yield from title_problems(title)
    if clock_is_set and not is_rehearsal:
        yield Problem("clock_now", "Only a rehearsal has a clock of its own.")
