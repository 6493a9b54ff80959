"""Source models that can be chosen by name."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from typing import Any

from skytiles.source import core_collapse, single_lights
from skytiles.source.assumption import Assumption, filled_in
from skytiles.source.offset_grid import normal_offsets
from skytiles.source.source_model import SourceModel

__all__ = ["PRESETS", "Preset", "normal_offsets", "preset_to_json", "steady_model"]

# What is assumed everywhere and cannot be changed by a number.
_COLOURS = "Vega magnitudes; intrinsic colours are 0 unless a number says otherwise."
_DUST = "Dust dims each band after Cardelli, Clayton & Mathis 1989 with R_V = 3.1."


@dataclass(frozen=True)
class Preset:
    """A source model with its assumptions; call it with the numbers that differ."""

    name: str
    about: str
    # The prior that suits it: "flat" or "galactic".
    prior: str
    assumptions: tuple[Assumption, ...]
    make: Callable[[Mapping[str, float]], SourceModel]

    def __call__(self, **changed: float) -> SourceModel:
        """The model with some numbers changed."""
        return self.make(filled_in(self.assumptions, changed))


_ALL = (
    Preset(
        "core collapse",
        "A star of the Galaxy collapses. Neutrinos leave at once; light shows when the shock "
        f"reaches the surface, minutes to days later. {_COLOURS} {_DUST}",
        "galactic",
        core_collapse.ASSUMPTIONS,
        core_collapse.core_collapse,
    ),
    Preset(
        "steady",
        f"A light that shines before and after the event at one brightness. {_COLOURS}",
        "flat",
        single_lights.STEADY,
        single_lights.steady,
    ),
    Preset(
        "afterglow",
        f"Light from the first seconds on that falls as a power of time. {_COLOURS}",
        "flat",
        single_lights.AFTERGLOW,
        single_lights.afterglow,
    ),
    Preset(
        "red transient",
        "A light at a stated distance that is constant for a day and then fades, faster in the "
        "blue: linear in wavelength between g and i. No dust is counted.",
        "flat",
        single_lights.RED_TRANSIENT,
        single_lights.red_transient,
    ),
    Preset(
        "nova",
        f"A nova in the disc of the Galaxy. {_COLOURS} {_DUST}",
        "galactic",
        single_lights.NOVA,
        single_lights.nova,
    ),
)

PRESETS: dict[str, Preset] = {preset.name: preset for preset in _ALL}


def steady_model(magnitude: float = 12.0, sigma_mag: float = 2.0) -> SourceModel:
    """A light that shone before the event and stays as it is.

    Parameters
    ----------
    magnitude : float    its median magnitude
    sigma_mag : float    its spread (normal), magnitudes, 0 to 10

    Returns
    -------
    SourceModel

    Raises
    ------
    SourceError    when a number is not finite or out of range
    """
    return PRESETS["steady"](magnitude=magnitude, sigma_mag=sigma_mag)


def preset_to_json(preset: Preset) -> dict[str, Any]:
    """A preset with all that it assumes, as it is shown at Launch.

    Parameters
    ----------
    preset : Preset

    Returns
    -------
    dict    preset, about, prior, assumptions

    Source: our own.
    """
    return {
        "preset": preset.name,
        "about": preset.about,
        "prior": preset.prior,
        "assumptions": [one.to_json() for one in preset.assumptions],
    }
