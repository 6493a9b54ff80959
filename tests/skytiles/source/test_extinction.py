"""Dust by band against the published table and an independent package."""

import extinction
import numpy as np
import pytest

from skytiles.errors import SourceError
from skytiles.source.extinction import (
    BANDS,
    EFFECTIVE_UM,
    effective_um,
    extinction_curve,
    extinction_ratio,
)


def test_ratios_are_those_of_the_published_table(authority):
    row = authority["ccm_ratios"]
    found = [extinction_ratio(band) for band in row["inputs"]["bands"]]
    assert found == pytest.approx(row["expected"], abs=row["tolerance"])


@pytest.mark.parametrize("r_v", [2.1, 3.1, 5.0])
def test_the_law_is_that_of_the_package_extinction(r_v):
    wavenumbers = np.linspace(0.3001, 3.2999, 400)
    peer = extinction.ccm89(wavenumbers, 1.0, r_v, unit="invum")
    np.testing.assert_allclose(extinction_curve(wavenumbers, r_v=r_v), peer, rtol=0, atol=1e-12)


@pytest.mark.parametrize("band", sorted(EFFECTIVE_UM))
def test_other_bands_follow_the_law_at_their_wavelength(band):
    peer = extinction.ccm89(np.array([1e4 * EFFECTIVE_UM[band]]), 1.0, 3.1)[0]
    assert extinction_ratio(band) == pytest.approx(peer, abs=1e-9)


def test_redder_bands_are_dimmed_less():
    by_wavelength = sorted(BANDS, key=effective_um)
    ratios = [extinction_ratio(band) for band in by_wavelength]
    # Table and curve differ by up to 0.015, so neighbours may be equal within that.
    assert np.all(np.diff(ratios) < 0.015)


def test_a_filter_that_nobody_knows_counts_as_none():
    assert extinction_ratio("Lum") == extinction_ratio("clear")
    assert effective_um("Lum") == effective_um("clear")


@pytest.mark.parametrize("wavenumber", [0.1, 3.5, float("nan")])
def test_a_wavelength_outside_of_the_law_is_refused(wavenumber):
    with pytest.raises(SourceError):
        extinction_curve(wavenumber)
