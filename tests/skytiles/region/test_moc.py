"""Coverage maps: the examples of the standard, and mocpy as the oracle on random ones."""

import json

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from mocpy import MOC

from skytiles.errors import SkytilesError
from skytiles.region.moc import moc_from_cells, moc_from_ranges
from skytiles.region.read_moc import moc_from_ascii, moc_from_json, read_moc
from skytiles.sphere.healpix_door import MAX_ORDER, n_pixels


def uniq_of(moc):
    orders, pixels = moc.cells()
    return (4 << 2 * orders) + pixels


def fits_bytes(moc, tmp_path):
    path = tmp_path / "oracle.fits"
    moc.save(path, format="fits", overwrite=True)
    return path.read_bytes()


def random_moc(rng, order):
    n_cells = int(rng.integers(1, 200))
    orders = rng.integers(0, order + 1, n_cells)
    pixels = (rng.random(n_cells) * (12 << 2 * orders)).astype(np.int64)
    return orders, pixels


def test_the_example_of_the_standard_in_text(authority):
    row = authority["moc_ascii"]
    moc = moc_from_ascii(row["inputs"]["text"])
    assert moc.sky_share == row["expected"]["share"]
    assert moc.order == row["expected"]["order"]
    assert len(moc.cells()[0]) == row["expected"]["n_cells"]
    assert abs(moc.area_deg2 - row["expected"]["area_deg2"]) < row["tolerance"]["area_deg2"]


def test_the_example_in_json_is_the_same_coverage(authority):
    row = authority["moc_json"]
    moc = moc_from_json(row["inputs"]["json"])
    assert moc.sky_share == row["expected"]
    text = authority["moc_ascii"]["inputs"]["text"]
    assert moc.to_ascii() == moc_from_ascii(text).to_ascii()
    assert moc.order == 8


def test_its_uniq_numbers_and_ranges(authority):
    moc = moc_from_ascii(authority["moc_uniq"]["inputs"]["text"])
    assert sorted(uniq_of(moc)) == authority["moc_uniq"]["expected"]
    assert moc.ranges.tolist() == authority["moc_ranges"]["expected"]


def test_siblings_merge_into_the_canonical_form(authority):
    row = authority["moc_canon"]
    moc = moc_from_ascii(row["inputs"]["text"])
    assert moc.to_ascii() == row["expected"]["text"]
    assert abs(moc.sky_share - row["expected"]["share"]) < row["tolerance"]["share"]


def test_the_whole_sky_and_nothing(authority):
    row = authority["moc_edge"]
    mocs = [moc_from_ascii(text) for text in row["inputs"]["texts"]]
    assert [moc.sky_share for moc in mocs] == row["expected"]["shares"]
    assert [moc.order for moc in mocs] == row["expected"]["orders"]
    assert [moc.complement().sky_share for moc in mocs] == row["expected"]["shares"][::-1]


@pytest.mark.parametrize("text", ["s1/1 2 4", "1/1,2,4", "1/ 1 2 4", "1/\n1-2\n4", "1/4 2 1 1"])
def test_text_may_be_written_in_several_ways(text):
    assert moc_from_ascii(text).to_ascii() == "1/1-2 4"


@pytest.mark.parametrize("seed", range(20))
def test_random_maps_agree_with_mocpy(seed):
    rng = np.random.default_rng(seed)
    orders, pixels = random_moc(rng, order := int(rng.integers(0, 30)))
    ours = moc_from_cells(order, orders, pixels)
    theirs = MOC.from_healpix_cells(pixels.astype(np.uint64), orders.astype(np.uint8), order)
    assert np.array_equal(ours.ranges, theirs.to_depth29_ranges)
    assert ours.sky_share == pytest.approx(theirs.sky_fraction, rel=1e-12)
    assert sorted(uniq_of(ours)) == sorted(theirs.uniq_hpx)
    # And what each of them writes, the other reads.
    assert MOC.from_string(ours.to_ascii(), format="ascii") == theirs
    again = moc_from_ascii(theirs.serialize(format="str"))
    assert np.array_equal(again.ranges, ours.ranges)
    assert np.array_equal(moc_from_json(theirs.serialize(format="json")).ranges, ours.ranges)


