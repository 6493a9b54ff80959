"""The pixels of the newest region as the browser takes them."""

import base64
from typing import Any

import numpy as np

import campaigns.bridge as bridge
from campaigns.ledger_replica import Coverage
from campaigns.models import Campaign, RegionRevision


def get_region_arrays(campaign: Campaign) -> dict[str, Any]:
    """Revision, order, pixels (uint32 LE) and probabilities (float32 LE) in base64."""
    row = RegionRevision.objects.filter(campaign=campaign).latest("revision")
    return {
        "revision": row.revision,
        "order": row.order,
        "pixels_b64": packed(bridge.pixels_of(row), "<u4"),
        "probabilities_b64": packed(bridge.probabilities_of(row), "<f4"),
    }


def coverage_as_sent(coverage: Coverage) -> dict[str, Any]:
    """The two numbers, their history, and D per pixel in 255 steps."""
    return {
        "revision": coverage.revision,
        "through_seq": coverage.through_seq,
        "imaged": coverage.imaged,
        "searched": coverage.searched,
        "residual_outside": coverage.residual_outside,
        "detected_b64": packed(np.rint(255.0 * coverage.detected), "u1"),
        "history": [moment.to_json() for moment in coverage.history],
    }


def packed(values: np.ndarray, kind: str) -> str:
    """Little-endian numbers in base64."""
    return base64.b64encode(np.asarray(values).astype(kind).tobytes()).decode("ascii")
