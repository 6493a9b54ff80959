"""One invented campaign from launch to close, played by the real actions."""

import json
from datetime import datetime, timedelta

from campaigns.actions.add_constraints import add_constraints
from campaigns.actions.claim_tile import claim_tile
from campaigns.actions.close_campaign import close_campaign
from campaigns.actions.correct_frame import correct_frame
from campaigns.actions.examine_frame import examine_frame
from campaigns.actions.extend_claim import extend_claim
from campaigns.actions.lapse_claims import lapse_claims
from campaigns.actions.make_plan import make_plan
from campaigns.actions.open_campaign import open_campaign
from campaigns.actions.register_instrument import register_instrument
from campaigns.actions.release_claim import release_claim
from campaigns.actions.report_frame import Depth, report_frame
from campaigns.actions.set_status import set_status
from campaigns.actions.switch_constraint import retract_constraint, switch_constraint
from campaigns.actions.withdraw_frame import withdraw_frame
from campaigns.ingest.alert_file import alert_of_message
from campaigns.ingest.frame_report import read_report
from campaigns.models import Claim
from campaigns.selectors.events import list_events_since
from campaigns.selectors.snapshot import get_snapshot
from observers.models import Instrument, Role
from tests.campaigns import stage


def record_cases():
    """Play one campaign from launch to close; needs an empty database."""

    coordinator = stage.make_person("Coordinator Cleo", Role.COORDINATOR)
    ada, ben = stage.make_observer("Observer Ada"), stage.make_observer("Observer Ben")
    # A short plan keeps the file small.
    Instrument.objects.update(tiles_per_night=2)
    play = _Play()
    # At launch there is nothing before: the first case begins with the empty state.
    campaign = stage.launch(
        coordinator, is_draft=True, alert=stage.cone_alert(radius_deg=0.6), title="Law"
    )
    play.begin(campaign)
    play.act("open", lambda: open_campaign(campaign, wall_now=stage.NOW))
    play.act("a new grid and its owner", lambda: _new_eyepiece(ada))
    play.act("status", lambda: set_status(ben.owner, campaign, status="in", wall_now=stage.NOW))
    play.act("plan", lambda: make_plan(campaign.pk, wall_now=stage.NOW))
    offer = campaign.plans.last().offers.order_by("id").first()
    taker = ada if offer.person_id == ada.owner_id else ben
    other = ben if taker is ada else ada
    tile = stage.tile_at(campaign)
    take = _taker(campaign)
    # The offer of the same observer and tile is used up with the claim.
    offered = {"instrument": offer.instrument, "starts_at": offer.starts_at}
    claim = play.act(
        "claim of an offered tile",
        lambda: take(taker, offer.tile, **offered, wall_now=offer.starts_at),
    )
    now = offer.starts_at
    play.act("extend", lambda: extend_claim(claim(), wall_now=now + timedelta(minutes=1)))
    play.act("release", lambda: release_claim(claim(), wall_now=now + timedelta(minutes=2)))
    free = _free_tiles(campaign, taker, tile)
    held = play.act("claim", lambda: take(other, free[0], wall_now=stage.NOW))
    late = held().until + timedelta(minutes=1)
    play.act("lapse", lambda: lapse_claims(campaign, wall_now=late))
    play.act("claim again", lambda: take(other, free[0], wall_now=late))
    report = _reporter(campaign)
    shot = late + timedelta(minutes=10)
    play.act("frame meets the claim", lambda: report(other, free[0], now=shot))
    play.act("frame without a claim", lambda: report(other, free[1], now=shot, limit_mag=None))
    frame = campaign.frames.get(number=1)
    play.act(
        "examine",
        lambda: examine_frame(frame, is_examined=True, examined_way="image by eye", wall_now=shot),
    )
    changes = {"limit_mag": 17.25, "dec_deg": frame.dec_deg + 0.1}
    play.act("correct", lambda: correct_frame(other.owner, frame, changes=changes, wall_now=shot))
    play.act("withdraw", lambda: withdraw_frame(frame, wall_now=shot))
    play.act(
        "a second claim, lapsed by the next claimer", lambda: take(other, free[1], wall_now=shot)
    )
    _revise(play, campaign, coordinator, now=shot)
    end = shot + timedelta(hours=1)
    play.act("claim of an overdue tile", lambda: take(taker, free[1], wall_now=end))
    play.act(
        "clouded gives back",
        lambda: set_status(taker.owner, campaign, status="clouded", wall_now=end),
    )
    play.act("claim before the end", lambda: take(other, free[1], wall_now=end))
    play.act("close", lambda: close_campaign(_again(campaign), wall_now=end + timedelta(minutes=1)))
    return play.cases


