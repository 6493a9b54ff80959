"""Source models: which there are, what one assumes, what a campaign rests on."""

from typing import Any, TypedDict

from drf_spectacular.utils import extend_schema
from rest_framework.permissions import AllowAny
from rest_framework.request import Request
from rest_framework.response import Response
from rest_framework.views import APIView

from campaigns.api.schema import answer_schema
from campaigns.errors import InvalidInput
from campaigns.selectors.access import access_campaign
from campaigns.selectors.source_shown import SourceModelShown, source_model_shown
from observers.rules.problem import Problem
from observers.selectors.access import access_account
from skytiles.source.presets import PRESETS


class SourceModelsAnswer(TypedDict):
    """All presets, the usual one first."""

    presets: list[SourceModelShown]


class SourceModelsView(APIView):
    """What the light could do."""

    @extend_schema(
        responses={200: answer_schema(SourceModelsAnswer)},
        summary="The source models that can be chosen, with all that they assume",
    )
    def get(self, request: Request) -> Response:
        """List presets."""
        access_account(request.user)
        return Response({"presets": [source_model_shown(name) for name in PRESETS]})

    @extend_schema(
        request={"application/json": {"type": "object", "description": "a source model"}},
        responses={200: answer_schema(SourceModelShown)},
        summary="Look at a source model before anything is made of it",
    )
    def post(self, request: Request) -> Response:
        """Judge and draw a preset with changed numbers, or a model written out."""
        access_account(request.user)
        return Response(source_model_shown(_document(request.data)))


class CampaignSourceView(APIView):
    """The source model of one campaign."""

    permission_classes = (AllowAny,)

    @extend_schema(
        responses={200: answer_schema(SourceModelShown)},
        summary="What the numbers of a campaign rest on",
    )
    def get(self, request: Request, campaign_id: str) -> Response:
        """All assumptions, and which of them were changed at Launch."""
        source = access_campaign(request.user, campaign_id).source_model
        return Response(source_model_shown(source, prior=str(source.get("prior", ""))))


def _document(data: Any) -> dict[str, Any]:
    if isinstance(data, dict):
        return data
    raise InvalidInput(
        "This is no source model.",
        'Send an object such as {"preset": "steady", "parameters": {"magnitude": 14}}.',
        problems=[Problem("source", "Send an object.")],
    )
