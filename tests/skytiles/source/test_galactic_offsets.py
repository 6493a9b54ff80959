"""Offsets of each pixel against sources drawn one by one."""

import numpy as np
import pytest

from skytiles.region.galactic_prior import GalacticPrior
from skytiles.source.extinction import extinction_ratio
from skytiles.source.galactic_offsets import place_source
from skytiles.source.presets import PRESETS
from tests.skytiles.ledger.plain_galaxy import RATIOS, draw_sources

RAS_DEG = np.array([266.4, 268.0, 275.0, 283.0, 290.0, 300.0])
DECS_DEG = np.array([-28.0, -22.0, -15.0, 2.0, 8.0, 38.0])
SPREAD_MAG = 1.2


@pytest.fixture(scope="module")
def placed():
    return place(RAS_DEG, DECS_DEG)


def place(ras_deg, decs_deg, *, prior=None, spread_mag=SPREAD_MAG):
    return place_source(
        PRESETS["core collapse"](),
        prior or GalacticPrior(),
        ras_deg=ras_deg,
        decs_deg=decs_deg,
        probabilities=np.ones(len(ras_deg)),
        spread_mag=spread_mag,
    )


def test_weights_of_every_pixel_sum_to_one(placed):
    assert placed.offset_weights.min() >= 0.0
    np.testing.assert_allclose(placed.offset_weights.sum(axis=1), 1.0, rtol=0, atol=1e-5)
    assert placed.model.placement == "apparent"


def test_steps_are_at_most_half_a_magnitude_without_filter(placed):
    steps = np.unique(np.round(placed.model.offsets_in("clear"), 6))
    assert np.diff(steps).max() <= 0.5 + 1e-6


@pytest.mark.parametrize("band", ["clear", "V", "R", "I", "B", "K"])
@pytest.mark.parametrize("pixel", range(6))
def test_offsets_in_a_band_are_those_of_drawn_sources(placed, pixel, band):
    rng = np.random.default_rng(6)
    distances, extinctions = draw_sources(rng, RAS_DEG[pixel], DECS_DEG[pixel], 200_000)
    drawn = 5 * np.log10(100 * distances) + RATIOS[band] * extinctions
    drawn = drawn + rng.normal(0, SPREAD_MAG, len(drawn))
    weights = placed.offset_weights[pixel].astype(float)
    offsets = placed.model.offsets_in(band)
    mean = weights @ offsets
    assert mean == pytest.approx(drawn.mean(), abs=0.15 if band == "K" else 0.08)
    # Two extinctions at each brightness keep the scatter of the region, not of each pixel.
    spread = np.sqrt(weights @ (offsets - mean) ** 2)
    assert spread == pytest.approx(drawn.std(), rel=0.03 if band in {"clear", "V"} else 0.2)


def test_found_shares_are_those_of_drawn_sources(placed):
    """P(brighter than a limit) at many limits, in all pixels together: what the ledger uses."""
    rng = np.random.default_rng(7)
    for band in ("clear", "V", "R", "I"):
        offsets = placed.model.offsets_in(band)
        for limit in (14.0, 18.0, 22.0, 28.0):
            drawn = []
            for ra_deg, dec_deg in zip(RAS_DEG, DECS_DEG, strict=True):
                distances, dust = draw_sources(rng, ra_deg, dec_deg, 20_000)
                magnitudes = 5 * np.log10(100 * distances) + RATIOS[band] * dust
                magnitudes = magnitudes + rng.normal(0, SPREAD_MAG, len(magnitudes))
                drawn.append((1 / (1 + np.exp((magnitudes - limit) / 0.4))).mean())
            found = placed.offset_weights @ (1 / (1 + np.exp((offsets - limit) / 0.4)))
            assert found.mean() == pytest.approx(np.mean(drawn), abs=0.01)


def test_without_dust_all_bands_are_one():
    placed = place(RAS_DEG, DECS_DEG, prior=GalacticPrior(centre_extinction_mag=0.0))
    np.testing.assert_allclose(
        placed.model.offsets_in("B"), placed.model.offsets_in("K"), rtol=0, atol=1e-6
    )


def test_off_the_plane_there_is_one_node_at_each_step():
    placed = place(np.array([190.0, 200.0]), np.array([30.0, 35.0]))
    assert placed.offset_weights.shape[1] < 50


def test_no_spread_keeps_the_distances_alone():
    wide, narrow = (place(RAS_DEG, DECS_DEG, spread_mag=spread) for spread in (2.0, 0.0))
    means = [p.offset_weights[0] @ p.model.offsets_in("V") for p in (wide, narrow)]
    assert means[0] == pytest.approx(means[1], abs=0.02)
    assert extinction_ratio("V") == 1.0
