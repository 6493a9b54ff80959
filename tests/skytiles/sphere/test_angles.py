import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from skytiles.sphere.angles import (
    position_angles_deg,
    ras_decs_deg,
    separations_deg,
    unit_vectors,
    wrap_ra_deg,
)

RAS = st.floats(0.0, 359.999999)
DECS = st.floats(-90.0, 90.0)


def test_separations_of_the_table(authority):
    # fixtures/authority, seps: definition, Vincenty form; recomputed.
    row = authority["seps"]
    for (first, second), expected in zip(row["inputs"]["pairs_deg"], row["expected"], strict=True):
        assert separations_deg(*first, *second) == pytest.approx(expected, abs=row["tolerance"])


def test_arcturus_to_spica_of_meeus(authority):
    # Meeus 1998, Ex. 17.a p. 110; published.
    row = authority["sep_17a"]
    found = separations_deg(*row["inputs"]["first_deg"], *row["inputs"]["second_deg"])
    assert found == pytest.approx(row["expected"], abs=row["tolerance"])


@given(RAS, DECS)
def test_vectors_and_back(ra, dec):
    ra_back, dec_back = ras_decs_deg(unit_vectors(ra, dec))
    assert separations_deg(ra, dec, ra_back, dec_back) < 1e-12


@given(RAS, DECS, RAS, DECS)
def test_separation_is_symmetrical_and_that_of_the_vectors(ra1, dec1, ra2, dec2):
    found = float(separations_deg(ra1, dec1, ra2, dec2))
    assert found == pytest.approx(float(separations_deg(ra2, dec2, ra1, dec1)), abs=1e-12)
    chord = np.linalg.norm(unit_vectors(ra1, dec1) - unit_vectors(ra2, dec2))
    assert 2.0 * np.sin(np.radians(found) / 2.0) == pytest.approx(chord, abs=1e-12)


def test_scalar_equals_array():
    ras, decs = np.array([0.0, 123.4, 359.9]), np.array([-90.0, 12.3, 90.0])
    each = [unit_vectors(ra, dec) for ra, dec in zip(ras, decs, strict=True)]
    assert np.array_equal(unit_vectors(ras, decs), np.array(each))


@pytest.mark.parametrize("ra", [-1e-18, 360.0, 720.0, -360.0])
def test_right_ascension_is_wrapped_to_below_360(ra):
    assert wrap_ra_deg(ra) == 0.0


def test_north_is_0_and_east_is_90():
    assert position_angles_deg(10.0, 20.0, 10.0, 21.0) == pytest.approx(0.0)
    assert position_angles_deg(359.5, 0.0, 0.5, 0.0) == pytest.approx(90.0)
    assert position_angles_deg(0.0, 0.0, 359.0, 0.0) == pytest.approx(270.0)
