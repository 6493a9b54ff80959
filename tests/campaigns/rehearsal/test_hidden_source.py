"""The simulation's own account of what a frame catches, apart from the ledger."""

import healpy
import numpy as np
import pytest
from scipy.integrate import quad
from scipy.stats import norm

from campaigns.rehearsal.hidden_source import (
    Looks,
    SeenFrame,
    Sources,
    detection_chances,
    direction,
    draw_sources,
    is_inside,
    share_found,
)
from campaigns.rehearsal.hunt import Hunt

SQUARE = {"shape": "polygon", "corners_deg": [[359, -1], [1, -1], [1, 1], [359, 1]]}
CIRCLE = {"shape": "circle", "ra_deg": 0.0, "dec_deg": 90.0, "diameter_deg": 4.0}
MIDDLE = direction(0.0, 0.0)


def make_frame(**changes):
    frame = {
        "number": 1,
        "instrument": 7,
        "mid_s": 0.0,
        "footprint": SQUARE,
        "centre": MIDDLE,
        "field_deg": 2.0,
        "m50_mag": 12.0,
        "width_mag": 0.2,
        "completeness": 0.9,
        "saturation_mag": None,
    }
    return SeenFrame(**(frame | changes))


def make_sources(n, *, magnitude=5.0, is_hopeless=False):
    vectors = np.tile(MIDDLE, (n, 1))
    return Sources(vectors, np.full(n, magnitude), np.full(n, is_hopeless))


def test_half_of_the_sources_are_shown_at_the_limit():
    assert detection_chances(make_frame(), np.array([12.0]))[0] == pytest.approx(0.5)


def test_ninety_per_cent_are_shown_at_the_limit_less_width_times_log_nine():
    magnitude = np.array([12.0 - 0.2 * np.log(9.0)])
    assert detection_chances(make_frame(), magnitude)[0] == pytest.approx(0.9)


def test_nothing_is_shown_beyond_three_widths():
    assert detection_chances(make_frame(), np.array([12.601, 40.0, np.inf])).tolist() == [0, 0, 0]


def test_saturated_sources_are_masked():
    frame = make_frame(saturation_mag=8.0)
    assert detection_chances(frame, np.array([8.0, 5.0])) == pytest.approx([0.5, 0.0], abs=1e-6)


def test_a_square_across_ra_zero_holds_its_middle_and_not_the_far_side():
    asked = np.array([MIDDLE, direction(180.0, 0.0), direction(1.2, 0.0), direction(0.9, 0.9)])
    assert is_inside(SQUARE, asked).tolist() == [True, False, False, True]


def test_a_square_is_the_same_whichever_way_round_its_corners_run():
    reversed_square = {**SQUARE, "corners_deg": SQUARE["corners_deg"][::-1]}
    asked = np.array([MIDDLE, direction(180.0, 0.0), direction(0.0, 1.5)])
    assert is_inside(reversed_square, asked).tolist() == [True, False, False]


def test_a_circle_at_the_pole_holds_two_degrees_around_it():
    asked = np.array([direction(123.0, 88.1), direction(300.0, 87.9)])
    assert is_inside(CIRCLE, asked).tolist() == [True, False]


def test_inside_agrees_with_healpy_on_a_tilted_square():
    corners_deg = [[80.0, 60.0], [86.0, 62.0], [83.0, 66.0], [75.0, 64.0]]
    corners = np.array([direction(*corner) for corner in corners_deg])
    expected = healpy.query_polygon(256, corners, nest=True)
    centres = np.array(healpy.pix2vec(256, np.arange(12 * 256**2), nest=True)).T
    footprint = {"shape": "polygon", "corners_deg": corners_deg}
    assert np.flatnonzero(is_inside(footprint, centres)).tolist() == sorted(expected)


def test_sources_fall_into_the_region_by_its_probabilities():
    pixels, probabilities = np.array([5, 100, 7000]), np.array([0.5, 0.2, 0.1])
    sources = draw_sources(
        np.random.default_rng(3),
        20_000,
        order=5,
        pixels=pixels,
        probabilities=probabilities,
        magnitude=12.0,
        sigma_mag=2.0,
    )
    is_in_region = np.any(sources.vectors != 0.0, axis=1)
    drawn = healpy.vec2pix(32, *sources.vectors[is_in_region].T, nest=True)
    shares = [np.sum(drawn == pixel) / 20_000 for pixel in pixels]
    assert shares == pytest.approx(probabilities.tolist(), abs=0.012)
    assert np.mean(is_in_region) == pytest.approx(0.8, abs=0.012)
    assert np.mean(sources.magnitudes) == pytest.approx(12.0, abs=0.06)


def test_the_share_found_in_one_frame_is_the_integral_over_brightness():
    rng = np.random.default_rng(11)
    n = 60_000
    sources = Sources(
        np.tile(MIDDLE, (n, 1)), 12.0 + 2.0 * rng.standard_normal(n), rng.random(n) < 0.02
    )
    efficiency = quad(
        lambda m: norm.pdf(m, 12.0, 2.0) / (1.0 + np.exp((m - 12.0) / 0.2)), 0.0, 12.6
    )[0]
    expected = 0.98 * 0.9 * efficiency
    assert share_found(rng, sources, [make_frame()]) == pytest.approx(expected, abs=0.008)


def test_frames_of_one_look_share_one_pair_of_eyes_and_later_ones_do_not():
    rng = np.random.default_rng(5)
    sources = make_sources(40_000)
    same = [make_frame(number=n, mid_s=600.0 * n, completeness=0.6) for n in range(4)]
    later = [make_frame(number=n, mid_s=4000.0 * n, completeness=0.6) for n in range(2)]
    assert share_found(rng, sources, same) == pytest.approx(0.6, abs=0.01)
    assert share_found(rng, sources, later) == pytest.approx(0.84, abs=0.01)


def test_another_instrument_or_place_is_another_look():
    looks = Looks()
    joined = [
        looks.join(make_frame()),
        looks.join(make_frame(instrument=8)),
        looks.join(make_frame(centre=direction(1.1, 0.0))),
        looks.join(make_frame(centre=direction(0.9, 0.0), mid_s=3600.0)),
    ]
    assert joined == [0, 1, 2, 0]


def test_the_hunt_catches_a_bright_source_once_and_keeps_the_first_frame():
    hunt = Hunt(make_sources(1), np.random.default_rng(1), event_s=-600.0)
    frames = [make_frame(number=n, instrument=n, completeness=1.0) for n in (3, 4)]
    assert [hunt.examine(frame, now_s=60.0) for frame in frames] == [True, False]
    assert (hunt.caught.frame, hunt.caught.seconds) == (3, 660.0)


@pytest.mark.parametrize(
    "source, frame",
    [
        (make_sources(1, magnitude=20.0), make_frame(completeness=1.0)),
        (make_sources(1, is_hopeless=True), make_frame(completeness=1.0)),
        (make_sources(1), make_frame(completeness=1.0, footprint=CIRCLE)),
        (make_sources(1), make_frame(completeness=0.0)),
    ],
    ids=["too faint", "crowded", "elsewhere", "nobody looked"],
)
def test_the_hunt_misses_what_cannot_be_seen(source, frame):
    hunt = Hunt(source, np.random.default_rng(1), event_s=0.0)
    assert not hunt.examine(frame, now_s=60.0)
