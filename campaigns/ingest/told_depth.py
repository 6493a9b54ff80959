"""The limit of a frame as a report tells it: typed, or from one star."""

from collections.abc import Mapping
from typing import Any

from campaigns.errors import InvalidInput
from observers.rules.problem import Problem
from skytiles.depth.limit_kinds import KIND_5_SIGMA, limit_from_star_mag

_ADVICE = "Give the star's magnitude with its signal-to-noise ratio, or the limit, not both."


def with_star_limit(values: Mapping[str, Any]) -> dict[str, Any]:
    """`star_mag` and `star_snr` become a 5 sigma limit."""
    told = dict(values)
    star_mag, star_snr = told.pop("star_mag", None), told.pop("star_snr", None)
    if star_mag is None and star_snr is None:
        return told
    problems = _star_problems(star_mag, star_snr, told)
    if problems:
        raise InvalidInput(problems[0].detail, _ADVICE, problems=problems)
    limit_mag = limit_from_star_mag(star_mag, signal_to_noise=star_snr)
    return {**told, "limit_mag": round(limit_mag, 3), "limit_kind": KIND_5_SIGMA}


def _star_problems(
    star_mag: float | None, star_snr: float | None, told: Mapping[str, Any]
) -> list[Problem]:
    if told.get("limit_mag") is not None:
        return [Problem("limit_mag", "The limit is given twice: by itself and by a star.")]
    if star_mag is None:
        return [Problem("star_mag", "The magnitude of the star is missing.")]
    if star_snr is None:
        return [Problem("star_snr", "The signal-to-noise ratio of the star is missing.")]
    if not 0.0 < star_snr < 1e6:
        return [Problem("star_snr", "A signal-to-noise ratio is a number above 0.")]
    return []
