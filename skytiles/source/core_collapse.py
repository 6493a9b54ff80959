"""Core collapse in the Galaxy: light that breaks out of a star some time after the neutrinos."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from statistics import NormalDist

from skytiles.errors import SourceError
from skytiles.source.assumption import Assumption
from skytiles.source.galaxy import GALAXY
from skytiles.source.hypothesis import NEVER_D, Hypothesis
from skytiles.source.offset_grid import normal_offsets
from skytiles.source.source_model import SourceModel

_SHARES = "Smith et al. 2011, MNRAS 412, 1522, volume-limited fractions, from memory"
_DELAYS = "radius over shock speed, order of magnitude, from memory"
_LIGHT = "typical light curves, from memory"
_HOURS_PER_DAY = 24.0
_MOST_NODES = 24


def _class(
    short: str, name: str, *, numbers: tuple[float, float, float, int, float, float, float, float]
) -> tuple[Assumption, ...]:
    weight, delay_h, factor, n_nodes, first_mag, peak_mag, rise_d, slope = numbers

    def one(
        key: str, label: str, value: float, unit: str, source: str, low: float, high: float
    ) -> Assumption:
        return Assumption(f"{short}_{key}", f"{name}: {label}", value, unit, source, low, high)

    return (
        one("weight", "share", weight, "", _SHARES, 0.0, 1.0),
        one("delay_h", "delay of the light, median", delay_h, "h", _DELAYS, 1e-4, 1000.0),
        one("delay_factor", "delay, factor of one sigma", factor, "", _DELAYS, 1.0, 20.0),
        one("delay_nodes", "delays counted with", n_nodes, "", "quadrature", 1, _MOST_NODES),
        one("first_mag", "absolute V at first light", first_mag, "mag", _LIGHT, -25.0, 10.0),
        one("peak_mag", "absolute V at the peak", peak_mag, "mag", _LIGHT, -25.0, 10.0),
        one("rise_d", "rise to the peak", rise_d, "d", _LIGHT, 0.02, 1000.0),
        one("slope_mag_per_d", "decline after it", slope, "mag/d", _LIGHT, -1.0, 5.0),
    )


CLASSES = {
    "rsg": "red supergiant (II-P, II-L, IIn)",
    "stripped_part": "partly stripped (IIb)",
    "bsg": "blue supergiant",
    "stripped": "stripped (Ib, Ic)",
}

ASSUMPTIONS: tuple[Assumption, ...] = (
    *_class("rsg", CLASSES["rsg"], numbers=(0.61, 20.0, 1.8, 12, -13.0, -17.0, 10.0, 0.01)),
    *_class(
        "stripped_part",
        CLASSES["stripped_part"],
        numbers=(0.11, 5.0, 2.5, 6, -13.0, -17.0, 18.0, 0.05),
    ),
    *_class("bsg", CLASSES["bsg"], numbers=(0.02, 2.5, 1.5, 3, -12.5, -15.5, 80.0, 0.01)),
    *_class(
        "stripped",
        CLASSES["stripped"],
        numbers=(0.26, 5.0 / 60.0, 3.0, 3, -12.0, -17.3, 18.0, 0.05),
    ),
    Assumption(
        "no_light_weight", "no light at all (failed collapse)", 0.0, "", "assumption", 0.0, 0.99
    ),
    Assumption(
        "spread_mag",
        "spread of the peak, the same at all times",
        1.2,
        "mag",
        "assumption",
        0.0,
        4.0,
    ),
    *GALAXY,
)


def core_collapse(values: Mapping[str, float]) -> SourceModel:
    """The light of a core collapse in the Galaxy, as absolute magnitudes.

    Parameters
    ----------
    values : mapping    a number for each of ASSUMPTIONS

    Returns
    -------
    SourceModel    to be placed in the Galaxy; its offsets are the spread alone

    Raises
    ------
    SourceError    when the shares of the classes sum to nothing

    Source: DEVELOPERS.md, source model; each number names its own.
    """
    total = sum(values[f"{short}_weight"] for short in CLASSES)
    if total <= 0.0:
        raise SourceError("shares of 0 for every class", "a sum above 0", "give one a share")
    scale = (1.0 - values["no_light_weight"]) / total
    hypotheses = [one for short in CLASSES for one in _delayed(short, values, scale)]
    if values["no_light_weight"] > 0.0:
        hypotheses.append(no_light(values["no_light_weight"]))
    offsets_mag, offset_weights = normal_offsets(values["spread_mag"])
    return SourceModel(
        hypotheses=tuple(hypotheses),
        offsets_mag=offsets_mag,
        offset_weights=offset_weights,
        label="core collapse in the Galaxy",
        preset="core collapse",
        parameters=dict(values),
        placement="galactic",
    )


def no_light(weight: float) -> Hypothesis:
    """A hypothesis under which nothing will ever be seen.

    Parameters
    ----------
    weight : float    0..1

    Returns
    -------
    Hypothesis
    """
    return Hypothesis("no light", weight, NEVER_D, 0.0, 0.0, 1.0)


def equal_probability_delays_d(median_h: float, factor: float, n_nodes: int) -> list[float]:
    """Delays that stand for a log-normal distribution, each for the same share of it.

    Parameters
    ----------
    median_h : float    hours
    factor : float      one sigma, as a factor
    n_nodes : int       number of delays

    Returns
    -------
    list of float    days, ascending: the midpoints of n equal shares

    Source: quantiles (j + 1/2) / n; they are the model, not an approximation of an integral.
    """
    sigmas = [NormalDist().inv_cdf((j + 0.5) / n_nodes) for j in range(n_nodes)]
    return [median_h / _HOURS_PER_DAY * factor**sigma for sigma in sigmas]


def _delayed(short: str, values: Mapping[str, float], scale: float) -> Iterator[Hypothesis]:
    weight = values[f"{short}_weight"] * scale
    if weight <= 0.0:
        return
    n_nodes = round(values[f"{short}_delay_nodes"])
    delays_d = equal_probability_delays_d(
        values[f"{short}_delay_h"], values[f"{short}_delay_factor"], n_nodes
    )
    for delay_d in delays_d:
        yield Hypothesis(
            label=CLASSES[short],
            weight=weight / n_nodes,
            first_light_d=delay_d,
            m_first=values[f"{short}_first_mag"],
            m_peak=values[f"{short}_peak_mag"],
            rise_d=values[f"{short}_rise_d"],
            slope_mag_per_d=values[f"{short}_slope_mag_per_d"],
        )
