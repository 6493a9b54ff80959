"""Source models as JSON: a preset with its numbers, or everything spelled out."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from typing import Any

import numpy as np
import numpy.typing as npt

from skytiles.errors import SourceError
from skytiles.source.hypothesis import Hypothesis
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
    make: Callable[..., SourceModel] | None = PRESETS.get(name)
    if make is None:
        raise SourceError(
            f"source model {name!r}", ", ".join(PRESETS), "choose one of them, or give hypotheses"
        )
    if not isinstance(parameters, Mapping):
        raise SourceError("parameters that are no object", "name and number", "correct them")
    numbers = {str(key): _number(str(key), value) for key, value in parameters.items()}
    try:
        return make(**numbers)
    except TypeError as error:
        raise SourceError(
            f"parameters {sorted(numbers)} for {name!r}",
            "those that the preset names in its JSON",
            "leave out the others",
        ) from error


def _custom(document: Mapping[str, Any]) -> SourceModel:
    hypotheses = document["hypotheses"]
    if not isinstance(hypotheses, list) or not all(isinstance(h, Mapping) for h in hypotheses):
        raise SourceError("hypotheses that are no list", "a list of objects", "correct it")
    return SourceModel(
        hypotheses=tuple(_hypothesis_from_json(hypothesis) for hypothesis in hypotheses),
        offsets_mag=_numbers("offsets_mag", document.get("offsets_mag", [0.0])),
        offset_weights=_numbers("offset_weights", document.get("offset_weights", [1.0])),
        label=str(document.get("label", "custom")),
        preset="custom",
    )


def _hypothesis_to_json(hypothesis: Hypothesis) -> dict[str, Any]:
    numbers = {name: getattr(hypothesis, name) for name in _HYPOTHESIS_NUMBERS}
    return {"label": hypothesis.label, **numbers}


def _hypothesis_from_json(document: Mapping[str, Any]) -> Hypothesis:
    numbers = {
        name: _number(name, document[name]) for name in _HYPOTHESIS_NUMBERS if name in document
    }
    numbers.setdefault("slope_mag_per_d", 0.0)
    missing = [name for name in _HYPOTHESIS_NUMBERS if name not in numbers]
    if missing:
        raise SourceError(
            f"a hypothesis without {', '.join(missing)}",
            ", ".join(_HYPOTHESIS_NUMBERS),
            "add the missing numbers",
        )
    return Hypothesis(label=str(document.get("label", "")), **numbers)


def _numbers(name: str, values: Any) -> Floats:
    if not isinstance(values, list):
        raise SourceError(f"{name} that is no list", "a list of numbers", "correct it")
    return np.array([_number(name, value) for value in values], dtype=np.float64)


def _number(name: str, value: Any) -> float:
    if isinstance(value, bool) or not isinstance(value, int | float):
        raise SourceError(f"{name} = {value!r}", "a number", "correct it")
    return float(value)