class _Play:
    """Looks at the state before and after each action."""

    def __init__(self):
        self.cases = []

    def begin(self, campaign):
        """The launch itself: the state of a campaign without anything, and its first events."""

        self.campaign_id = campaign.pk
        self.seq, self.state = get_snapshot(campaign.pk)
        empty = {
            "campaign": self.state["campaign"],
            "region": None,
            "observers": {},
            "tiles": {},
            "plan": None,
            "offers": [],
            "claims": {},
            "frames": {},
            "recent": [],
        }
        _, events = list_events_since(campaign.pk, 0)
        self._note("launch", empty, events, self.state)

    def act(self, name, action):
        """Do it and keep before, events, after."""

        result = action()
        before, since = self.state, self.seq
        self.seq, self.state = get_snapshot(self.campaign_id)
        _, events = list_events_since(self.campaign_id, since)
        assert events, f"{name} wrote no event"
        self._note(name, before, events, self.state)
        return result

    def _note(self, name, before, events, after):
        case = {"name": name, "before": before, "events": events, "after": after}
        self.cases.append(json.loads(json.dumps(case)))


def _revise(play, campaign, coordinator, *, now):
    """Tiles drop out, come back and are new; claims and frames stay as they are."""

    def add():
        alert = stage.cone_alert(radius_deg=0.6)
        alert["constraints"][0]["dec_deg"] += 3.0
        kept = alert_of_message(alert, now=now)
        return add_constraints(
            coordinator, _again(campaign), kept, despite_time_apart=False, wall_now=now
        )

    def switch(number, *, is_on):
        return lambda: switch_constraint(
            coordinator, _again(campaign), number=number, is_on=is_on, wall_now=now
        )

    play.act("a constraint is added", add)
    play.act("the first constraint is switched off", switch(1, is_on=False))
    assert play.state["region"]["change"]["tiles_dropped"]
    play.act("the first constraint is switched on", switch(1, is_on=True))
    retract = {"number": 2, "wall_now": now}
    play.act(
        "the second is retracted",
        lambda: retract_constraint(coordinator, _again(campaign), **retract),
    )


def _again(row):
    return type(row).objects.get(pk=row.pk)


def _new_eyepiece(instrument):

    values = {**stage.EYEPIECE, "name": "eyepiece", "tiles_per_night": 2}
    register_instrument(instrument.owner, instrument.site, values=values, wall_now=stage.NOW)


def _taker(campaign):

    def take(camera, tile, *, wall_now, instrument=None, starts_at=None):
        instrument = instrument or camera
        answer = claim_tile(
            camera.owner,
            _again(campaign),
            tile_number=tile.number,
            instrument=instrument,
            starts_at=starts_at,
            wall_now=wall_now,
        )
        rows = Claim.objects.select_related("tile", "person", "instrument__site", "campaign")
        return lambda: rows.get(pk=answer.body["id"])

    return take


def _free_tiles(campaign, camera, tile):
    """Two tiles of the camera's grid that nobody is offered."""
    offered = set(campaign.plans.last().offers.values_list("tile__number", flat=True))
    same_grid = campaign.tiles.filter(width_deg=tile.width_deg, height_deg=tile.height_deg)
    rows = sorted(same_grid, key=lambda one: (one.number in offered, one.number))
    return rows[:2]


def _reporter(campaign):

    def report(camera, tile, *, now: datetime, limit_mag=16.5):
        values = {
            "ra_deg": tile.ra_deg,
            "dec_deg": tile.dec_deg,
            "mid_time": now - timedelta(minutes=5),
            "duration_s": 300.0,
        }
        return report_frame(
            camera.owner,
            _again(campaign),
            instrument=camera,
            report=read_report(values, camera),
            depth=Depth(limit_mag=limit_mag),
            wall_now=now,
        )

    return report
