"""Source models as JSON: a preset with its numbers, or everything spelled out."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

import numpy as np
import numpy.typing as npt

from skytiles.errors import SourceError
from skytiles.source.assumption import Assumption, filled_in
from skytiles.source.galaxy import GALAXY
from skytiles.source.hypothesis import FIRST_PLATEAU_D, Hypothesis
from skytiles.source.offset_grid import normal_offsets
from skytiles.source.presets import PRESETS
from skytiles.source.source_model import SourceModel

Floats = npt.NDArray[np.float64]

_HYPOTHESIS_NUMBERS = (
    "weight",
    "first_light_d",
    "m_first",
    "m_peak",
    "rise_d",
    "slope_mag_per_d",
)
_OPTIONAL_NUMBERS = {
    "slope_mag_per_d": 0.0,
    "plateau_d": FIRST_PLATEAU_D,
    "blue_slope_mag_per_d": None,
}
_CUSTOM_FIELDS = {
    "preset",
    "label",
    "parameters",
    "placement",
    "hypotheses",
    "offsets_mag",
    "offset_weights",
    "prior",
    "first_light_d",
}
# A custom model in the Galaxy states its spread and may change the Galaxy's numbers.
CUSTOM_IN_GALAXY = (
    Assumption("spread_mag", "spread, the same at all times", 1.2, "mag", "custom", 0.0, 4.0),
    *GALAXY,
)
_MOST_HYPOTHESES, _MOST_OFFSETS = 64, 400


def source_to_json(model: SourceModel) -> dict[str, Any]:
    """A source model as plain JSON; `source_from_json` gives it back.

    Parameters
    ----------
    model : SourceModel

    Returns
    -------
    dict    {"preset", "label", "parameters"}; a custom one also "hypotheses", "offsets_mag" and
            "offset_weights"
    """
    document: dict[str, Any] = {
        "preset": model.preset,
        "label": model.label,
        "parameters": dict(model.parameters),
    }
    if model.preset not in PRESETS:
        document["placement"] = model.placement
        document["hypotheses"] = [_hypothesis_to_json(h) for h in model.hypotheses]
        document["offsets_mag"] = model.offsets_mag.tolist()
        document["offset_weights"] = model.offset_weights.tolist()
    return document


def source_from_json(document: str | Mapping[str, Any]) -> SourceModel:
    """A source model from a preset's name or from JSON.

    Parameters
    ----------
    document : str or dict    a name of PRESETS, {"preset", "parameters"?} or a custom model

    Returns
    -------
    SourceModel

    Raises
    ------
    SourceError    for an unknown preset, a missing or unknown field, numbers that make no sense
    """
    if isinstance(document, str):
        return _preset(document, {})
    if not isinstance(document, Mapping):
        raise SourceError(type(document).__name__, "a preset's name or an object", "correct it")
    if "hypotheses" in document:
        return _custom(document)
    return _preset(str(document.get("preset", "")), document.get("parameters") or {})


def _preset(name: str, parameters: Mapping[str, Any]) -> SourceModel:
    if name not in PRESETS:
        raise SourceError(
            f"source model {name!r}", ", ".join(PRESETS), "choose one of them, or give hypotheses"
        )
    return PRESETS[name](**_named_numbers(parameters))


def _named_numbers(parameters: Any) -> dict[str, float]:
    if not isinstance(parameters, Mapping):
        raise SourceError("parameters that are no object", "name and number", "correct them")
    return {str(key): _number(str(key), value) for key, value in parameters.items()}


def _custom(document: Mapping[str, Any]) -> SourceModel:
    unknown = sorted(set(map(str, document)) - _CUSTOM_FIELDS)
    if unknown:
        raise SourceError(
            f"fields {', '.join(unknown)}", ", ".join(sorted(_CUSTOM_FIELDS)), "leave them out"
        )
    hypotheses = document["hypotheses"]
    if not isinstance(hypotheses, list) or not all(isinstance(h, Mapping) for h in hypotheses):
        raise SourceError("hypotheses that are no list", "a list of objects", "correct it")
    if len(hypotheses) > _MOST_HYPOTHESES:
        raise SourceError(
            f"{len(hypotheses)} hypotheses", f"at most {_MOST_HYPOTHESES}", "merge some of them"
        )
    placement = str(document.get("placement", "apparent"))
    parameters = _named_numbers(document.get("parameters") or {})
    if placement == "galactic":
        parameters = filled_in(CUSTOM_IN_GALAXY, parameters)
        offsets_mag, offset_weights = normal_offsets(parameters["spread_mag"])
    else:
        offsets_mag = _numbers("offsets_mag", document.get("offsets_mag", [0.0]))
        offset_weights = _numbers("offset_weights", document.get("offset_weights", [1.0]))
    return SourceModel(
        hypotheses=tuple(_hypothesis_from_json(hypothesis) for hypothesis in hypotheses),
        offsets_mag=offsets_mag,
        offset_weights=offset_weights,
        label=str(document.get("label", "custom"))[:120],
        preset="custom",
        parameters=parameters,
        placement=placement,
    )


def _hypothesis_to_json(hypothesis: Hypothesis) -> dict[str, Any]:
    names = dict.fromkeys((*_HYPOTHESIS_NUMBERS, *_OPTIONAL_NUMBERS))
    numbers = {name: getattr(hypothesis, name) for name in names}
    return {"label": hypothesis.label, **numbers}


def _hypothesis_from_json(document: Mapping[str, Any]) -> Hypothesis:
    names = {*_HYPOTHESIS_NUMBERS, *_OPTIONAL_NUMBERS}
    unknown = sorted(set(map(str, document)) - names - {"label"})
    missing = [n for n in _HYPOTHESIS_NUMBERS if n not in document and n not in _OPTIONAL_NUMBERS]
    if unknown or missing:
        raise SourceError(
            f"a hypothesis without {', '.join(missing) or 'nothing'} and with unknown "
            f"{', '.join(unknown) or 'nothing'}",
            ", ".join(sorted(names)),
            "add the missing numbers, leave out the unknown ones",
        )
    numbers = {
        name: _number(name, document[name])
        for name in names
        if document.get(name) is not None or name not in _OPTIONAL_NUMBERS
    }
    defaults = {name: value for name, value in _OPTIONAL_NUMBERS.items() if value is not None}
    return Hypothesis(label=str(document.get("label", ""))[:120], **{**defaults, **numbers})


def _numbers(name: str, values: Any) -> Floats:
    if not isinstance(values, list):
        raise SourceError(f"{name} that is no list", "a list of numbers", "correct it")
    if len(values) > _MOST_OFFSETS:
        raise SourceError(f"{len(values)} {name}", f"at most {_MOST_OFFSETS}", "thin them out")
    return np.array([_number(name, value) for value in values], dtype=np.float64)


def _number(name: str, value: Any) -> float:
    if isinstance(value, bool) or not isinstance(value, int | float):
        raise SourceError(f"{name} = {value!r}", "a number", "correct it")
    return float(value)
