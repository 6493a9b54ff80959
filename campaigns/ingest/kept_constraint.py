"""Constraints between alerts, rows and values."""

from collections.abc import Iterable
from datetime import datetime

import campaigns.bridge as bridge
from campaigns.ingest.alert_file import KeptAlert
from campaigns.ingest.uploads import read_upload
from campaigns.models import Campaign, Constraint
from skytiles.region.arrival_times import ArrivalTimesConstraint
from skytiles.region.constraints import AnyConstraint, MapConstraint

# The years 1900 and 2500.
_EARLIEST_MJD, _LATEST_MJD = 15020.0, 234167.0


def constraint_rows(
    campaign: Campaign,
    kept: KeptAlert,
    *,
    first_position: int,
    added_at: datetime,
    is_apart_confirmed: bool = False,
) -> list[Constraint]:
    """The constraints of an alert, not saved yet."""
    return [
        Constraint(
            campaign=campaign,
            position=first_position + index,
            kind=constraint.kind,
            parameters=constraint.to_json(),
            upload_sha256=kept.upload_of(constraint),
            label=kept.alert.identifier[:120],
            message_time=_message_time(kept, constraint),
            is_apart_confirmed=is_apart_confirmed,
            added_at=added_at,
        )
        for index, constraint in enumerate(kept.alert.constraints)
    ]


def constraints_of(rows: Iterable[Constraint]) -> list[AnyConstraint]:
    """The values of rows; maps are read from the uploads again."""
    return [bridge.constraint_of(row, open_upload=read_upload) for row in rows]


def _message_time(kept: KeptAlert, constraint: AnyConstraint) -> datetime | None:
    """When this piece says that it happened; None when nothing says so."""
    if isinstance(constraint, ArrivalTimesConstraint):
        return bridge.time_of(constraint.event_mjd)
    if isinstance(constraint, MapConstraint):
        # A map beside others in one alert may have a date of its own.
        mjd = constraint.sky_map.keywords.get("MJD-OBS")
        if isinstance(mjd, float) and _EARLIEST_MJD <= mjd <= _LATEST_MJD:
            return bridge.time_of(mjd)
    return kept.event_time if kept.alert.is_dated else None
