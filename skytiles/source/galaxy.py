"""The numbers of the Galaxy that a source model assumes."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import replace

from skytiles.region.galactic_prior import GalacticPrior
from skytiles.source.assumption import Assumption

_ADAMS = "Adams et al. 2013, ApJ 778, 164, section 2 (in part from memory)"
_MEMORY = "from memory"

GALAXY = (
    Assumption("disc_scale_kpc", "scale length of the disc", 2.9, "kpc", _ADAMS, 0.1, 20.0),
    Assumption("disc_height_kpc", "scale height of the disc", 0.095, "kpc", _ADAMS, 0.01, 5.0),
    Assumption("sun_radius_kpc", "Sun from the centre", 8.7, "kpc", _ADAMS, 1.0, 14.0),
    Assumption("sun_height_kpc", "Sun above the plane", 0.024, "kpc", _ADAMS, 0.0, 0.5),
    Assumption("edge_kpc", "edge of the disc", 15.0, "kpc", _ADAMS, 14.5, 50.0),
    Assumption("dust_scale_kpc", "scale length of the dust", 2.9, "kpc", _ADAMS, 0.1, 20.0),
    Assumption("dust_height_kpc", "scale height of the dust", 0.110, "kpc", _ADAMS, 0.01, 5.0),
    Assumption(
        "centre_extinction_mag", "A_V to the Galactic centre", 30.0, "mag", _ADAMS, 0.0, 100.0
    ),
    Assumption("lmc_weight", "share in the Large Magellanic Cloud", 0.05, "", _MEMORY, 0.0, 0.5),
    Assumption("smc_weight", "share in the Small Magellanic Cloud", 0.02, "", _MEMORY, 0.0, 0.4),
    Assumption("floor", "share anywhere in the sky", 0.01, "", "assumption", 0.0, 0.1),
)


def galactic_prior_of(parameters: Mapping[str, float]) -> GalacticPrior:
    """The prior that a source model's numbers state.

    Parameters
    ----------
    parameters : mapping    name to number; what is missing stands as in GALAXY

    Returns
    -------
    GalacticPrior

    Source: GALAXY.
    """
    values = {one.name: float(parameters.get(one.name, one.value)) for one in GALAXY}
    weights = (values.pop("lmc_weight"), values.pop("smc_weight"))
    clouds = tuple(
        replace(cloud, weight=weight)
        for cloud, weight in zip(GalacticPrior().clouds, weights, strict=True)
    )
    return GalacticPrior(clouds=clouds, **values)
