"""A search played out: sources are drawn, frames are taken, somebody finds them or not.

Imports nothing of skytiles: it is the other side of the comparison with the ledger.
"""

import math

import numpy as np


def brightness(light, t_d, first_light_d):
    """Magnitudes (n,) of sources at one time; light: the six numbers of the definition."""
    since = t_d - first_light_d
    plateau, rise = light["plateau_d"], light["rise_d"]
    with np.errstate(divide="ignore", invalid="ignore"):
        climbed = np.log10(since / plateau) / math.log10(rise / plateau)
    on_the_way = light["m_first"] + (light["m_peak"] - light["m_first"]) * climbed
    after = light["m_peak"] + light["slope"] * (since - rise)
    found = np.where(since <= plateau, light["m_first"], np.where(since <= rise, on_the_way, after))
    return np.where(since < 0, np.inf, found)


def chance_on_frame(frame, magnitudes):
    is_in_reach = magnitudes <= frame["m_eff"] + 3 * frame["s"]
    with np.errstate(over="ignore"):
        chance = 1 / (1 + np.exp((magnitudes - frame["m_eff"]) / frame["s"]))
        if frame["m_sat"] is not None:
            chance = chance / (1 + np.exp((frame["m_sat"] - magnitudes) / 0.2))
    return np.where(is_in_reach, chance, 0.0)


def looks_of(frames):
    """All frames of one look carry the same name under "look"."""
    looks = {}
    for frame in frames:
        looks.setdefault(frame["look"], []).append(frame)
    return looks.values()


def play(rng, *, pixels, undetectable, magnitudes_on, frames):
    """(n,) whether each source was found; pixels (n,): where it is, -1 outside.

    magnitudes_on(frame) gives the magnitudes (n,) of all sources on one frame.
    """
    can_be_found = (pixels >= 0) & (rng.random(len(pixels)) >= undetectable[pixels])
    is_found = np.zeros(len(pixels), bool)
    for look in looks_of(frames):
        attention = rng.random(len(pixels)) < max(frame["c"] for frame in look)
        is_shown = np.zeros(len(pixels), bool)
        for frame in look:
            shares = np.append(frame["covers"], 0.0)[pixels]
            chances = shares * chance_on_frame(frame, magnitudes_on(frame))
            is_shown |= rng.random(len(pixels)) < chances
        is_found |= attention & is_shown
    return is_found & can_be_found
