import numpy as np
import pytest

from skytiles.night.airmass import (
    airmass,
    refraction_deg,
    refraction_of_apparent_deg,
    sky_airmass,
)


def altitudes_of(row):
    return 90.0 - np.array(row["inputs"]["zenith_distances_deg"], dtype=float)


def test_airmass_of_kasten_and_young(authority):
    # Kasten & Young 1989, Applied Optics 28, 4735 (published).
    row = authority["airmass_ky89"]
    assert airmass(altitudes_of(row)) == pytest.approx(row["expected"], abs=row["tolerance"])


@pytest.mark.parametrize("row_id", ["airmass_young94", "airmass_hardie62"])
def test_airmass_lies_within_the_spread_of_other_models(authority, row_id):
    # Young 1994, Applied Optics 33, 1108; Hardie 1962 (published).
    row = authority[row_id]
    ratios = airmass(altitudes_of(row)) / np.array(row["expected"])
    assert (np.abs(ratios - 1.0) <= np.array(row["tolerance"])).all()


def test_sky_airmass_of_krisciunas_and_schaefer(authority):
    # Krisciunas & Schaefer 1991, PASP 103, 1033, eq. 3 (published).
    row = authority["airmass_ks91_sky"]
    assert sky_airmass(altitudes_of(row)) == pytest.approx(row["expected"], abs=row["tolerance"])


def test_airmass_at_zenith_is_one_to_three_parts_in_ten_thousand():
    assert airmass(np.array([90.0]))[0] == pytest.approx(1.0, abs=3e-4)


def test_airmass_grows_towards_the_horizon_and_stays_below_the_secant():
    altitudes = np.arange(90.0, 0.0, -0.1)
    masses = airmass(altitudes)
    assert (np.diff(masses) > 0.0).all()
    assert (masses <= 1.0 / np.sin(np.radians(altitudes))).all()
    assert np.isfinite(airmass(np.array([0.0])))[0]


def test_airmass_below_the_horizon_is_infinite():
    assert np.isinf(airmass(np.array([-0.001, -90.0]))).all()


def test_refraction_of_bennett(authority):
    # Bennett 1982, J. Navigation 35, 255; Meeus 1998, Ex. 16.a (published).
    row = authority["refr_16a_bennett"]
    found = refraction_of_apparent_deg(row["inputs"]["apparent_altitude_deg"]) * 60.0
    assert found == pytest.approx(row["expected"], abs=row["tolerance"])


def test_refraction_of_saemundsson(authority):
    # Saemundsson 1986, S&T 72, 70; Meeus 1998, Ex. 16.a (published).
    row = authority["refr_16a_saem"]
    found = refraction_deg(row["inputs"]["true_altitude_arcmin"] / 60.0) * 60.0
    assert found == pytest.approx(row["expected"], abs=row["tolerance"])


def test_the_two_refractions_undo_each_other():
    true_deg = np.arange(0.5, 89.0, 0.5)
    there = refraction_deg(true_deg)
    back = refraction_of_apparent_deg(true_deg + there)
    assert there == pytest.approx(back, abs=0.1 / 60.0)


def test_nothing_is_bent_far_below_the_horizon():
    assert refraction_deg(np.array([-5.0, -90.0])).tolist() == [0.0, 0.0]
