"""The invented source, and whether a frame catches it.

Written apart from the ledger on purpose: a rehearsal is also a trial of the ledger's number.
One source is hidden for the observers to find; many more are hidden afterwards, and the share
of them that the frames would have caught must agree with `searched`.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass, field

import numpy as np

from skytiles.sphere import healpix_door

LOOK_S = 3600.0
SATURATION_WIDTH_MAG = 0.2
# 50 % magnitude minus reported limit, by kind (DEVELOPERS.md, the ledger exactly).
LIMIT_SHIFT_MAG = {
    "50 %": 0.0,
    "5 sigma": 0.0,
    "3 sigma": -0.55,
    "faintest star seen": -0.5,
    "estimate": -0.5,
}
COMPLETENESS = {
    "eyepiece": 0.6,
    "image by eye": 0.85,
    "program against a catalogue": 0.9,
    "difference imaging": 0.97,
}
# North Galactic pole, ICRS (Hipparcos catalogue, volume 1, section 1.5.3).
GALACTIC_POLE_RA_DEG, GALACTIC_POLE_DEC_DEG = 192.85948, 27.12825


@dataclass(frozen=True)
class SeenFrame:
    """What matters of an examined frame for catching a source."""

    number: int
    instrument: int
    mid_s: float
    footprint: dict
    centre: np.ndarray
    field_deg: float
    m50_mag: float
    width_mag: float
    completeness: float
    saturation_mag: float | None


@dataclass(frozen=True)
class Sources:
    """Invented sources: unit vectors, magnitudes, and which of them no look can find."""

    vectors: np.ndarray
    magnitudes: np.ndarray
    is_hopeless: np.ndarray


@dataclass
class Looks:
    """Frames joined to looks in time order: the same instrument, place and hour."""

    frames: list[SeenFrame] = field(default_factory=list)
    look_of: list[int] = field(default_factory=list)
    _firsts: list[SeenFrame] = field(default_factory=list)

    def join(self, frame: SeenFrame) -> int:
        """Number of the look that this frame belongs to."""
        number = next(
            (n for n, first in enumerate(self._firsts) if _is_same_look(first, frame)),
            len(self._firsts),
        )
        if number == len(self._firsts):
            self._firsts.append(frame)
        self.frames.append(frame)
        self.look_of.append(number)
        return number

    @property
    def n_looks(self) -> int:
        """How many pairs of eyes have looked."""
        return len(self._firsts)

    def members(self, look: int) -> list[SeenFrame]:
        """The frames of one look."""
        numbered = zip(self.frames, self.look_of, strict=True)
        return [frame for frame, number in numbered if number == look]


def _is_same_look(first: SeenFrame, frame: SeenFrame) -> bool:
    if first.instrument != frame.instrument or abs(frame.mid_s - first.mid_s) > LOOK_S:
        return False
    chord = float(np.linalg.norm(first.centre - frame.centre))
    separation_deg = math.degrees(2.0 * math.asin(min(1.0, chord / 2.0)))
    return separation_deg <= first.field_deg / 2.0


def direction(ra_deg: float, dec_deg: float) -> np.ndarray:
    """Unit vector of one direction."""
    ra, dec = math.radians(ra_deg), math.radians(dec_deg)
    return np.array([math.cos(dec) * math.cos(ra), math.cos(dec) * math.sin(ra), math.sin(dec)])


def is_inside(footprint: dict, vectors: np.ndarray) -> np.ndarray:
    """Which directions (n,3) a frame's footprint covers: (n,) bool."""
    if footprint["shape"] == "circle":
        centre = direction(footprint["ra_deg"], footprint["dec_deg"])
        return vectors @ centre >= math.cos(math.radians(footprint["diameter_deg"] / 2.0))
    if footprint["shape"] == "mosaic":
        return np.any([is_inside(part, vectors) for part in footprint["parts"]], axis=0)
    corners = np.array([direction(ra, dec) for ra, dec in footprint["corners_deg"]])
    edges = np.cross(corners, np.roll(corners, -1, axis=0))
    # Corners may run either way round: all edges must agree with the middle.
    edges *= np.sign(edges @ corners.sum(axis=0))[:, None]
    return np.all(vectors @ edges.T >= 0.0, axis=1)


def detection_chances(frame: SeenFrame, magnitudes: np.ndarray) -> np.ndarray:
    """Chance that the frame shows sources of these magnitudes to whoever looks at it: (n,)."""
    steps = np.clip((magnitudes - frame.m50_mag) / frame.width_mag, -500.0, 500.0)
    chances = np.where(steps <= 3.0, 1.0 / (1.0 + np.exp(steps)), 0.0)
    if frame.saturation_mag is not None:
        over = (frame.saturation_mag - magnitudes) / SATURATION_WIDTH_MAG
        chances = chances / (1.0 + np.exp(np.clip(over, -500.0, 500.0)))
    return chances


def draw_sources(
    rng: np.random.Generator,
    n: int,
    *,
    order: int,
    pixels: np.ndarray,
    probabilities: np.ndarray,
    magnitude: float,
    sigma_mag: float,
) -> Sources:
    """Sources drawn from a region and the steady model; outside the region is a zero vector."""
    from_top = np.searchsorted(np.cumsum(probabilities), rng.random(n), side="right")
    is_in_region = from_top < len(pixels)
    vectors = np.zeros((n, 3))
    if is_in_region.any():
        chosen = np.asarray(pixels, dtype=np.int64)[from_top[is_in_region]]
        vectors[is_in_region] = _points_within(rng, chosen, order)
    magnitudes = magnitude + sigma_mag * rng.standard_normal(n)
    return Sources(vectors, magnitudes, rng.random(n) < _hopeless_chances(vectors))


def _points_within(rng: np.random.Generator, pixels: np.ndarray, order: int) -> np.ndarray:
    """One random direction inside each pixel, by a random descendant 10 orders finer."""
    deeper = min(10, 29 - order)
    children = pixels * 4**deeper + rng.integers(0, 4**deeper, size=len(pixels))
    return np.asarray(healpix_door.pixel_vectors(order + deeper, children))


def _hopeless_chances(vectors: np.ndarray) -> np.ndarray:
    """Share of sources that no number of looks finds: halos, crowding, worse in the plane."""
    pole = direction(GALACTIC_POLE_RA_DEG, GALACTIC_POLE_DEC_DEG)
    is_in_plane = np.abs(vectors @ pole) <= math.sin(math.radians(5.0))
    return np.where(is_in_plane, 0.05, 0.02)


def share_found(rng: np.random.Generator, sources: Sources, frames: Sequence[SeenFrame]) -> float:
    """Share of many hidden sources that these frames would have caught."""
    looks = Looks()
    for frame in sorted(frames, key=lambda one: (one.mid_s, one.number)):
        looks.join(frame)
    n = len(sources.magnitudes)
    is_found = np.zeros(n, dtype=bool)
    for look in range(looks.n_looks):
        is_found |= _found_in_look(rng, sources, looks.members(look))
    return float(np.mean(is_found & ~sources.is_hopeless))


def _found_in_look(
    rng: np.random.Generator, sources: Sources, members: Sequence[SeenFrame]
) -> np.ndarray:
    """One pair of eyes a look: who overlooks a source in one frame overlooks it in the next."""
    n = len(sources.magnitudes)
    is_shown = np.zeros(n, dtype=bool)
    for frame in members:
        chances = detection_chances(frame, sources.magnitudes)
        is_shown |= is_inside(frame.footprint, sources.vectors) & (rng.random(n) < chances)
    return is_shown & (rng.random(n) < max(frame.completeness for frame in members))
