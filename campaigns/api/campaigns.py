"""Campaigns: list, launch, watch, open, close, plan, clock."""

import random
from datetime import datetime
from typing import Any, TypedDict

from django.utils import timezone
from drf_spectacular.utils import OpenApiParameter, extend_schema
from rest_framework.permissions import AllowAny
from rest_framework.request import Request
from rest_framework.response import Response
from rest_framework.views import APIView

from campaigns.actions.ask_for_plan import ask_for_plan
from campaigns.actions.close_campaign import close_campaign
from campaigns.actions.launch_campaign import LaunchWish, launch_campaign
from campaigns.actions.move_clock import move_clock
from campaigns.actions.open_campaign import open_campaign
from campaigns.actions.set_status import set_status
from campaigns.api.forms import ClockForm, LaunchForm, StatusForm, parsed
from campaigns.api.once import once_of, response_of
from campaigns.api.schema import answer_schema
from campaigns.errors import InvalidInput
from campaigns.events.iso_time import iso_time
from campaigns.events.state import CampaignShown, State
from campaigns.ingest.alert_file import KeptAlert, alert_of_message, alert_of_upload
from campaigns.models import Campaign
from campaigns.rules.clock import campaign_now
from campaigns.selectors.access import (
    access_campaign,
    access_campaign_to_coordinate,
    access_campaign_to_observe,
    list_campaigns_for,
)
from campaigns.selectors.shown import campaign_shown
from campaigns.selectors.snapshot import get_snapshot
from observers.rules.problem import Problem
from observers.selectors.access import access_coordinator


class SnapshotAnswer(TypedDict):
    """The state at one sequence number."""

    seq: int
    now: str
    state: State


class LaunchAnswer(TypedDict):
    """The new campaign."""

    campaign: str
    url: str
    area_deg2: dict[str, float]
    n_tiles: int


class StatusAnswer(TypedDict):
    """What the member said last."""

    observer: int
    status: str


class CampaignStatusAnswer(TypedDict):
    """The campaign after opening or closing."""

    campaign: CampaignShown


class PlanAnswer(TypedDict):
    """The plan that follows has a number above `due_seq`."""

    due_seq: int


class ClockAnswer(TypedDict):
    """Where the campaign's clock stands."""

    now: str


class CampaignsView(APIView):
    """All campaigns that one may see."""

    permission_classes = (AllowAny,)

    @extend_schema(
        operation_id="campaigns_list",
        responses={200: {"type": "array", "items": answer_schema(CampaignShown)}},
        summary="The campaigns that you may watch, newest first",
    )
    def get(self, request: Request) -> Response:
        """List campaigns."""
        return Response([campaign_shown(one) for one in list_campaigns_for(request.user)])

    @extend_schema(
        request=LaunchForm,
        responses={201: answer_schema(LaunchAnswer)},
        summary="Launch a campaign (coordinators)",
    )
    def post(self, request: Request) -> Response:
        """Launch from an uploaded alert or an alert in the body."""
        person, wall_now = access_coordinator(request.user), timezone.now()
        values = parsed(LaunchForm, request.data)
        answer = launch_campaign(
            person,
            _kept_alert(values, now=values["clock_now"] or wall_now),
            wish=_wish(values),
            wall_now=wall_now,
            rng=random.SystemRandom(),
            once=once_of(request, person, operation="campaigns", wall_now=wall_now),
        )
        return response_of(answer)


class CampaignView(APIView):
    """One campaign."""

    permission_classes = (AllowAny,)

    @extend_schema(
        responses={200: answer_schema(SnapshotAnswer)},
        parameters=[OpenApiParameter("If-None-Match", str, "header", description="last ETag")],
        summary="The state with its sequence number",
    )
    def get(self, request: Request, campaign_id: str) -> Response:
        """The whole state that an onlooker may see; 304 while nothing has happened."""
        campaign = access_campaign(request.user, campaign_id)
        if request.headers.get("If-None-Match") == _etag(campaign.seq):
            return Response(status=304, headers={"ETag": _etag(campaign.seq)})
        seq, state = get_snapshot(campaign.pk)
        now = iso_time(campaign_now(campaign, timezone.now()))
        answer: SnapshotAnswer = {"seq": seq, "now": now, "state": state}
        return Response(answer, headers={"ETag": _etag(seq)})


