"""Invented people, sites, instruments and alerts for tests; times are fixed."""

import random
from datetime import UTC, datetime, timedelta

from campaigns.actions.launch_campaign import LaunchWish, launch_campaign
from campaigns.ingest.alert_file import alert_of_message
from campaigns.models import Campaign
from observers.models import Instrument, Person, Role, Site

EVENT_TIME = datetime(2024, 3, 14, 20, 0, tzinfo=UTC)
# Deep night over central Europe, full day over Chile.
NOW = datetime(2024, 3, 14, 21, 0, tzinfo=UTC)
# Near the meridian of Europe at NOW.
RA_DEG, DEC_DEG = 140.0, 30.0

CAMERA = {
    "kind": "camera",
    "width_deg": 2.4,
    "height_deg": 1.6,
    "rotation_deg": 0.0,
    "aperture_mm": 200.0,
    "pixel_arcsec": 1.5,
    "band": "clear",
    "exposure_s": 60.0,
    "n_exposures": 5,
    "overhead_s": 60.0,
}
EYEPIECE = {
    "kind": "eyepiece",
    "shape": "circle",
    "width_deg": 1.5,
    "height_deg": 1.5,
    "aperture_mm": 150.0,
    "exposure_s": 120.0,
    "n_exposures": 1,
}


def make_person(name, role=Role.OBSERVER):
    person = Person(name=name, role=role, created_at=NOW)
    person.set_unusable_password()
    person.save()
    return person


def make_site(owner, name="garden", *, latitude_deg=48.1234, longitude_deg=11.5678):
    return Site.objects.create(
        owner=owner,
        name=name,
        latitude_deg=latitude_deg,
        longitude_deg=longitude_deg,
        height_m=500.0,
        created_at=NOW,
    )


def make_instrument(site, name="camera", **values):
    return Instrument.objects.create(
        owner=site.owner, site=site, name=name, created_at=NOW, **{**CAMERA, **values}
    )


def make_observer(name, **place):
    """A person with a garden in Europe and a camera."""
    return make_instrument(make_site(make_person(name), **place))


def cone_alert(*, role="observation", radius_deg=3.0, event_time=EVENT_TIME):
    return {
        "id": "invented-1",
        "event_time": event_time.isoformat(),
        "kind": "neutrino burst",
        "role": role,
        "constraints": [
            {
                "type": "cone",
                "ra_deg": RA_DEG,
                "dec_deg": DEC_DEG,
                "radius_deg": radius_deg,
                "containment": 0.9,
            }
        ],
    }


def launch(actor, *, alert=None, wall_now=NOW, **wish):
    """A live campaign (or what `wish` says) over the cone."""
    wish = {"title": "An invented burst", **wish}
    kept = alert_of_message(alert or cone_alert(), now=wish.get("clock_now") or wall_now)
    answer = launch_campaign(
        actor, kept, wish=LaunchWish(**wish), wall_now=wall_now, rng=random.Random(7)
    )
    return Campaign.objects.get(pk=answer.body["campaign"])


def later(**span):
    """A moment after NOW."""
    return NOW + timedelta(**span)


def tile_at(campaign, ra_deg=RA_DEG, dec_deg=DEC_DEG):
    """The tile nearest to a direction (small angles)."""
    return min(
        campaign.tiles.all(),
        key=lambda tile: (tile.ra_deg - ra_deg) ** 2 + (tile.dec_deg - dec_deg) ** 2,
    )