@pytest.mark.parametrize("seed", range(4))
def test_fits_files_of_mocpy_are_read(seed, tmp_path):
    rng = np.random.default_rng(100 + seed)
    orders, pixels = random_moc(rng, 12)
    theirs = MOC.from_healpix_cells(pixels.astype(np.uint64), orders.astype(np.uint8), 12)
    ours = read_moc(fits_bytes(theirs, tmp_path))
    assert np.array_equal(ours.ranges, theirs.to_depth29_ranges)
    assert ours.order == 12


KEYWORDS = {
    "1.1, 32 bits": ("J", {"PIXTYPE": "HEALPIX", "MOCORDER": 8}),
    "1.1, 64 bits": ("K", {"PIXTYPE": "HEALPIX", "MOCORDER": 8}),
    "2.0": ("K", {"MOCVERS": "2.0", "MOCDIM": "SPACE", "MOCORD_S": 8}),
}


@pytest.mark.parametrize("version", KEYWORDS)
def test_uniq_in_fits(version, table_bytes, authority):
    form, keywords = KEYWORDS[version]
    keywords = keywords | {"ORDERING": "NUNIQ", "COORDSYS": "C"}
    column = {"name": "UNIQ", "format": form, "array": authority["moc_uniq"]["expected"]}
    moc = read_moc(underscored(table_bytes([column], **keywords)))
    assert moc.ranges.tolist() == authority["moc_ranges"]["expected"]
    assert moc.order == 8


def underscored(data):
    """The fixture writes hyphens for underscores, as most keywords have them."""
    return data.replace(b"MOCORD-S", b"MOCORD_S")


def range_file(table_bytes, bounds, **keywords):
    stated = {"MOCVERS": "2.0", "MOCDIM": "SPACE", "ORDERING": "RANGE", "COORDSYS": "C"}
    column = {"name": "RANGE", "format": "K", "array": bounds}
    return underscored(table_bytes([column], **(stated | keywords)))


def test_ranges_in_fits(table_bytes, authority):
    ranges = authority["moc_ranges"]["expected"]
    moc = read_moc(range_file(table_bytes, np.ravel(ranges), MOCORD_S=8))
    assert moc.ranges.tolist() == ranges
    assert moc.to_ascii() == "1/1-2 4 2/12-14 21 23 25 8/"


@pytest.mark.parametrize(
    ("bounds", "keywords"),
    [
        ([0, 4, 7], {}),
        ([4, 0], {}),
        ([-4, 8], {}),
        ([0, 12 * 4**29 + 1], {}),
        ([0, 4], {"MOCDIM": "TIME"}),
        ([0, 4], {"COORDSYS": "G"}),
        ([0, 4], {"MOCORD_S": 30}),
        ([0, 4], {"MOCORD_S": "eight"}),
        ([0, 4], {"ORDERING": "RING"}),
    ],
)
def test_what_is_no_coverage_of_the_sky_is_refused(table_bytes, bounds, keywords):
    data = range_file(table_bytes, bounds, **keywords)
    if keywords.get("ORDERING") == "RING":
        data = data.replace(b"RANGE", b"WRONG")
    with pytest.raises(SkytilesError) as refusal:
        read_moc(data)
    assert refusal.value.advice


BOUND = st.integers(min_value=0, max_value=n_pixels(MAX_ORDER) - 1)


@settings(deadline=None, max_examples=60)
@given(st.lists(st.tuples(BOUND, BOUND).filter(lambda pair: pair[0] != pair[1]), max_size=20))
def test_a_map_goes_to_cells_and_text_and_back(pairs):
    moc = moc_from_ranges(MAX_ORDER, [sorted(pair) for pair in pairs])
    orders, pixels = moc.cells()
    assert np.array_equal(moc_from_cells(MAX_ORDER, orders, pixels).ranges, moc.ranges)
    assert np.array_equal(moc_from_ascii(moc.to_ascii()).ranges, moc.ranges)
    rest = moc.complement()
    assert rest.n_covered + moc.n_covered == n_pixels(MAX_ORDER)
    assert np.array_equal(rest.complement().ranges, moc.ranges)
    # Nothing touches: the ranges are as few as can be.
    assert (moc.ranges[1:, 0] > moc.ranges[:-1, 1]).all()


def test_a_map_in_json_may_be_a_file_of_its_own(authority):
    data = json.dumps(authority["moc_json"]["inputs"]["json"]).encode()
    assert read_moc(data).sky_share == authority["moc_json"]["expected"]
