"""The ledger's searched against searches played out source by source, for every preset.

Drawn from the model's own nodes the two agree within 4 sigma of the draw; drawn from the continuous
model (delays, distances, dust, spread) within 0.01.
"""

import math

import numpy as np
import pytest

from skytiles.ledger.ledger import Ledger
from skytiles.ledger.ledger_frame import LedgerFrame
from skytiles.ledger.undetectable import undetectable_fraction
from skytiles.region.galactic_prior import GalacticPrior
from skytiles.source.galactic_offsets import place_source
from skytiles.source.presets import PRESETS
from tests.skytiles.ledger.plain_galaxy import RATIOS, draw_sources
from tests.skytiles.ledger.plain_search import brightness, play

N = 200_000
N_PIXELS = 40
OUTSIDE = 0.08
CENTRE_DEG = (268.0, -28.0)
# Limits are spread over 8 magnitudes above these, so that brightness decides.
DEEPEST_MAG = {
    "core collapse": 12.0,
    "steady": 14.0,
    "afterglow": 20.0,
    "red transient": 20.0,
    "nova": 17.0,
}
# The table of the core collapse once more: share, delay in days, its factor, magnitudes, rise.
CLASSES = (
    (0.61, 20.0 / 24, 1.8, -13.0, -17.0, 10.0, 0.01),
    (0.11, 5.0 / 24, 2.5, -13.0, -17.0, 18.0, 0.05),
    (0.02, 2.5 / 24, 1.5, -12.5, -15.5, 80.0, 0.01),
    (0.26, 5.0 / 1440, 3.0, -12.0, -17.3, 18.0, 0.05),
)


class Scene:
    """Pixels across the Galactic plane, and frames of eight instruments over three nights."""

    def __init__(self, *, deepest_mag, bands):
        rng = np.random.default_rng(20270314)
        self.ras_deg = CENTRE_DEG[0] + rng.uniform(-4, 4, N_PIXELS)
        self.decs_deg = CENTRE_DEG[1] + rng.uniform(-4, 4, N_PIXELS)
        self.probabilities = rng.dirichlet(np.ones(N_PIXELS)) * (1 - OUTSIDE)
        self.undetectable = undetectable_fraction(self.ras_deg, self.decs_deg)
        self.frames = [
            frame
            for look in range(24)
            for frame in self._look(rng, look, deepest_mag=deepest_mag, bands=bands)
        ]

    def _look(self, rng, look, *, deepest_mag, bands):
        start_d = float(rng.uniform(0.002, 0.35) + rng.choice([0.0, 0.0, 1.0, 2.0]))
        band = str(rng.choice(bands))
        under = rng.random(N_PIXELS) < 0.2
        for number in range(int(rng.integers(1, 4))):
            shares = np.where(under, rng.choice([1.0, 0.6], N_PIXELS), 0.0)
            yield {
                "look": look,
                "t_d": start_d + 0.01 * number,
                "band": band,
                "covers": shares,
                "c": float(rng.choice([0.6, 0.85, 0.97])),
                "m_eff": float(deepest_mag - rng.uniform(0, 8)),
                "s": float(rng.choice([0.2, 0.4])),
                "m_sat": 4.0 if number == 1 else None,
            }

    def searched(self, model, offset_weights):
        ledger = Ledger(
            self.probabilities,
            OUTSIDE,
            undetectable=self.undetectable,
            source_model=model,
            offset_weights=offset_weights,
        )
        for key, frame in enumerate(self.frames):
            indices = np.flatnonzero(frame["covers"])
            entry = LedgerFrame(
                key=key,
                t_d=frame["t_d"],
                instrument=frame["look"],
                ra_deg=CENTRE_DEG[0],
                dec_deg=CENTRE_DEG[1],
                field_deg=30.0,
                is_examined=True,
                completeness=frame["c"],
                m_eff=frame["m_eff"],
                s=frame["s"],
                saturation_mag=frame["m_sat"],
                masks_saturated=frame["m_sat"] is not None,
                band=frame["band"],
            )
            ledger.add(entry, indices, frame["covers"][indices])
        return ledger.searched

    def draw_pixels(self, rng):
        return rng.choice([*range(N_PIXELS), -1], size=N, p=[*self.probabilities, OUTSIDE])

    def play(self, rng, pixels, magnitudes_on):
        return play(
            rng,
            pixels=pixels,
            undetectable=np.append(self.undetectable, 1.0),
            magnitudes_on=magnitudes_on,
            frames=self.frames,
        ).mean()


