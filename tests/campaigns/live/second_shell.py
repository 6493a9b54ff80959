"""A process of its own that writes to the database when told to (one JSON order a line)."""

import json
import sys
import uuid

import django

django.setup()

import numpy as np  # noqa: E402
from django.db import transaction  # noqa: E402
from django.utils import timezone  # noqa: E402

from campaigns.events import kinds  # noqa: E402
from campaigns.events.append import append_event, append_events  # noqa: E402
from campaigns.events.said import About  # noqa: E402
from campaigns.ledger_replica import rebuilt_coverage  # noqa: E402
from campaigns.models import Campaign, Frame, Membership, RegionRevision  # noqa: E402
from campaigns.selectors.shown import frame_shown  # noqa: E402
from campaigns.selectors.snapshot import get_snapshot  # noqa: E402
from observers.actions.make_token import make_token, revoke_token  # noqa: E402
from observers.models import ApiToken, Instrument, Person, Role, Site  # noqa: E402
from skytiles.source.presets import PRESETS  # noqa: E402
from skytiles.source.source_json import source_to_json  # noqa: E402
from skytiles.tiling.footprint import rectangle_footprint  # noqa: E402

ORDER = 6
PIXELS = np.arange(100, 140)


def make_person(role="observer", name=""):
    name = name or f"Person {uuid.uuid4().hex[:8]}"
    person = Person(name=name, role=Role(role), created_at=timezone.now())
    person.set_password("a dark clear night")
    person.save()
    _, secret = make_token(person, label="test", now=timezone.now())
    return {"id": person.pk, "name": name, "token": secret}


def revoke_tokens(person):
    owner = Person.objects.get(pk=person)
    for token in ApiToken.objects.filter(owner=owner):
        revoke_token(owner, token.pk, now=timezone.now())


def make_campaign(is_public=True, status="live"):
    now = timezone.now()
    maker = Person.objects.get(pk=make_person("coordinator")["id"])
    campaign = Campaign.objects.create(
        id=f"c-{uuid.uuid4().hex[:8]}",
        title="A test of the live channel",
        status=status,
        is_public=is_public,
        event_time=now,
        source_model=_steady(),
        made_by=maker,
        made_at=now,
        opened_at=now,
    )
    RegionRevision.objects.create(
        campaign=campaign,
        revision=1,
        order=ORDER,
        pixels=PIXELS.astype("<i8").tobytes(),
        probabilities=np.full(len(PIXELS), 0.999 / len(PIXELS)).astype("<f8").tobytes(),
        outside=0.001,
        area_deg2={"50": 10.0, "90": 20.0, "99": 30.0},
        peak={"ra_deg": 45.0, "dec_deg": 2.0},
        made_at=now,
    )
    Membership.objects.create(campaign=campaign, person=maker, joined_at=now)
    with transaction.atomic():
        happening = kinds.CampaignOpened(opened_at="2027-03-14T05:06:07Z")
        append_event(campaign.pk, happening, at=now)
    return campaign.pk


def _steady():
    return source_to_json(PRESETS["steady"]())


def say_status(campaign, count=1, at_once=1, padding=0):
    """Status events of the campaign's maker, `at_once` in each transaction."""
    member = Membership.objects.select_related("person").get(campaign_id=campaign)
    about = About(observer=member.person.name + "." * padding)
    seq = 0
    for first in range(0, count, at_once):
        statuses = [("in", "clouded")[n % 2] for n in range(first, min(first + at_once, count))]
        said = [
            (kinds.ObserverStatus(observer=member.person_id, status=s), about) for s in statuses
        ]
        with transaction.atomic():
            Membership.objects.filter(pk=member.pk).update(status=statuses[-1])
            seq = append_events(campaign, said, at=timezone.now())
    return seq


def count_frame(campaign, ra_deg=46.0, dec_deg=9.0, width_deg=3.0):
    """An examined frame of the campaign's maker around a direction."""
    person = Campaign.objects.get(pk=campaign).made_by
    now = timezone.now()
    number = Frame.objects.filter(campaign_id=campaign).count() + 1
    footprint = rectangle_footprint(
        ra_deg=ra_deg, dec_deg=dec_deg, width_deg=width_deg, height_deg=width_deg
    )
    with transaction.atomic():
        frame = Frame.objects.create(
            campaign_id=campaign,
            number=number,
            person=person,
            instrument=_instrument(person, now),
            footprint=footprint.to_json(),
            ra_deg=ra_deg,
            dec_deg=dec_deg,
            field_deg=width_deg,
            mid_time=now,
            duration_s=60.0,
            band="V",
            limit_mag=16.0,
            is_examined=True,
            examined_way="program against a catalogue",
            completeness=0.9,
            identity_sha256=uuid.uuid4().hex,
            reported_at=now,
        )
        happening = kinds.FrameCounted(number=number, frame=frame_shown(frame))
        return append_event(campaign, happening, at=now, about=About(observer=person.name))


def _instrument(person, now):
    site, _ = Site.objects.get_or_create(
        owner=person,
        name="hill",
        defaults={"latitude_deg": 45.0, "longitude_deg": 10.0, "created_at": now},
    )
    sizes = {"width_deg": 3.0, "height_deg": 3.0, "aperture_mm": 200.0}
    instrument, _ = Instrument.objects.get_or_create(
        owner=person,
        name="camera",
        defaults={"site": site, "kind": "camera", "created_at": now, **sizes},
    )
    return instrument


def coverage(campaign):
    """From the rows alone, without any kept replica."""
    rebuilt = rebuilt_coverage(campaign)
    steps = [round(255 * detected) for detected in rebuilt.detected.tolist()]
    return {"imaged": rebuilt.imaged, "searched": rebuilt.searched, "steps": steps}


def move_clock(campaign, now):
    Campaign.objects.filter(pk=campaign).update(clock_now=now)


def set_public(campaign, is_public):
    Campaign.objects.filter(pk=campaign).update(is_public=is_public)


def snapshot(campaign):
    seq, state = get_snapshot(campaign)
    return {"seq": seq, "state": state}


ORDERS = {
    function.__name__: function
    for function in (
        make_person,
        revoke_tokens,
        make_campaign,
        say_status,
        count_frame,
        coverage,
        move_clock,
        set_public,
        snapshot,
    )
}


def main():
    for line in sys.stdin:
        order = json.loads(line)
        try:
            answer = {"done": ORDERS[order.pop("order")](**order)}
        except Exception as error:  # noqa: BLE001 (outermost loop: the test that asked sees it)
            answer = {"fault": f"{type(error).__name__}: {error}"}
        sys.stdout.write(json.dumps(answer) + "\n")
        sys.stdout.flush()


main()
