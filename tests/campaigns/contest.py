"""Many threads against one database; run_contest.py runs them in a process of their own."""

import threading
import time
import uuid
from collections import Counter
from concurrent.futures import ThreadPoolExecutor

from django.db import connection

import campaigns.bridge as bridge
from campaigns.actions import claim_tile as module
from campaigns.actions.add_constraints import add_constraints
from campaigns.actions.answer_once import Once, answer_once
from campaigns.actions.lay_grids import lay_grid
from campaigns.errors import CampaignError
from campaigns.ingest.alert_file import alert_of_message
from campaigns.models import Claim, Event, IdempotencyKey, Tile
from observers.models import Role
from tests.campaigns import stage


def grab(n_threads):
    """Everybody wants the same tile at once."""

    campaign, cameras = _network(n_threads)
    tile = campaign.tiles.first()
    answers = _all_at_once(cameras, lambda camera: _claim(campaign, camera, tile))
    alternatives = [extra for _, extra in answers if extra is not None]
    return {
        "answers": Counter(code for code, _ in answers),
        "n_held": Claim.objects.filter(state="held").count(),
        "n_alternatives": len(alternatives),
        "is_gapless": _is_gapless(campaign),
    }


def same_key(n_threads):
    """One client sends the same keyed claim many times at once."""

    campaign, (camera,) = _network(1)
    tile = campaign.tiles.first()
    once = Once(camera.owner, "claims", uuid.uuid4(), "0" * 64, stage.NOW)
    answers = _all_at_once([camera] * n_threads, lambda c: _claim(campaign, c, tile, once=once))
    return {
        "answers": Counter(code for code, _ in answers),
        "n_claims": Claim.objects.count(),
        "n_keys": IdempotencyKey.objects.count(),
        "is_gapless": _is_gapless(campaign),
    }


def revise(n_threads):
    """Coordinators revise the region while somebody registers new gear."""

    campaign, (camera,) = _network(1)
    actor = campaign.made_by

    def work(number):
        if number == 0:
            wide = stage.make_instrument(camera.site, "wide", width_deg=5.0, height_deg=5.0)
            return f"{lay_grid(campaign, wide, wall_now=stage.NOW) > 0}"
        kept = alert_of_message(stage.cone_alert(radius_deg=2.0 + number), now=stage.NOW)
        try:
            answer = add_constraints(
                actor, campaign, kept, despite_time_apart=False, wall_now=stage.NOW
            )
        except CampaignError as refusal:
            return refusal.code
        return str(answer.status)

    answers = Counter(_all_at_once(range(n_threads), work))
    revisions = campaign.regions.order_by("revision")
    newest = revisions.last()
    shares = bridge.tile_shares(campaign.tiles.all(), bridge.region_of(newest))
    return {
        "answers": answers,
        "revisions": list(revisions.values_list("revision", flat=True)),
        "in_use": newest.constraints_on,
        "positions": list(campaign.constraints.values_list("position", flat=True)),
        "worst_tile": max(
            abs(tile.probability - shares[tile.number]) for tile in campaign.tiles.all()
        ),
        "base_is_newest": _newest_revised_seq(campaign) == _ledger_base_seq(campaign),
        "is_gapless": _is_gapless(campaign),
    }


def _newest_revised_seq(campaign):

    return Event.objects.filter(campaign=campaign, kind="region.revised").last().seq


def _ledger_base_seq(campaign):

    return type(campaign).objects.get(pk=campaign.pk).ledger_base_seq


def throughput(n_claims):
    """20 writers claim different tiles, whole transactions: claim, sequence, event, key."""

    campaign, cameras = _network(20)
    tiles = _many_tiles(campaign, n_claims)
    spans = []

    def work(position):
        camera = cameras[position % 20]
        once = Once(camera.owner, "claims", uuid.uuid4(), "0" * 64, stage.NOW)
        started = time.perf_counter()
        code, _ = _hold(campaign, camera, tiles[position], once=once)
        spans.append(time.perf_counter() - started)
        return code

    started = time.perf_counter()
    with ThreadPoolExecutor(20) as pool:
        codes = Counter(pool.map(_in_own_connection(work), range(n_claims)))
    seconds = time.perf_counter() - started
    spans.sort()
    return {
        "answers": codes,
        "per_s": n_claims / seconds,
        "p50_s": spans[len(spans) // 2],
        "p99_s": spans[int(len(spans) * 0.99)],
        "is_gapless": _is_gapless(campaign),
    }


def _network(n_observers):

    coordinator = stage.make_person("Coordinator Cleo", Role.COORDINATOR)
    cameras = [stage.make_observer(f"Observer {number}") for number in range(n_observers)]
    return stage.launch(coordinator), cameras


def _many_tiles(campaign, n_tiles):

    return Tile.objects.bulk_create(
        Tile(
            campaign=campaign,
            number=10_000 + number,
            ra_deg=140.0,
            dec_deg=30.0,
            width_deg=1.0,
            height_deg=1.0,
            probability=0.0,
        )
        for number in range(n_tiles)
    )


def _claim(campaign, camera, tile, *, once=None):

    try:
        answer = module.claim_tile(
            camera.owner,
            campaign,
            tile_number=tile.number,
            instrument=camera,
            starts_at=stage.NOW,
            wall_now=stage.NOW,
            once=once,
        )
    except CampaignError as refusal:
        return refusal.code, refusal.extras.get("alternative")
    return f"{answer.status} {answer.body['id']}", None


def _hold(campaign, camera, tile, *, once):
    """The write half alone: judging (altitude, Sun) happens outside of the transaction."""

    wish = module.Wish(
        campaign=campaign,
        tile=tile,
        person=camera.owner,
        instrument=camera,
        starts_at=stage.NOW,
        until=stage.later(minutes=21),
        now=stage.NOW,
    )
    return answer_once(once, judge=lambda: wish, write=module._hold).status, None


def _all_at_once(things, action):
    start = threading.Barrier(len(things))

    def work(thing):
        start.wait()
        return action(thing)

    with ThreadPoolExecutor(len(things)) as pool:
        return list(pool.map(_in_own_connection(work), things))


def _in_own_connection(work):

    def run(thing):
        try:
            return work(thing)
        finally:
            connection.close()

    return run


def _is_gapless(campaign):

    campaign.refresh_from_db()
    seqs = list(
        Event.objects.filter(campaign=campaign).order_by("seq").values_list("seq", flat=True)
    )
    return seqs == list(range(1, campaign.seq + 1))
