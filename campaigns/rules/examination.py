"""How sure one finds what is there: the chance by the way of looking."""

from collections.abc import Mapping

# Chance that a source well above the limit is noticed; assumptions, named in DEVELOPERS.md.
COMPLETENESS: Mapping[str, float] = {
    "eyepiece": 0.6,
    "image by eye": 0.85,
    "program against a catalogue": 0.9,
    "difference imaging": 0.97,
}
WAYS = tuple(COMPLETENESS)
LIMIT_KINDS = (
    "50 %",
    "5 sigma",
    "3 sigma",
    "90 %",
    "faintest star seen",
    "estimate",
)
# Ways in which a program, not a person, looked: only these can have masked saturated pixels.
PROGRAM_WAYS = ("program against a catalogue", "difference imaging")


def completeness_of(examined_way: str, *, stated: float | None = None) -> float:
    """The stated chance, else that of the way."""
    return COMPLETENESS.get(examined_way, 0.0) if stated is None else stated
