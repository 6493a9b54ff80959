"""A source model as everybody may see it: its numbers, where they come from, its curves."""

from collections.abc import Mapping
from typing import Any, TypedDict

from skytiles.source.light_curves import light_curves
from skytiles.source.presets import PRESETS
from skytiles.source.source_json import CUSTOM_IN_GALAXY, source_from_json


class AssumptionShown(TypedDict):
    """One assumed number. `is_changed`: somebody changed it at Launch."""

    name: str
    label: str
    value: float
    unit: str
    source: str
    is_changed: bool


class CurveShown(TypedDict):
    """Magnitude against days since the event, null before light."""

    label: str
    weight: float
    first_light_d: list[float] | None
    ts_d: list[float]
    magnitudes: list[float | None]


class SourceModelShown(TypedDict):
    """Everything that the numbers of a campaign rest on."""

    preset: str
    label: str
    about: str
    prior: str
    is_absolute: bool
    first_light_d: float
    assumptions: list[AssumptionShown]
    curves: list[CurveShown]


def source_model_shown(document: str | Mapping[str, Any], *, prior: str = "") -> SourceModelShown:
    """Read a model and say all that it assumes; a custom one explains itself by its curves."""
    model = source_from_json(document)
    preset = PRESETS.get(model.preset)
    custom = CUSTOM_IN_GALAXY if model.placement == "galactic" else ()
    assumptions: list[AssumptionShown] = [
        {
            "name": one.name,
            "label": one.label,
            "value": float(model.parameters[one.name]),
            "unit": one.unit,
            "source": one.source,
            "is_changed": float(model.parameters[one.name]) != one.value,
        }
        for one in (preset.assumptions if preset else custom)
    ]
    curves: list[CurveShown] = [
        {
            "label": curve["label"],
            "weight": curve["weight"],
            "first_light_d": curve["first_light_d"],
            "ts_d": curve["ts_d"],
            "magnitudes": curve["magnitudes"],
        }
        for curve in light_curves(model)
    ]
    return {
        "preset": model.preset,
        "label": model.label,
        "about": preset.about if preset else "A model written out as JSON.",
        "prior": prior or (preset.prior if preset else "flat"),
        "is_absolute": model.placement == "galactic",
        "first_light_d": model.first_light_d,
        "assumptions": assumptions,
        "curves": curves,
    }
