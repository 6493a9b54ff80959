"""Times as they stand in JSON: UTC, ISO 8601, a Z at the end."""

from datetime import UTC, datetime
from typing import overload


@overload
def iso_time(moment: datetime) -> str: ...
@overload
def iso_time(moment: None) -> None: ...
def iso_time(moment: datetime | None) -> str | None:
    """Write a time; milliseconds only when there are some."""
    if moment is None:
        return None
    utc = moment.astimezone(UTC)
    has_fraction = utc.microsecond >= 1000
    text = utc.isoformat(timespec="milliseconds" if has_fraction else "seconds")
    return text.replace("+00:00", "Z")


def read_iso_time(text: str) -> datetime:
    """Read a time; without a zone it is UTC. ValueError when it is no time."""
    moment = datetime.fromisoformat(text.strip())
    return moment.replace(tzinfo=UTC) if moment.tzinfo is None else moment.astimezone(UTC)
