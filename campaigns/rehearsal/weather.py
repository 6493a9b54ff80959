"""Seeded weather: clear and clouded spells over one site."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np


@dataclass(frozen=True)
class Weather:
    """Alternating spells: `changes_s` are the times at which clear and clouded swap."""

    is_clear_first: bool
    changes_s: tuple[float, ...]

    def is_clear(self, time_s: float) -> bool:
        """Whether the sky is clear at a time of the rehearsal."""
        n_swaps = int(np.searchsorted(self.changes_s, time_s, side="right"))
        return self.is_clear_first == (n_swaps % 2 == 0)

    def was_clear(self, start_s: float, end_s: float) -> bool:
        """Whether the sky stayed clear from start to end."""
        is_unbroken = not any(start_s < change_s < end_s for change_s in self.changes_s)
        return self.is_clear(start_s) and is_unbroken


def draw_weather(
    rng: np.random.Generator, *, clear_chance: float, clear_spell_mean_h: float, hours: float
) -> Weather:
    """Exponential spells whose clear share is `clear_chance` in the long run."""
    clear_mean_s = 3600.0 * clear_spell_mean_h
    clouded_mean_s = clear_mean_s * (1.0 - clear_chance) / clear_chance
    is_clear = is_clear_first = bool(rng.random() < clear_chance)
    time_s = 0.0
    changes_s: list[float] = []
    while True:
        # A floor of one minute: nobody reports a single puff of cloud.
        time_s += max(60.0, rng.exponential(clear_mean_s if is_clear else clouded_mean_s))
        if time_s >= 3600.0 * hours:
            return Weather(is_clear_first, tuple(changes_s))
        changes_s.append(time_s)
        is_clear = not is_clear
