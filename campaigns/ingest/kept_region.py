"""Regions with the Galactic prior: a second to compute, so the same one is computed once."""

import json
from collections.abc import Sequence
from dataclasses import asdict
from typing import Any

import numpy as np

from campaigns.ingest.kept_arrays import Arrays, hash_of, kept_arrays
from skytiles.region.constraints import AnyConstraint, MapConstraint
from skytiles.region.galactic_prior import GalacticPrior
from skytiles.region.make_region import make_region
from skytiles.region.region import Region

# Raised whenever the numbers would come out otherwise.
_EDITION = 1
_ARRAYS = ("pixels", "probabilities")


def kept_region(
    constraints: Sequence[AnyConstraint],
    *,
    smallest_side_deg: float | None,
    galaxy: GalacticPrior,
) -> Region:
    """The region of some constraints with the Galactic prior."""

    def compute() -> Arrays:
        region = make_region(
            constraints, smallest_side_deg=smallest_side_deg, prior="galactic", galaxy=galaxy
        )
        values = dict(vars(region))
        arrays = {name: values.pop(name) for name in _ARRAYS}
        return {**arrays, "values": np.frombuffer(json.dumps(values).encode(), np.uint8)}

    parts = [part for constraint in constraints for part in _parts(constraint)]
    sha256 = hash_of(_EDITION, "region", asdict(galaxy), smallest_side_deg, *parts)
    arrays = kept_arrays(sha256, compute=compute)
    values = json.loads(bytes(arrays["values"]))
    notes = tuple(values.pop("notes"))
    return Region(
        pixels=arrays["pixels"], probabilities=arrays["probabilities"], notes=notes, **values
    )


def _parts(constraint: AnyConstraint) -> list[Any]:
    """All that a constraint says of the direction."""
    if not isinstance(constraint, MapConstraint):
        return [constraint.to_json()]
    sky_map = constraint.sky_map
    arrays = (sky_map.orders, sky_map.pixels, sky_map.probabilities)
    return ["map", sky_map.total_probability, *(array.tobytes() for array in arrays)]
