"""Alert files and messages: read and judged; what is launched is kept as uploads."""

import json
from collections.abc import Mapping
from dataclasses import dataclass, field
from datetime import datetime
from pathlib import Path
from typing import Any

import campaigns.bridge as bridge
from campaigns.errors import refuse_problems
from campaigns.ingest.uploads import keep_upload, read_upload, sha256_of
from campaigns.rules.campaign import message_problems
from skytiles.region.alert import Alert
from skytiles.region.constraints import MapConstraint
from skytiles.region.read_alert import read_alert, read_alert_file

# What a message without a file is called, and an upload whose name nobody gave.
_MESSAGE, _UPLOAD = "The alert", "The uploaded file"


@dataclass(frozen=True)
class KeptAlert:
    """An alert, and under which SHA-256 each of its map files is kept."""

    alert: Alert
    uploads: Mapping[str, str] = field(default_factory=dict)
    # Files that were read and are not below the uploads folder yet.
    waiting: tuple[bytes, ...] = ()

    @property
    def event_time(self) -> datetime:
        """When it happened, UTC."""
        return bridge.time_of(self.alert.event_mjd)

    def upload_of(self, constraint: object) -> str:
        """The SHA-256 of the map behind a constraint; empty for the others."""
        if isinstance(constraint, MapConstraint):
            return self.uploads.get(constraint.file, "")
        return ""

    def keep_files(self) -> None:
        """Write the files that wait. Called when nothing can be refused any more."""
        for data in self.waiting:
            keep_upload([data])


def refuse_message(kept: KeptAlert) -> None:
    """Refuse what no region can be made of: a retraction, a message without a direction."""
    alert = kept.alert
    problems = message_problems(
        alert.role, retracted=alert.retracted, has_direction=alert.has_direction
    )
    refuse_problems(
        problems, advice="Look at the campaign that the message is about, or type the direction."
    )


def alert_of_bytes(data: bytes, *, filename: str, now: datetime) -> tuple[str, KeptAlert]:
    """An alert from an upload, which waits to be kept. Its SHA-256 comes first."""
    alert = read_alert(data, filename=filename, now_mjd=bridge.mjd_of(now))
    sha256 = sha256_of(data)
    return sha256, KeptAlert(alert, {filename: sha256}, waiting=(data,))


def alert_of_upload(sha256: str, *, now: datetime, filename: str = "") -> KeptAlert:
    """An alert from a file that was uploaded before, under the name that the person gave it."""
    name = filename or _UPLOAD
    alert = read_alert(read_upload(sha256), filename=name, now_mjd=bridge.mjd_of(now))
    return KeptAlert(alert, {name: sha256})


def alert_of_message(message: Mapping[str, Any], *, now: datetime) -> KeptAlert:
    """An alert from JSON in a request; it stands alone."""
    data = json.dumps(message).encode()
    return KeptAlert(read_alert(data, filename=_MESSAGE, now_mjd=bridge.mjd_of(now)))


def alert_of_path(path: Path, *, now: datetime) -> KeptAlert:
    """An alert from a file on this machine; its maps wait to be copied to the uploads."""
    alert = read_alert_file(path, now_mjd=bridge.mjd_of(now))
    names = [one.file for one in alert.constraints if isinstance(one, MapConstraint)]
    maps = {name: (path.parent / name).read_bytes() for name in names}
    uploads = {name: sha256_of(data) for name, data in maps.items()}
    return KeptAlert(alert, uploads, waiting=tuple(maps.values()))
