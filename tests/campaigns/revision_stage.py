"""A second alert for a launched campaign, and what coordinators do with it."""

import importlib.util
from pathlib import Path

from campaigns.actions import revise_region as module
from campaigns.actions.add_constraints import add_constraints
from campaigns.actions.switch_constraint import switch_constraint
from campaigns.ingest.alert_file import alert_of_message
from campaigns.models import RegionRevision
from tests.campaigns import stage

EXAMPLE = Path(__file__).resolve().parents[2] / "fixtures" / "make_example_map.py"


def map_bytes():
    """The invented map of fixtures/ as a file."""
    spec = importlib.util.spec_from_file_location("make_example_map", EXAMPLE)
    loaded = importlib.util.module_from_spec(spec)
    spec.loader.exec_module(loaded)
    return loaded.map_bytes(7, "2024-03-14T20:00:05")


def second_alert(*, dec_deg=stage.DEC_DEG + 2.0, radius_deg=1.5, seconds=4.0, **more):
    alert = stage.cone_alert(radius_deg=radius_deg, **more)
    alert["id"] = "invented-2"
    alert["event_time"] = (stage.EVENT_TIME + stage.timedelta(seconds=seconds)).isoformat()
    alert["constraints"][0]["dec_deg"] = dec_deg
    return alert


def kept(alert=None):
    return alert_of_message(alert or second_alert(), now=stage.NOW)


def add(coordinator, campaign, alert=None, *, despite_time_apart=False, once=None):
    return add_constraints(
        coordinator,
        campaign,
        kept(alert),
        despite_time_apart=despite_time_apart,
        wall_now=stage.NOW,
        once=once,
    ).body


def switch(coordinator, campaign, number, *, is_on):
    return switch_constraint(
        coordinator, campaign, number=number, is_on=is_on, wall_now=stage.NOW
    ).body


def meanwhile(monkeypatch, action):
    """Do something, once, after a change was judged and before it is written."""
    judge = module._judge
    waiting = [action]

    def judge_then_act(*args, **kwargs):
        judged = judge(*args, **kwargs)
        if waiting:
            waiting.pop()()
        return judged

    monkeypatch.setattr(module, "_judge", judge_then_act)


def newest(campaign):
    return RegionRevision.objects.filter(campaign=campaign).latest("revision")