def placed(scene, model):
    if model.placement == "apparent":
        return model, None
    found = place_source(
        model,
        GalacticPrior(),
        ras_deg=scene.ras_deg,
        decs_deg=scene.decs_deg,
        probabilities=scene.probabilities,
        spread_mag=model.parameters["spread_mag"],
    )
    return found.model, found.offset_weights


def scene_for(name):
    return Scene(deepest_mag=DEEPEST_MAG[name], bands=("clear", "B", "V", "R", "I"))


def from_nodes(rng, scene, model, offset_weights):
    """Draw a hypothesis and a node of the offsets for each source."""
    pixels = scene.draw_pixels(rng)
    weights = [one.weight for one in model.hypotheses]
    which = rng.choice(len(weights), size=N, p=np.array(weights) / sum(weights))
    if offset_weights is None:
        nodes = rng.choice(len(model.offset_weights), size=N, p=model.offset_weights)
    else:
        reached = np.cumsum(offset_weights.astype(float), axis=1)
        drawn = rng.random(N) * reached[pixels, -1]
        nodes = np.empty(N, np.int64)
        for pixel in range(-1, N_PIXELS):
            rows = pixels == pixel
            nodes[rows] = np.searchsorted(reached[pixel], drawn[rows])
    extinctions = np.zeros(len(model.offsets_mag))
    if model.extinctions_mag is not None:
        extinctions = model.extinctions_mag

    def magnitudes_on(frame):
        found = np.full(N, np.inf)
        for number, one in enumerate(model.hypotheses):
            rows = which == number
            light = {
                "plateau_d": one.plateau_d,
                "rise_d": one.rise_d,
                "m_first": one.m_first,
                "m_peak": one.m_peak,
                "slope": slope_in(frame["band"], one),
            }
            found[rows] = brightness(light, frame["t_d"], np.full(rows.sum(), one.first_light_d))
        return found + model.offsets_mag[nodes] + RATIOS[frame["band"]] * extinctions[nodes]

    return scene.play(rng, pixels, magnitudes_on)


def slope_in(band, hypothesis):
    """Linear in wavelength between g (0.4825 um) and i (0.7672 um), constant beyond."""
    if hypothesis.blue_slope_mag_per_d is None:
        return hypothesis.slope_mag_per_d
    wavelength = {"B": 0.44, "V": 0.55, "R": 0.70, "I": 0.90, "clear": 0.60}[band]
    redness = min(max((wavelength - 0.4825) / (0.7672 - 0.4825), 0.0), 1.0)
    blue, red = hypothesis.blue_slope_mag_per_d, hypothesis.slope_mag_per_d
    return blue + (red - blue) * redness


def in_the_galaxy(rng, scene, pixels, spread_mag):
    """Continuous distances, dust and spread: offset and A_V of each source."""
    offsets, extinctions = np.zeros(N), np.zeros(N)
    for pixel in range(N_PIXELS):
        rows = np.flatnonzero(pixels == pixel)
        place = (scene.ras_deg[pixel], scene.decs_deg[pixel])
        distances, extinctions[rows] = draw_sources(rng, *place, len(rows))
        offsets[rows] = 5 * np.log10(distances * 100)
    return offsets + rng.normal(0, spread_mag, N), extinctions


