"""Observing: tonight, best tile, claims, frames."""

from collections.abc import Sequence
from typing import Any, TypedDict

from django.utils import timezone
from drf_spectacular.utils import OpenApiParameter, extend_schema
from rest_framework.request import Request
from rest_framework.response import Response
from rest_framework.views import APIView

from campaigns.actions.answer_once import Answer
from campaigns.actions.claim_tile import claim_tile
from campaigns.actions.correct_frame import correct_frame
from campaigns.actions.examine_frame import examine_frame
from campaigns.actions.extend_claim import extend_claim
from campaigns.actions.release_claim import release_claim
from campaigns.actions.report_frame import Depth, report_frame
from campaigns.actions.withdraw_frame import withdraw_frame
from campaigns.api.forms import ClaimForm, DepthForm, ExamineForm, FrameForm, PlaceForm, parsed
from campaigns.api.once import once_of, response_of
from campaigns.api.queries import int_of
from campaigns.api.schema import answer_schema
from campaigns.events.state import FrameShown
from campaigns.ingest.frame_report import read_report
from campaigns.ingest.told_depth import with_star_limit
from campaigns.ledger_replica import get_coverage
from campaigns.rules.first_light import light_notes
from campaigns.selectors.access import access_campaign_to_observe, access_claim, access_frame
from campaigns.selectors.best_tile import BestTile, get_best_tile
from campaigns.selectors.depth_estimate import with_estimate
from campaigns.selectors.tonight import MyClaim, Tonight, get_tonight
from observers.selectors.access import access_own_instrument

_INSTRUMENT = OpenApiParameter("instrument", int, required=True, description="one of yours")


class FrameAnswer(TypedDict):
    """The frame, and what it did to the two numbers."""

    number: int
    frame: FrameShown
    imaged: float
    searched: float
    searched_before: float
    # What was taken for granted about the header, in plain sentences.
    notes: list[str]


class BestTileView(APIView):
    """The best tile now."""

    @extend_schema(
        parameters=[_INSTRUMENT],
        responses={200: answer_schema(BestTile)},
        summary="The best tile now for an instrument",
    )
    def get(self, request: Request, campaign_id: str) -> Response:
        """From the live ledger."""
        campaign = access_campaign_to_observe(request.user, campaign_id)
        instrument = access_own_instrument(request.user, int_of(request, "instrument"))
        return Response(get_best_tile(campaign, instrument, wall_now=timezone.now()))


class TonightView(APIView):
    """One instrument's night."""

    @extend_schema(
        parameters=[_INSTRUMENT],
        responses={200: answer_schema(Tonight)},
        summary="What an instrument holds, is offered, and could take",
    )
    def get(self, request: Request, campaign_id: str) -> Response:
        """Claims, offers, the best tile now, altitude curves, dusk and dawn."""
        campaign = access_campaign_to_observe(request.user, campaign_id)
        instrument = access_own_instrument(request.user, int_of(request, "instrument"))
        return Response(get_tonight(campaign, instrument, wall_now=timezone.now()))


class ClaimsView(APIView):
    """Promises."""

    @extend_schema(
        request=ClaimForm, responses={201: answer_schema(MyClaim)}, summary="Claim a tile"
    )
    def post(self, request: Request, campaign_id: str) -> Response:
        """Hold a tile; 409 tile-taken carries an alternative."""
        campaign = access_campaign_to_observe(request.user, campaign_id)
        values, wall_now = parsed(ClaimForm, request.data), timezone.now()
        operation = f"claims {campaign.pk}"
        answer = claim_tile(
            request.user,
            campaign,
            tile_number=values["tile"],
            instrument=access_own_instrument(request.user, values["instrument"]),
            starts_at=values["starts_at"],
            wall_now=wall_now,
            once=once_of(request, request.user, operation=operation, wall_now=wall_now),
        )
        return response_of(answer)


class ReleaseView(APIView):
    """Give a tile back."""

    @extend_schema(
        request=None, responses={200: answer_schema(MyClaim)}, summary="Give a tile back"
    )
    def post(self, request: Request, campaign_id: str, claim_id: int) -> Response:
        """The seat is free at once."""
        claim = access_claim(request.user, campaign_id, claim_id)
        return response_of(release_claim(claim, wall_now=timezone.now()))


