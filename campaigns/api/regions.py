"""POST region: look at an alert before anything is made of it."""

from collections.abc import Sequence
from typing import Any, TypedDict

import numpy as np
from django.core.files.uploadedfile import UploadedFile
from django.utils import timezone
from drf_spectacular.utils import OpenApiParameter, extend_schema
from rest_framework.parsers import JSONParser, MultiPartParser
from rest_framework.request import Request
from rest_framework.response import Response
from rest_framework.views import APIView

from campaigns.actions.working_region import working_region
from campaigns.api.schema import answer_schema
from campaigns.errors import InvalidInput
from campaigns.events.iso_time import iso_time
from campaigns.ingest.alert_file import (
    KeptAlert,
    alert_of_bytes,
    alert_of_message,
    refuse_message,
)
from campaigns.ingest.uploads import joined
from campaigns.selectors.region_arrays import packed
from observers.rules.problem import Problem
from observers.selectors.access import access_account
from observers.selectors.gear import list_network
from skytiles.region.galactic_prior import GalacticPrior
from skytiles.region.make_region import PRIORS
from skytiles.region.region import Region, describe_region
from skytiles.sphere.healpix_door import n_pixels

MAP_ORDER = 6


class RegionMap(TypedDict):
    """A coarse picture: uint32 and float32, little-endian, base64."""

    order: int
    pixels_b64: str
    probabilities_b64: str


class RegionAnswer(TypedDict):
    """The alert as understood, and its region for the present network."""

    upload: str | None
    alert: dict[str, Any]
    region: dict[str, Any]
    map: RegionMap
    notes: list[str]


class RegionView(APIView):
    """Alert in, region out."""

    parser_classes = (MultiPartParser, JSONParser)

    @extend_schema(
        request={
            "multipart/form-data": {
                "type": "object",
                "properties": {"file": {"type": "string", "format": "binary"}},
                "required": ["file"],
            },
            "application/json": {"type": "object", "description": "an alert in our JSON"},
        },
        parameters=[OpenApiParameter("prior", str, description="flat (default) or galactic")],
        responses={200: answer_schema(RegionAnswer)},
        summary="Describe the region of an alert",
    )
    def post(self, request: Request) -> Response:
        """Read an alert file or message; only an uploaded file is kept, for the launch."""
        access_account(request.user)
        sha256, kept = _kept_alert(request)
        refuse_message(kept)
        instruments = [one for owned in list_network().values() for one in owned]
        galaxy = GalacticPrior() if _prior_asked(request) == "galactic" else None
        region = working_region(kept.alert.constraints, instruments, galaxy=galaxy)
        kept.keep_files()
        answer: RegionAnswer = {
            "upload": sha256,
            "alert": _alert_as_sent(kept),
            "region": describe_region(region),
            "map": _coarse_map(region),
            "notes": [*kept.alert.notes, *region.notes],
        }
        return Response(answer)


def _prior_asked(request: Request) -> str:
    prior = request.query_params.get("prior", "flat")
    if prior in PRIORS:
        return prior
    raise InvalidInput(
        f"There is no prior {prior[:40]!r}.",
        f"Ask for {' or '.join(PRIORS)}.",
        problems=[Problem("prior", "Choose one of the two.")],
    )


def _kept_alert(request: Request) -> tuple[str | None, KeptAlert]:
    now = timezone.now()
    file = request.FILES.get("file")
    if isinstance(file, UploadedFile):
        filename = (file.name or "The uploaded file")[:100]
        return alert_of_bytes(joined(file.chunks()), filename=filename, now=now)
    if isinstance(request.data, dict) and request.data and not request.FILES:
        return None, alert_of_message(dict(request.data), now=now)
    raise InvalidInput(
        "There is no alert in this request.",
        'Send a file as the part "file", or an alert as JSON.',
        problems=[Problem("file", "Choose an alert file.")],
    )


def _alert_as_sent(kept: KeptAlert) -> dict[str, Any]:
    alert = kept.alert
    return {
        "id": alert.identifier,
        "event_time": iso_time(kept.event_time),
        "kind": alert.kind,
        "role": alert.role,
        "constraints": [constraint.to_json() for constraint in alert.constraints],
        "citations": [citation.to_json() for citation in alert.citations],
        "importance": alert.importance,
        "links": [link.to_json() for link in alert.links],
    }


def _coarse_map(region: Region) -> RegionMap:
    """The region at order 6 or coarser: enough to see it, small enough for a phone."""
    steps = max(0, region.order - MAP_ORDER)
    pixels, sums = _summed(region.pixels >> (2 * steps), region.probabilities)
    assert pixels.size == 0 or pixels[-1] < n_pixels(region.order - steps)
    return {
        "order": region.order - steps,
        "pixels_b64": packed(pixels, "<u4"),
        "probabilities_b64": packed(sums, "<f4"),
    }


def _summed(parents: np.ndarray, probabilities: Sequence[float] | np.ndarray) -> Any:
    pixels, places = np.unique(parents, return_inverse=True)
    return pixels, np.bincount(places, weights=probabilities, minlength=len(pixels))
