"""Source models of one light: steady, afterglow, red transient, nova."""

from __future__ import annotations

import math
from collections.abc import Mapping

from skytiles.source.assumption import Assumption
from skytiles.source.galaxy import GALAXY
from skytiles.source.hypothesis import ALWAYS_D, Hypothesis
from skytiles.source.offset_grid import normal_offsets
from skytiles.source.source_model import SourceModel

_ASSUMED = "assumption"
_MEMORY = "typical values, from memory"
_HOUR_D = 1.0 / 24.0
_SECOND_D = 1.0 / 86400.0
# An afterglow is followed until it is this old.
_AFTERGLOW_END_D = 100.0

STEADY = (
    Assumption("magnitude", "most likely magnitude", 12.0, "mag", _ASSUMED, -30.0, 40.0),
    Assumption("sigma_mag", "spread, one sigma", 2.0, "mag", _ASSUMED, 0.0, 10.0),
)

AFTERGLOW = (
    Assumption("magnitude_1h", "R one hour after the event", 17.0, "mag", _MEMORY, -10.0, 40.0),
    Assumption("sigma_mag", "spread, one sigma", 2.0, "mag", _MEMORY, 0.0, 10.0),
    Assumption("decay_index", "flux falls as time to minus this", 1.0, "", _MEMORY, 0.0, 5.0),
    Assumption("start_s", "constant until", 30.0, "s", _ASSUMED, 1.0, 3600.0),
)

RED_TRANSIENT = (
    Assumption("peak_mag", "absolute i at first", -15.5, "mag", _MEMORY, -25.0, 0.0),
    Assumption("plateau_d", "constant until", 1.0, "d", _MEMORY, 0.02, 30.0),
    Assumption("red_slope_mag_per_d", "then fainter in i by", 0.4, "mag/d", _MEMORY, -1.0, 5.0),
    Assumption("blue_slope_mag_per_d", "then fainter in g by", 1.2, "mag/d", _MEMORY, -1.0, 5.0),
    Assumption("sigma_mag", "spread, one sigma", 0.7, "mag", _ASSUMED, 0.0, 5.0),
    Assumption("distance_mpc", "distance, median", 40.0, "Mpc", _ASSUMED, 0.01, 5000.0),
    Assumption("distance_factor", "distance, factor of one sigma", 1.3, "", _ASSUMED, 1.0, 5.0),
)

NOVA = (
    Assumption("peak_mag", "absolute V at the peak", -7.5, "mag", _MEMORY, -12.0, 0.0),
    Assumption("first_mag", "absolute V at first light", -2.5, "mag", _ASSUMED, -12.0, 10.0),
    Assumption("rise_d", "rise to the peak", 3.0, "d", _MEMORY, 0.02, 100.0),
    Assumption("slope_mag_per_d", "decline after it", 0.1, "mag/d", _MEMORY, -1.0, 5.0),
    Assumption("spread_mag", "spread, the same at all times", 1.0, "mag", _MEMORY, 0.0, 4.0),
    *GALAXY,
)


def steady(values: Mapping[str, float]) -> SourceModel:
    """A light that shone before the event and stays as it is.

    Parameters
    ----------
    values : mapping    a number for each of STEADY

    Returns
    -------
    SourceModel
    """
    magnitude, sigma_mag = values["magnitude"], values["sigma_mag"]
    always = Hypothesis("steady", 1.0, ALWAYS_D, magnitude, magnitude, 1.0, 0.0)
    label = f"steady light of magnitude {magnitude:g}, spread {sigma_mag:g}"
    return _single("steady", label, always, values, sigma_mag=sigma_mag)


def afterglow(values: Mapping[str, float]) -> SourceModel:
    """Light from the first seconds on, falling as a power of time.

    Parameters
    ----------
    values : mapping    a number for each of AFTERGLOW

    Returns
    -------
    SourceModel

    Source: flux ~ t^-1 as the usual case, from memory.
    """
    start_d = values["start_s"] * _SECOND_D

    def magnitude_at(t_d: float) -> float:
        fall = 2.5 * values["decay_index"] * math.log10(t_d / _HOUR_D)
        return values["magnitude_1h"] + fall

    # A power law is a straight line in log time: a rise to a fainter end.
    light = Hypothesis(
        "afterglow",
        1.0,
        0.0,
        m_first=magnitude_at(start_d),
        m_peak=magnitude_at(_AFTERGLOW_END_D),
        rise_d=_AFTERGLOW_END_D,
        plateau_d=start_d,
    )
    label = f"afterglow, R {values['magnitude_1h']:g} after one hour"
    return _single("afterglow", label, light, values, sigma_mag=values["sigma_mag"])


def red_transient(values: Mapping[str, float]) -> SourceModel:
    """A light that fades faster in the blue, at a stated distance. No dust is counted.

    Parameters
    ----------
    values : mapping    a number for each of RED_TRANSIENT

    Returns
    -------
    SourceModel
    """
    modulus_mag = 5.0 * math.log10(values["distance_mpc"]) + 25.0
    at_first = values["peak_mag"] + modulus_mag
    light = Hypothesis(
        "red transient",
        1.0,
        0.0,
        m_first=at_first,
        m_peak=at_first,
        rise_d=values["plateau_d"],
        slope_mag_per_d=values["red_slope_mag_per_d"],
        blue_slope_mag_per_d=values["blue_slope_mag_per_d"],
    )
    by_distance = 5.0 * math.log10(values["distance_factor"])
    label = f"red transient at {values['distance_mpc']:g} Mpc"
    sigma_mag = min(10.0, math.hypot(values["sigma_mag"], by_distance))
    return _single("red transient", label, light, values, sigma_mag=sigma_mag)


def nova(values: Mapping[str, float]) -> SourceModel:
    """A nova in the disc of the Galaxy, as absolute magnitudes.

    Parameters
    ----------
    values : mapping    a number for each of NOVA

    Returns
    -------
    SourceModel    to be placed in the Galaxy; its offsets are the spread alone
    """
    light = Hypothesis(
        "nova",
        1.0,
        0.0,
        values["first_mag"],
        values["peak_mag"],
        values["rise_d"],
        values["slope_mag_per_d"],
    )
    label = "nova in the Galaxy"
    return _single(
        "nova", label, light, values, sigma_mag=values["spread_mag"], placement="galactic"
    )


def _single(
    preset: str,
    label: str,
    light: Hypothesis,
    values: Mapping[str, float],
    *,
    sigma_mag: float,
    placement: str = "apparent",
) -> SourceModel:
    offsets_mag, offset_weights = normal_offsets(sigma_mag)
    return SourceModel(
        hypotheses=(light,),
        offsets_mag=offsets_mag,
        offset_weights=offset_weights,
        label=label,
        preset=preset,
        parameters=dict(values),
        placement=placement,
    )
