"""Alert files and messages: read, judged, and every map among them kept as an upload."""

import json
from collections.abc import Mapping
from dataclasses import dataclass, field
from datetime import datetime
from pathlib import Path
from typing import Any

import campaigns.bridge as bridge
from campaigns.ingest.uploads import keep_upload, read_upload
from skytiles.region.alert import Alert
from skytiles.region.constraints import MapConstraint
from skytiles.region.read_alert import read_alert, read_alert_file


@dataclass(frozen=True)
class KeptAlert:
    """An alert, and under which SHA-256 each of its map files is kept."""

    alert: Alert
    uploads: Mapping[str, str] = field(default_factory=dict)

    @property
    def event_time(self) -> datetime:
        """When it happened, UTC."""
        return bridge.time_of(self.alert.event_mjd)

    def upload_of(self, constraint: object) -> str:
        """The SHA-256 of the map behind a constraint; empty for the others."""
        if isinstance(constraint, MapConstraint):
            return self.uploads.get(constraint.file, "")
        return ""


def alert_of_bytes(data: bytes, *, filename: str, now: datetime) -> tuple[str, KeptAlert]:
    """An alert from an upload: only what can be read is kept. Its SHA-256 comes first."""
    alert = read_alert(data, filename=filename, now_mjd=bridge.mjd_of(now))
    sha256 = keep_upload([data])
    return sha256, KeptAlert(alert, {filename: sha256})


def alert_of_upload(sha256: str, *, now: datetime) -> KeptAlert:
    """An alert from a file that was uploaded before."""
    alert = read_alert(read_upload(sha256), filename="upload", now_mjd=bridge.mjd_of(now))
    return KeptAlert(alert, {"upload": sha256})


def alert_of_message(message: Mapping[str, Any], *, now: datetime) -> KeptAlert:
    """An alert from JSON in a request; it stands alone."""
    data = json.dumps(message).encode()
    return KeptAlert(read_alert(data, filename="alert.json", now_mjd=bridge.mjd_of(now)))


def alert_of_path(path: Path, *, now: datetime) -> KeptAlert:
    """An alert from a file on this machine; its maps are copied to the uploads."""
    alert = read_alert_file(path, now_mjd=bridge.mjd_of(now))
    names = [one.file for one in alert.constraints if isinstance(one, MapConstraint)]
    kept = {name: keep_upload([(path.parent / name).read_bytes()]) for name in names}
    return KeptAlert(alert, kept)
