"""A plan is made for the newest state, off the request path."""

from datetime import timedelta

import pytest

from campaigns.actions.claim_tile import claim_tile
from campaigns.actions.close_campaign import close_campaign
from campaigns.actions.make_plan import make_plan
from campaigns.actions.set_status import set_status
from campaigns.bridge import mjd_of
from campaigns.errors import CampaignClosed
from campaigns.models import Event, Offer
from campaigns.selectors.best_tile import get_best_tile
from observers.bridge import place_of, solar_rating_of
from skytiles.night.solar_safety import solar_problems
from tests.campaigns.stage import NOW, make_observer, make_person, tile_at


def test_everybody_who_can_help_gets_a_tile(campaign, camera, other_camera):
    plan = make_plan(campaign.pk, wall_now=NOW)
    served = set(Offer.objects.filter(plan=plan).values_list("person", flat=True))
    assert served == {camera.owner_id, other_camera.owner_id}
    assert plan.unassigned == []
    assert 0.0 < plan.searched_expected <= plan.searched_bound <= 1.0
    assert plan.certificate == pytest.approx(plan.searched_expected / plan.searched_bound)


def test_who_gets_nothing_is_told_why(campaign, camera):
    set_status(camera.owner, campaign, status="clouded", wall_now=NOW)
    plan = make_plan(campaign.pk, wall_now=NOW)
    assert plan.unassigned == [{"observer": camera.owner_id, "reason": "says: clouded"}]


def test_a_plan_for_the_newest_state_needs_no_further_plan(campaign):
    make_plan(campaign.pk, wall_now=NOW)
    campaign.refresh_from_db()
    assert campaign.planned_seq == campaign.seq


def test_news_makes_a_plan_due(campaign, camera):
    make_plan(campaign.pk, wall_now=NOW)
    set_status(camera.owner, campaign, status="in", wall_now=NOW)
    campaign.refresh_from_db()
    assert campaign.planned_seq < campaign.seq


def test_a_new_plan_replaces_the_offers(campaign):
    make_plan(campaign.pk, wall_now=NOW)
    newest = make_plan(campaign.pk, wall_now=NOW)
    assert set(Offer.objects.values_list("plan", flat=True)) == {newest.pk}


def test_a_replan_keeps_what_is_claimed(campaign, camera, other_camera):
    tile = tile_at(campaign)
    claim_tile(
        camera.owner,
        campaign,
        tile_number=tile.number,
        instrument=camera,
        starts_at=NOW,
        wall_now=NOW,
    )
    plan = make_plan(campaign.pk, wall_now=NOW)
    until = NOW + timedelta(minutes=21)
    for offer in Offer.objects.filter(plan=plan, tile=tile):
        assert offer.starts_at >= until or offer.person_id == camera.owner_id
    # One series at a time: nothing is offered to the holder during its own series.
    series_end = NOW + timedelta(minutes=6)
    busy = Offer.objects.filter(plan=plan, person=camera.owner, starts_at__lt=series_end)
    assert not busy.exists()


def test_no_offer_breaks_the_solar_rule(campaign):
    make_observer("Observer Eva", latitude_deg=-30.2, longitude_deg=-70.7)
    plan = make_plan(campaign.pk, wall_now=NOW)
    for offer in Offer.objects.filter(plan=plan).select_related("tile", "instrument__site"):
        problems = solar_problems(
            place_of(offer.instrument.site),
            solar_rating_of(offer.instrument),
            offer.tile.ra_deg,
            offer.tile.dec_deg,
            start_mjd=mjd_of(offer.starts_at),
            end_mjd=mjd_of(offer.ends_at),
        )
        assert problems == []


def test_a_closed_campaign_is_not_planned(campaign):
    close_campaign(campaign, wall_now=NOW)
    with pytest.raises(CampaignClosed):
        make_plan(campaign.pk, wall_now=NOW)


def test_a_member_without_gear_is_told(campaign):
    idle = make_person("Observer Ida")
    set_status(idle, campaign, status="in", wall_now=NOW)
    plan = make_plan(campaign.pk, wall_now=NOW)
    assert plan.unassigned == [{"observer": idle.pk, "reason": "no instrument in use"}]


def test_the_best_tile_now_says_why_not(campaign, camera):
    set_status(camera.owner, campaign, status="out", wall_now=NOW)
    best = get_best_tile(campaign, camera, wall_now=NOW)
    assert (best["best"], best["alternatives"], best["why_not"]) == (None, [], "says: out")


def test_the_best_tile_now_is_not_one_that_is_held(campaign, camera, other_camera):
    best = get_best_tile(campaign, camera, wall_now=NOW)["best"]
    claim_tile(
        camera.owner,
        campaign,
        tile_number=best["tile"],
        instrument=camera,
        starts_at=None,
        wall_now=NOW,
    )
    second = get_best_tile(campaign, other_camera, wall_now=NOW)["best"]
    assert second["tile"] != best["tile"]


def test_the_event_holds_what_the_rows_hold(campaign):
    plan = make_plan(campaign.pk, wall_now=NOW)
    event = Event.objects.get(campaign=campaign, kind="plan.made")
    assert len(event.payload["offers"]) == Offer.objects.filter(plan=plan).count()
    assert event.payload["plan"]["certificate"] == plan.certificate
