"""Constraints that agree, have nothing to do with each other, or contradict each other."""

import numpy as np
import pytest

from skytiles.region.agreement import agreement_of
from skytiles.region.constraints import ConeConstraint
from skytiles.region.make_region import make_region
from skytiles.region.region import describe_region
from skytiles.sphere.solid_angle import SKY_DEG2


def cone(ra_deg, radius_deg=2.0):
    return ConeConstraint(ra_deg=ra_deg, dec_deg=10.0, radius_deg=radius_deg, containment=0.9)


def test_the_overlap_of_two_gaussians_is_that_of_the_integral():
    # Two round Gaussians of variances s1, s2 at distance d: the mean of the product of their
    # densities is SKY / (2 pi (s1 + s2)) exp(-d^2 / 2 (s1 + s2)).
    one, other = cone(100.0), cone(103.0, radius_deg=3.0)
    total = one.sigmas_deg[0] ** 2 + other.sigmas_deg[0] ** 2
    d_deg = 3.0 * np.cos(np.deg2rad(10.0))
    expected = SKY_DEG2 / (2.0 * np.pi * total) * np.exp(-0.5 * d_deg**2 / total)
    region = make_region([one, other])
    assert region.overlap == pytest.approx(expected, rel=0.02)
    assert not any("contradict" in note for note in region.notes)


def test_flat_densities_have_an_overlap_of_one():
    agreement = agreement_of([np.zeros(12), np.zeros(12)], np.full(12, 1.0 / 12.0))
    assert agreement.overlap == pytest.approx(1.0)
    assert agreement.note(["a", "b"]) is None


def test_two_that_agree_do_not_hide_the_third_that_contradicts_them():
    region = make_region([cone(100.0), cone(101.0), cone(200.0)])
    assert region.overlap < 1e-2
    (note,) = [note for note in region.notes if "contradict" in note]
    assert f"{region.overlap:.1e}" in note
    assert "constraint 3 of 3 (cone)" in note
    # They still give a region, and no piece of the sky is a hard zero.
    assert region.probabilities.sum() + region.outside == pytest.approx(1.0)


def test_one_constraint_has_nothing_to_agree_with():
    region = make_region([cone(100.0)])
    assert region.overlap is None
    assert describe_region(region)["overlap"] is None


def test_the_order_of_constraints_does_not_matter():
    pieces = [cone(100.0), cone(102.0), cone(104.0, 5.0)]
    assert make_region(pieces).overlap == pytest.approx(make_region(pieces[::-1]).overlap)
