"""Reading a campaign: events, region, coverage, darkness."""

from typing import Any, TypedDict

from drf_spectacular.utils import OpenApiParameter, extend_schema
from rest_framework.permissions import AllowAny
from rest_framework.request import Request
from rest_framework.response import Response
from rest_framework.views import APIView

from campaigns.api.campaigns import campaign_and_now
from campaigns.api.queries import float_of, int_of
from campaigns.api.schema import answer_schema
from campaigns.events.iso_time import iso_time
from campaigns.ledger_replica import get_coverage
from campaigns.selectors.darkness import LONGEST_HOURS, DarkSite, list_darkness
from campaigns.selectors.events import list_events_since
from campaigns.selectors.region_arrays import coverage_as_sent


class EventSent(TypedDict):
    """One event."""

    seq: int
    kind: str
    at: str
    said: str
    payload: dict[str, Any]


class EventsAnswer(TypedDict, total=False):
    """The events after `since`, or `ask_again`: then fetch the state."""

    seq: int
    now: str
    events: list[EventSent]
    ask_again: bool


class RegionArrays(TypedDict):
    """uint32 pixels (NESTED) and float32 probabilities, little-endian, base64."""

    revision: int
    order: int
    pixels_b64: str
    probabilities_b64: str


class HistoryPoint(TypedDict):
    """The two numbers at one time."""

    at: str
    imaged: float
    searched: float


class CoverageAnswer(TypedDict):
    """The two numbers, and D of every pixel of the region in 255 steps (uint8, base64)."""

    revision: int
    through_seq: int
    imaged: float
    searched: float
    residual_outside: float
    detected_b64: str
    history: list[HistoryPoint]


class EventsView(APIView):
    """Plain polling."""

    permission_classes = (AllowAny,)

    @extend_schema(
        parameters=[OpenApiParameter("since", int, required=True)],
        responses={200: answer_schema(EventsAnswer)},
        summary="Events after a sequence number",
    )
    def get(self, request: Request, campaign_id: str) -> Response:
        """At most 500; whoever is further behind is told to ask for the state again."""
        campaign, now = campaign_and_now(request, campaign_id)
        seq, events = list_events_since(campaign.pk, int_of(request, "since"))
        news = {"events": events} if events is not None else {"events": [], "ask_again": True}
        etag = f'W/"{seq}"'
        if events == [] and request.headers.get("If-None-Match") == etag:
            return Response(status=304, headers={"ETag": etag})
        return Response({"seq": seq, "now": iso_time(now), **news}, headers={"ETag": etag})


class CoverageView(APIView):
    """Imaged and searched."""

    permission_classes = (AllowAny,)

    @extend_schema(
        responses={200: answer_schema(CoverageAnswer)}, summary="Imaged, searched and D per pixel"
    )
    def get(self, request: Request, campaign_id: str) -> Response:
        """Through the newest event."""
        campaign, _ = campaign_and_now(request, campaign_id)
        return Response(coverage_as_sent(get_coverage(campaign.pk)))


class DarknessView(APIView):
    """The dark strip."""

    permission_classes = (AllowAny,)

    @extend_schema(
        parameters=[OpenApiParameter("hours", float, description="at most 48; default 24")],
        responses={200: {"type": "array", "items": answer_schema(DarkSite)}},
        summary="Who is in darkness over the next hours",
    )
    def get(self, request: Request, campaign_id: str) -> Response:
        """Names and times; places stay private."""
        campaign, now = campaign_and_now(request, campaign_id)
        hours = float_of(request, "hours", default=24.0, lowest=0.1, highest=LONGEST_HOURS)
        return Response(list_darkness(campaign, now=now, hours=hours))