class ExtendView(APIView):
    """Keep a tile longer."""

    @extend_schema(
        request=None, responses={200: answer_schema(MyClaim)}, summary="Keep a tile longer"
    )
    def post(self, request: Request, campaign_id: str, claim_id: int) -> Response:
        """At most two hours ahead."""
        claim = access_claim(request.user, campaign_id, claim_id)
        return response_of(extend_claim(claim, wall_now=timezone.now()))


class FramesView(APIView):
    """Reports."""

    @extend_schema(
        request=FrameForm, responses={201: answer_schema(FrameAnswer)}, summary="Report a frame"
    )
    def post(self, request: Request, campaign_id: str) -> Response:
        """Count a frame, by its header or typed; the same frame twice is one (200)."""
        campaign = access_campaign_to_observe(request.user, campaign_id)
        values, wall_now = with_star_limit(parsed(FrameForm, request.data)), timezone.now()
        instrument = access_own_instrument(request.user, values["instrument"])
        claim_id = values.get("claim")
        report = read_report(values, instrument)
        values, estimated = with_estimate(
            values,
            instrument,
            footprint=report.footprint,
            mid_time=report.mid_time,
            duration_s=report.duration_s,
        )
        answer = report_frame(
            request.user,
            campaign,
            instrument=instrument,
            report=report,
            depth=_depth(values),
            claim=access_claim(request.user, campaign_id, claim_id) if claim_id else None,
            wall_now=wall_now,
            once=once_of(
                request, request.user, operation=f"frames {campaign.pk}", wall_now=wall_now
            ),
        )
        early = light_notes(
            report.mid_time, source_model=campaign.source_model, event_time=campaign.event_time
        )
        return _with_numbers(answer, campaign.pk, notes=[*report.notes, *estimated, *early])


class ExamineView(APIView):
    """Has anyone looked at it?"""

    @extend_schema(
        request=ExamineForm,
        responses={200: answer_schema(FrameAnswer)},
        summary="Say that a frame was examined",
    )
    def post(self, request: Request, campaign_id: str, number: int) -> Response:
        """Only examined frames count as searched."""
        frame = access_frame(request.user, campaign_id, number)
        values = parsed(ExamineForm, request.data)
        answer = examine_frame(frame, **values, wall_now=timezone.now())
        return _with_numbers(answer, campaign_id)


class WithdrawView(APIView):
    """A frame counts no longer."""

    @extend_schema(
        request=None, responses={200: answer_schema(FrameAnswer)}, summary="Withdraw a frame"
    )
    def post(self, request: Request, campaign_id: str, number: int) -> Response:
        """The pixels under its look are computed anew."""
        frame = access_frame(request.user, campaign_id, number)
        return _with_numbers(withdraw_frame(frame, wall_now=timezone.now()), campaign_id)


class CorrectView(APIView):
    """Set a frame right."""

    @extend_schema(
        request=PlaceForm, responses={200: answer_schema(FrameAnswer)}, summary="Correct a frame"
    )
    def post(self, request: Request, campaign_id: str, number: int) -> Response:
        """Change the given values."""
        frame = access_frame(request.user, campaign_id, number)
        changes = with_star_limit(parsed(PlaceForm, request.data, partial=True))
        answer = correct_frame(request.user, frame, changes=changes, wall_now=timezone.now())
        return _with_numbers(answer, campaign_id)


def _depth(values: dict[str, Any]) -> Depth:
    names = DepthForm().fields
    return Depth(**{name: values[name] for name in names if name in values})


def _with_numbers(answer: Answer, campaign_id: str, *, notes: Sequence[str] = ()) -> Response:
    """Beside the kept answer stand the two numbers as they were just after its event."""
    body = dict(answer.body)
    imaged, searched, before = get_coverage(campaign_id).around(body.pop("seq"))
    numbers = {"imaged": imaged, "searched": searched, "searched_before": before}
    sent = {**body, **numbers, "notes": list(notes)}
    return response_of(Answer(answer.status, sent, is_repeat=answer.is_repeat))
