"""A source model as curves that can be drawn."""

from __future__ import annotations

from typing import Any

import numpy as np

from skytiles.source.hypothesis import ALWAYS_D, NEVER_D, Hypothesis, magnitudes
from skytiles.source.source_model import SourceModel

# From a minute to two months.
_FIRST_D, _LAST_D, _N_TIMES = 1.0 / 1440.0, 60.0, 121
_BAND = "V"


def light_curves(model: SourceModel) -> list[dict[str, Any]]:
    """Magnitude against time since the event for each kind of light, without offsets.

    Parameters
    ----------
    model : SourceModel

    Returns
    -------
    list of dict    label, weight; first_light_d (earliest and latest of its delays); ts_d and
                    magnitudes of the middle delay, null before light

    Source: our own.
    """
    by_label: dict[str, list[Hypothesis]] = {}
    for hypothesis in model.hypotheses:
        if hypothesis.first_light_d < NEVER_D:
            by_label.setdefault(hypothesis.label, []).append(hypothesis)
    return [_curve(label, alike) for label, alike in by_label.items()]


def _curve(label: str, alike: list[Hypothesis]) -> dict[str, Any]:
    alike = sorted(alike, key=lambda one: one.first_light_d)
    middle = alike[(len(alike) - 1) // 2]
    ts_d = np.geomspace(_FIRST_D, _LAST_D, _N_TIMES)
    if middle.first_light_d > _FIRST_D:
        # The moment of first light belongs on the curve.
        ts_d = np.unique(np.append(ts_d, middle.first_light_d))
    curve = magnitudes(middle, ts_d, _BAND)
    ends_d = (alike[0].first_light_d, alike[-1].first_light_d)
    return {
        "label": label,
        "weight": sum(one.weight for one in alike),
        "first_light_d": None if ends_d[0] <= ALWAYS_D else [float(end) for end in ends_d],
        "ts_d": ts_d.tolist(),
        "magnitudes": [float(m) if np.isfinite(m) else None for m in curve],
    }