def continuous_core_collapse(rng, scene):
    pixels = scene.draw_pixels(rng)
    offsets, extinctions = in_the_galaxy(rng, scene, pixels, 1.2)
    which = rng.choice(4, size=N, p=[row[0] for row in CLASSES])
    delays = np.array([row[1] for row in CLASSES])[which]
    delays = delays * np.array([row[2] for row in CLASSES])[which] ** rng.normal(size=N)

    def magnitudes_on(frame):
        found = np.empty(N)
        for number, (_, _, _, first, peak, rise, slope) in enumerate(CLASSES):
            rows = which == number
            light = {"plateau_d": 0.01, "rise_d": rise, "m_first": first, "m_peak": peak}
            found[rows] = brightness(light | {"slope": slope}, frame["t_d"], delays[rows])
        return found + offsets + RATIOS[frame["band"]] * extinctions

    return scene.play(rng, pixels, magnitudes_on)


def continuous_nova(rng, scene):
    pixels = scene.draw_pixels(rng)
    offsets, extinctions = in_the_galaxy(rng, scene, pixels, 1.0)
    light = {"plateau_d": 0.01, "rise_d": 3.0, "m_first": -2.5, "m_peak": -7.5, "slope": 0.1}

    def magnitudes_on(frame):
        shining = brightness(light, frame["t_d"], np.zeros(N))
        return shining + offsets + RATIOS[frame["band"]] * extinctions

    return scene.play(rng, pixels, magnitudes_on)


def continuous_normal(rng, scene, *, magnitude_on, sigma_mag):
    pixels = scene.draw_pixels(rng)
    offsets = rng.normal(0, sigma_mag, N)
    return scene.play(rng, pixels, lambda frame: magnitude_on(frame) + offsets)


def afterglow_on(frame):
    hours = max(frame["t_d"] * 24, 30 / 3600)
    return 17 + 2.5 * math.log10(hours)


def red_on(frame):
    share = {"B": 0.0, "V": 0.0675 / 0.2847, "clear": 0.1175 / 0.2847}.get(frame["band"], 1.0)
    slope = 1.2 + (0.4 - 1.2) * share
    modulus = 5 * math.log10(40e6 / 10)
    return -15.5 + modulus + slope * max(frame["t_d"] - 1, 0)


CONTINUOUS = {
    "core collapse": continuous_core_collapse,
    "nova": continuous_nova,
    "steady": lambda rng, scene: continuous_normal(
        rng, scene, magnitude_on=lambda frame: 12.0, sigma_mag=2.0
    ),
    "afterglow": lambda rng, scene: continuous_normal(
        rng, scene, magnitude_on=afterglow_on, sigma_mag=2.0
    ),
    "red transient": lambda rng, scene: continuous_normal(
        rng,
        scene,
        magnitude_on=red_on,
        sigma_mag=math.hypot(0.7, 5 * math.log10(1.3)),
    ),
}
QUICK = "core collapse"
NAMES = [pytest.param(name, marks=() if name == QUICK else pytest.mark.slow) for name in PRESETS]


def test_every_preset_is_played():
    assert set(CONTINUOUS) == set(PRESETS)


@pytest.mark.parametrize("name", NAMES)
def test_searched_agrees_with_draws_from_the_nodes(name):
    scene = scene_for(name)
    model, offset_weights = placed(scene, PRESETS[name]())
    expected = scene.searched(model, offset_weights)
    assert 0.15 < expected < 0.85
    found = from_nodes(np.random.default_rng(1), scene, model, offset_weights)
    sigma = math.sqrt(expected * (1 - expected) / N)
    assert abs(found - expected) < 4 * sigma


@pytest.mark.parametrize("name", NAMES)
def test_searched_agrees_with_draws_from_the_continuous_model(name):
    scene = scene_for(name)
    model, offset_weights = placed(scene, PRESETS[name]())
    expected = scene.searched(model, offset_weights)
    found = CONTINUOUS[name](np.random.default_rng(2), scene)
    assert found == pytest.approx(expected, abs=0.01)
