"""The source model of a new campaign, with its prior and what the alert says of the distance."""

from collections.abc import Mapping, Sequence
from typing import Any

from skytiles.errors import SourceError
from skytiles.region.constraints import AnyConstraint
from skytiles.region.distance import DistanceConstraint
from skytiles.region.make_region import PRIORS
from skytiles.source.presets import PRESETS
from skytiles.source.source_json import source_from_json, source_to_json
from skytiles.source.source_model import SourceModel


def source_to_launch(
    source: str | Mapping[str, Any], *, prior: str, constraints: Sequence[AnyConstraint]
) -> dict[str, Any]:
    """The model as it is stored; an empty prior is the one that suits the model."""
    named = {"preset": source} if isinstance(source, str) else source
    model = source_from_json(_with_distance(named, constraints))
    stated = prior or str(named.get("prior") or "") or prior_suiting(model)
    if stated not in PRIORS:
        raise SourceError(f"prior {stated!r}", " or ".join(PRIORS), "choose one of these")
    # Frames before it add nothing, and the Board says so.
    return {**source_to_json(model), "prior": stated, "first_light_d": model.first_light_d}


def prior_suiting(model: SourceModel) -> str:
    """Sources in the Galaxy are where its stars are."""
    if model.preset in PRESETS:
        return PRESETS[model.preset].prior
    return "galactic" if model.placement == "galactic" else "flat"


def _with_distance(
    source: Mapping[str, Any], constraints: Sequence[AnyConstraint]
) -> Mapping[str, Any]:
    """A preset that assumes a distance takes the alert's, unless somebody has typed one."""
    preset = PRESETS.get(str(source.get("preset")))
    distances = [one for one in constraints if isinstance(one, DistanceConstraint)]
    names = {one.name for one in preset.assumptions} if preset else set()
    typed = source.get("parameters") or {}
    if not distances or "distance_mpc" not in names or "distance_mpc" in typed:
        return source
    stated = {"distance_mpc": distances[0].median_mpc, "distance_factor": distances[0].factor}
    return {**source, "parameters": {**typed, **stated}}
