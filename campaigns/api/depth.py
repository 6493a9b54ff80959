"""How deep a frame probably goes."""

import math
from datetime import datetime

from django.utils.dateparse import parse_datetime
from drf_spectacular.utils import OpenApiParameter, extend_schema
from rest_framework.request import Request
from rest_framework.response import Response
from rest_framework.views import APIView

from campaigns.api.queries import float_of
from campaigns.api.schema import answer_schema
from campaigns.errors import InvalidInput
from campaigns.selectors.depth_estimate import DepthEstimate, get_depth_estimate
from observers.rules.problem import Problem
from observers.selectors.access import access_own_instrument


class DepthEstimateView(APIView):
    """An estimate for one of one's own instruments."""

    @extend_schema(
        parameters=[
            OpenApiParameter("ra_deg", float, required=True),
            OpenApiParameter("dec_deg", float, required=True),
            OpenApiParameter("mid_time", datetime, required=True, description="UTC"),
            OpenApiParameter("duration_s", float, required=True, description="in all"),
        ],
        responses={200: answer_schema(DepthEstimate)},
        summary="Limit of a frame, estimated from gear and sky",
    )
    def get(self, request: Request, instrument_id: int) -> Response:
        """With its uncertainty and what was assumed."""
        instrument = access_own_instrument(request.user, instrument_id)
        missing = float("nan")
        numbers = {
            name: float_of(request, name, default=missing, lowest=lowest, highest=highest)
            for name, lowest, highest in (
                ("ra_deg", 0.0, 360.0),
                ("dec_deg", -90.0, 90.0),
                ("duration_s", 0.001, 14400.0),
            )
        }
        absent = [
            Problem(name, f"?{name}= is missing.")
            for name, value in numbers.items()
            if math.isnan(value)
        ]
        if absent:
            raise InvalidInput(absent[0].detail, "Correct the address.", problems=absent)
        return Response(get_depth_estimate(instrument, mid_time=_mid_time(request), **numbers))


def _mid_time(request: Request) -> datetime:
    try:
        moment = parse_datetime(request.query_params.get("mid_time", ""))
    except ValueError:
        moment = None
    if moment is None or moment.tzinfo is None:
        detail = "?mid_time= must be a time in UTC such as 2027-03-14T05:06:07Z."
        raise InvalidInput(detail, "Correct the address.", problems=[Problem("mid_time", detail)])
    return moment