class OpenView(APIView):
    """A draft goes live."""

    @extend_schema(
        request=None,
        responses={200: answer_schema(CampaignStatusAnswer)},
        summary="Open a draft (coordinators)",
    )
    def post(self, request: Request, campaign_id: str) -> Response:
        """Open it."""
        campaign = access_campaign_to_coordinate(request.user, campaign_id)
        open_campaign(campaign, wall_now=timezone.now())
        return Response({"campaign": campaign_shown(campaign)})


class CloseView(APIView):
    """A campaign takes nothing more."""

    @extend_schema(
        request=None,
        responses={200: answer_schema(CampaignStatusAnswer)},
        summary="Close a campaign (coordinators)",
    )
    def post(self, request: Request, campaign_id: str) -> Response:
        """Close it; what is held is given back."""
        campaign = access_campaign_to_coordinate(request.user, campaign_id)
        close_campaign(campaign, wall_now=timezone.now())
        return Response({"campaign": campaign_shown(campaign)})


class PlanView(APIView):
    """Planning, off the request path."""

    @extend_schema(
        request=None,
        responses={202: answer_schema(PlanAnswer)},
        summary="Ask for a new plan (coordinators)",
    )
    def post(self, request: Request, campaign_id: str) -> Response:
        """Ask; the event plan.made follows."""
        campaign = access_campaign_to_coordinate(request.user, campaign_id)
        return Response({"due_seq": ask_for_plan(campaign)}, status=202)


class StatusView(APIView):
    """In, clouded, out."""

    @extend_schema(
        request=StatusForm,
        responses={200: answer_schema(StatusAnswer)},
        summary="Say that you are in, clouded or out",
    )
    def post(self, request: Request, campaign_id: str) -> Response:
        """Whoever is clouded or out gives held tiles back."""
        campaign = access_campaign_to_observe(request.user, campaign_id)
        status = parsed(StatusForm, request.data)["status"]
        return response_of(
            set_status(request.user, campaign, status=status, wall_now=timezone.now())
        )


class ClockView(APIView):
    """A rehearsal's clock."""

    @extend_schema(
        request=ClockForm,
        responses={200: answer_schema(ClockAnswer)},
        summary="Move a rehearsal's clock on (coordinators)",
    )
    def post(self, request: Request, campaign_id: str) -> Response:
        """Rehearsals only, forwards only."""
        campaign = access_campaign_to_coordinate(request.user, campaign_id)
        to = parsed(ClockForm, request.data)["now"]
        move_clock(campaign, to=to, wall_now=timezone.now())
        return Response({"now": iso_time(campaign_now(campaign, timezone.now()))})


def _etag(seq: int) -> str:
    return f'W/"{seq}"'


def _kept_alert(values: dict[str, Any], *, now: datetime) -> KeptAlert:
    if values.get("upload"):
        return alert_of_upload(values["upload"], now=now, filename=values["filename"])
    if isinstance(values.get("alert"), dict):
        return alert_of_message(values["alert"], now=now)
    raise InvalidInput(
        "There is no alert to launch from.",
        "Give upload (from POST region) or alert.",
        problems=[Problem("upload", "Give upload or alert.")],
    )


def _wish(values: dict[str, Any]) -> LaunchWish:
    return LaunchWish(
        title=values["title"],
        source=values.get("source") or "steady",
        prior=values["prior"],
        is_draft=values["draft"],
        is_public=values["is_public"],
        is_rehearsal=values["is_rehearsal"],
        clock_now=values["clock_now"],
    )


def campaign_and_now(request: Request, campaign_id: str) -> tuple[Campaign, datetime]:
    """A campaign that the asker may watch, and its clock."""
    campaign = access_campaign(request.user, campaign_id)
    return campaign, campaign_now(campaign, timezone.now())
