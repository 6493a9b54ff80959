"""The region of a campaign: its pixels, its revisions, its constraints, and changing them."""

import datetime
from typing import Any, TypedDict

from django.utils import timezone
from drf_spectacular.utils import extend_schema
from rest_framework import serializers
from rest_framework.permissions import AllowAny
from rest_framework.request import Request
from rest_framework.response import Response
from rest_framework.views import APIView

from campaigns.actions.add_constraints import add_constraints, replace_constraint
from campaigns.actions.answer_once import Answer, Once
from campaigns.actions.switch_constraint import retract_constraint, switch_constraint
from campaigns.api.forms import StrictForm, parsed
from campaigns.api.once import once_of, response_of
from campaigns.api.schema import answer_schema
from campaigns.api.watching import RegionArrays
from campaigns.errors import InvalidInput, refuse_problems
from campaigns.events.iso_time import iso_time
from campaigns.ingest.alert_file import KeptAlert, alert_of_message, alert_of_upload
from campaigns.models import Campaign
from campaigns.rules.clock import campaign_now
from campaigns.rules.combination import REVISION_WAYS, revision_problems
from campaigns.selectors.access import access_campaign, access_campaign_to_coordinate
from campaigns.selectors.region_arrays import get_region_arrays
from campaigns.selectors.region_history import RegionHistory, get_region_history


class RevisionForm(StrictForm):
    """A change of the constraints; `constraint` is the number of the one that is meant."""

    way = serializers.ChoiceField(REVISION_WAYS)
    constraint = serializers.IntegerField(required=False, min_value=1)
    is_on = serializers.BooleanField(required=False, help_text="for switch")
    upload = serializers.CharField(required=False, help_text="SHA-256 given by POST region")
    filename = serializers.CharField(required=False, max_length=100)
    alert = serializers.JSONField(required=False, help_text="an alert in our JSON")
    constraints = serializers.ListField(
        required=False, help_text="constraints in our JSON, of the campaign's own event"
    )
    despite_time_apart = serializers.BooleanField(
        required=False, default=False, help_text="combine messages more than 10 s apart"
    )


class RevisionAnswer(TypedDict):
    """The new revision and what changed."""

    revision: int
    said: str
    area_deg2: dict[str, float]
    area_before_deg2: dict[str, float]
    overlap: float | None
    n_tiles_new: int
    tiles_dropped: list[int]
    tiles_back: list[int]
    notes: list[str]


class CampaignRegionView(APIView):
    """The newest region, and the way to the next."""

    permission_classes = (AllowAny,)

    @extend_schema(responses={200: answer_schema(RegionArrays)}, summary="Pixels and probabilities")
    def get(self, request: Request, campaign_id: str) -> Response:
        """The newest revision."""
        return Response(get_region_arrays(access_campaign(request.user, campaign_id)))

    @extend_schema(
        request=RevisionForm,
        responses={201: answer_schema(RevisionAnswer)},
        summary="Revise the region (coordinators)",
    )
    def post(self, request: Request, campaign_id: str) -> Response:
        """Add, replace, switch or retract a constraint; frames and claims stay."""
        campaign = access_campaign_to_coordinate(request.user, campaign_id)
        wall_now = timezone.now()
        values = parsed(RevisionForm, request.data)
        refuse_problems(revision_problems(values), advice="Correct the named fields.")
        once = once_of(request, request.user, operation=f"region {campaign_id}", wall_now=wall_now)
        return response_of(_revised(request, campaign, values, once=once, wall_now=wall_now))


class RevisionsView(APIView):
    """How the region came to be."""

    permission_classes = (AllowAny,)

    @extend_schema(
        responses={200: answer_schema(RegionHistory)},
        summary="All revisions of the region and all constraints",
    )
    def get(self, request: Request, campaign_id: str) -> Response:
        """Whoever may watch the campaign may see them."""
        return Response(get_region_history(access_campaign(request.user, campaign_id)))


def _revised(
    request: Request,
    campaign: Campaign,
    values: dict[str, Any],
    *,
    once: Once | None,
    wall_now: datetime.datetime,
) -> Answer:
    actor, way, number = request.user, values["way"], values.get("constraint", 0)
    if way == "switch":
        return switch_constraint(
            actor, campaign, number=number, is_on=values["is_on"], wall_now=wall_now, once=once
        )
    if way == "retract":
        return retract_constraint(actor, campaign, number=number, wall_now=wall_now, once=once)
    kept = _kept_alert(campaign, values, now=campaign_now(campaign, wall_now))
    is_confirmed = values["despite_time_apart"]
    if way == "replace":
        return replace_constraint(
            actor,
            campaign,
            kept,
            number=number,
            despite_time_apart=is_confirmed,
            wall_now=wall_now,
            once=once,
        )
    return add_constraints(
        actor, campaign, kept, despite_time_apart=is_confirmed, wall_now=wall_now, once=once
    )


def _kept_alert(campaign: Campaign, values: dict[str, Any], *, now: datetime.datetime) -> KeptAlert:
    if values.get("upload"):
        return alert_of_upload(values["upload"], now=now, filename=values.get("filename", ""))
    alert = values.get("alert")
    if values.get("constraints"):
        # Without a message of their own they are about the campaign's event.
        alert = {
            "id": "typed",
            "event_time": iso_time(campaign.event_time),
            "constraints": values["constraints"],
        }
    if not isinstance(alert, dict):
        raise InvalidInput("The alert is no object.", "Compare with the example alerts.")
    return alert_of_message(alert, now=now)
