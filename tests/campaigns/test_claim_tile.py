"""A tile has one holder; leases end; refusals help."""

from datetime import timedelta

import pytest

from campaigns.actions.claim_tile import claim_tile
from campaigns.actions.extend_claim import extend_claim
from campaigns.actions.lapse_claims import lapse_claims
from campaigns.actions.release_claim import release_claim
from campaigns.errors import (
    CampaignClosed,
    ClaimEnded,
    InvalidInput,
    NotFound,
    TileTaken,
    UnsafeSun,
)
from campaigns.models import CampaignStatus, Claim, Event
from tests.campaigns.stage import NOW, later, make_observer, tile_at


def take(campaign, instrument, tile, *, wall_now=NOW, starts_at=None):
    answer = claim_tile(
        instrument.owner,
        campaign,
        tile_number=tile.number,
        instrument=instrument,
        starts_at=starts_at,
        wall_now=wall_now,
    )
    return Claim.objects.select_related("tile", "person", "instrument__site", "campaign").get(
        pk=answer.body["id"]
    )


def kinds(campaign):
    return list(Event.objects.filter(campaign=campaign).values_list("kind", flat=True))


def test_a_claim_is_a_lease_of_series_and_fifteen_minutes(campaign, camera):
    claim = take(campaign, camera, tile_at(campaign))
    # Five exposures of 60 s and 60 s overhead.
    assert claim.until == NOW + timedelta(minutes=6 + 15)
    assert claim.state == "held"


def test_a_taken_tile_answers_with_an_alternative(campaign, camera, other_camera):
    tile = tile_at(campaign)
    take(campaign, camera, tile)
    with pytest.raises(TileTaken) as refusal:
        take(campaign, other_camera, tile)
    alternative = refusal.value.extras["alternative"]
    assert alternative["tile"] != tile.number
    assert refusal.value.status == 409
    assert kinds(campaign).count("claim.held") == 1


def test_a_refused_claim_leaves_no_event_and_no_gap(campaign, camera, other_camera):
    tile = tile_at(campaign)
    take(campaign, camera, tile)
    with pytest.raises(TileTaken):
        take(campaign, other_camera, tile)
    campaign.refresh_from_db()
    seqs = list(Event.objects.filter(campaign=campaign).values_list("seq", flat=True))
    assert sorted(seqs) == list(range(1, campaign.seq + 1))


def test_a_released_tile_is_free_at_once(campaign, camera, other_camera):
    tile = tile_at(campaign)
    release_claim(take(campaign, camera, tile), wall_now=NOW)
    assert take(campaign, other_camera, tile).person == other_camera.owner


def test_releasing_twice_is_no_error(campaign, camera):
    claim = take(campaign, camera, tile_at(campaign))
    release_claim(claim, wall_now=NOW)
    release_claim(claim, wall_now=NOW)
    assert kinds(campaign).count("claim.released") == 1


def test_the_next_claimer_writes_the_lapse_of_an_overdue_lease(campaign, camera, other_camera):
    tile = tile_at(campaign)
    first = take(campaign, camera, tile)
    take(campaign, other_camera, tile, wall_now=later(hours=1))
    first.refresh_from_db()
    assert first.state == "lapsed"
    assert kinds(campaign)[-2:] == ["claim.lapsed", "claim.held"]


def test_the_ticker_writes_a_lapse_once(campaign, camera):
    claim = take(campaign, camera, tile_at(campaign))
    assert lapse_claims(campaign, wall_now=claim.until - timedelta(seconds=1)) == 0
    assert lapse_claims(campaign, wall_now=claim.until) == 1
    assert lapse_claims(campaign, wall_now=claim.until) == 0
    assert kinds(campaign).count("claim.lapsed") == 1


def test_an_overdue_claim_is_not_extended(campaign, camera):
    claim = take(campaign, camera, tile_at(campaign))
    extend_claim(claim, wall_now=later(minutes=10))
    with pytest.raises(ClaimEnded):
        extend_claim(claim, wall_now=claim.until + timedelta(minutes=1))


def test_an_extension_reaches_two_hours_at_most(campaign, camera):
    claim = take(campaign, camera, tile_at(campaign))
    for _ in range(12):
        extend_claim(claim, wall_now=NOW)
    assert claim.until == NOW + timedelta(hours=2)


def test_a_start_more_than_two_hours_ahead_is_refused(campaign, camera):
    with pytest.raises(InvalidInput, match="2 hours"):
        take(campaign, camera, tile_at(campaign), starts_at=later(hours=3))


def test_a_start_in_the_past_is_refused(campaign, camera):
    with pytest.raises(InvalidInput, match="past"):
        take(campaign, camera, tile_at(campaign), starts_at=later(hours=-1))


def test_one_series_at_a_time(campaign, camera):
    tiles = list(campaign.tiles.all())
    take(campaign, camera, tiles[0])
    with pytest.raises(Exception, match="holds tile"):
        take(campaign, camera, tiles[1])
    take(campaign, camera, tiles[1], starts_at=later(minutes=10))


def test_by_day_no_tile_is_given_to_an_undeclared_camera(campaign, coordinator):
    chile = make_observer("Observer Eva", latitude_deg=-30.2, longitude_deg=-70.7)
    with pytest.raises(UnsafeSun):
        take(campaign, chile, tile_at(campaign))


def test_a_queued_claim_that_reaches_into_dawn_is_refused(campaign, camera):
    # Sunrise at the site is near 05:25 UTC; the lease of a start at 05:05 would pass it.
    dawn = NOW.replace(day=15, hour=5, minute=5)
    with pytest.raises(UnsafeSun):
        take(campaign, camera, tile_at(campaign), wall_now=dawn, starts_at=dawn)


def test_a_tile_may_be_claimed_at_sunset_for_a_start_in_darkness(campaign, camera):
    # Sunset at the site is near 17:15 UTC, the end of nautical twilight near 18:20.
    sunset, dark = NOW.replace(hour=17, minute=0), NOW.replace(hour=18, minute=30)
    high = tile_at(campaign)
    with pytest.raises(UnsafeSun):
        take(campaign, camera, high, wall_now=sunset, starts_at=sunset)
    assert take(campaign, camera, high, wall_now=sunset, starts_at=dark).starts_at == dark


def test_an_unknown_tile_is_named(campaign, camera):
    with pytest.raises(NotFound, match="no tile 9999"):
        claim_tile(
            camera.owner,
            campaign,
            tile_number=9999,
            instrument=camera,
            starts_at=None,
            wall_now=NOW,
        )


def test_a_closed_campaign_takes_no_claim_even_when_it_closes_meanwhile(campaign, camera):
    stale = type(campaign).objects.get(pk=campaign.pk)
    type(campaign).objects.filter(pk=campaign.pk).update(status=CampaignStatus.CLOSED)
    with pytest.raises(CampaignClosed):
        take(stale, camera, tile_at(campaign))
    assert not Claim.objects.exists()


def test_two_seats_have_two_holders(campaign, camera, other_camera):
    tile = tile_at(campaign)
    tile.seats = 2
    tile.save()
    seats = {take(campaign, camera, tile).seat, take(campaign, other_camera, tile).seat}
    assert seats == {1, 2}
