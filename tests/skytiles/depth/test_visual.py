import numpy as np
import pytest

from skytiles.depth.depth_error import DepthError
from skytiles.depth.visual import eye_threshold_mag, naked_eye_limit_mag, visual_limit_mag
from skytiles.ledger.ledger_frame import detection_efficiency


def test_naked_eye_limit_of_the_short_formula(authority):
    # Common practice after Schaefer 1990 (from memory).
    row = authority["nelm_mu"]
    assert naked_eye_limit_mag(row["inputs"]["sky_mags"]) == pytest.approx(
        row["expected"], abs=row["tolerance"]
    )


def test_eye_threshold_of_schaefer(authority):
    # Schaefer 1990, PASP 102, 212, constants of Knoll and Hecht (from memory).
    row = authority["schaefer_eye"]
    assert eye_threshold_mag(row["inputs"]["sky_mags"]) == pytest.approx(
        row["expected"], abs=row["tolerance"]
    )


def test_telescopes_follow_the_rule_of_thumb(authority):
    # m = 2 + 5 log D (common practice); 1.5 magnitudes against observers.
    row = authority["scope_rule"]
    found = [
        float(visual_limit_mag("eyepiece", aperture_mm, 21.0, 1.0))
        for aperture_mm in row["inputs"]["apertures_mm"]
    ]
    assert found == pytest.approx(row["expected"], abs=row["tolerance"])


def test_the_naked_eye_at_the_zenith_sees_the_threshold():
    assert visual_limit_mag("eye", 7.0, 21.0, 1.0) == pytest.approx(eye_threshold_mag(21.0))


def test_the_aperture_of_an_eye_is_its_pupil():
    assert visual_limit_mag("eye", 500.0, 21.0, 1.0) == visual_limit_mag("eye", 7.0, 21.0, 1.0)


def test_a_wider_lens_and_a_darker_sky_show_more():
    apertures = [30.0, 50.0, 70.0, 100.0]
    found = [visual_limit_mag("binoculars", aperture, 20.0, 1.0) for aperture in apertures]
    assert found == sorted(found)
    skies = np.arange(16.0, 22.5, 0.1)
    assert (np.diff(visual_limit_mag("binoculars", 50.0, skies, 1.0)) > 0.0).all()


def test_low_in_the_sky_less_is_seen_and_below_the_horizon_nothing():
    found = visual_limit_mag("eye", 7.0, 21.0, np.array([1.0, 2.0, np.inf]))
    assert found[0] - found[1] == pytest.approx(0.2, abs=0.01)
    assert found[2] == -np.inf


@pytest.mark.parametrize(("kind", "aperture_mm"), [("camera", 100.0), ("eyepiece", 0.0)])
def test_gear_that_is_not_visual_is_refused(kind, aperture_mm):
    with pytest.raises(DepthError, match="binoculars"):
        visual_limit_mag(kind, aperture_mm, 21.0, 1.0)


def test_detection_fades_as_published(authority):
    # Veres & Chesley 2017, fading function (published). The ledger cuts it 3 s beyond the limit.
    row = authority["fading"]
    steps, s = np.array(row["inputs"]["steps_mag"]), row["inputs"]["s_mag"]
    # Just inside the cut: a step of exactly 3 s is a question of rounding.
    found = detection_efficiency(18.0 + steps - 1e-9, 18.0, s=s)
    assert found == pytest.approx(row["expected"], abs=row["tolerance"])
