import gzip
import io

import healpy
import numpy as np
import pytest
from astropy.io import fits
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from skytiles.errors import MapFileError, SkytilesError
from skytiles.region import read_map
from skytiles.region.fits_header import read_header
from skytiles.region.read_map import read_sky_map

ONE_CELL_EACH = [4 + pixel for pixel in range(12)]


def gaussian(order, *, ra=40.0, dec=-20.0, sigma=12.0):
    """A round spot on all pixels of an order, RING, made with healpy."""
    vectors = np.transpose(healpy.pix2vec(1 << order, np.arange(12 << 2 * order)))
    centre = healpy.ang2vec(ra, dec, lonlat=True)
    distances = np.degrees(np.arccos(np.clip(vectors @ centre, -1.0, 1.0)))
    values = np.exp(-0.5 * (distances / sigma) ** 2)
    return values / values.sum()


def on_all_pixels(sky_map, order):
    """Probabilities on all pixels of an order, NESTED, by brute force."""
    values = np.zeros(12 << 2 * order)
    for cell_order, pixel, probability in zip(
        sky_map.orders, sky_map.pixels, sky_map.probabilities, strict=True
    ):
        n_parts = 4 ** (order - cell_order)
        values[pixel * n_parts : (pixel + 1) * n_parts] += probability / n_parts
    return values


@pytest.mark.parametrize("per_row", [1, 48])
@pytest.mark.parametrize("ordering", ["RING", "NESTED"])
def test_both_orderings_of_a_flat_map_are_read(flat_bytes, ordering, per_row):
    ring = gaussian(3)
    values = ring if ordering == "RING" else healpy.reorder(ring, r2n=True)
    sky_map = read_sky_map(flat_bytes(values, ordering=ordering, per_row=per_row))
    assert on_all_pixels(sky_map, 3) == pytest.approx(healpy.reorder(ring, r2n=True), abs=1e-15)
    assert sky_map.total_probability == pytest.approx(1.0)


@pytest.mark.parametrize("is_nested", [True, False])
def test_a_map_written_by_healpy_is_read(tmp_path, is_nested):
    path = tmp_path / "map.fits"
    values = gaussian(5)
    values = healpy.reorder(values, r2n=True) if is_nested else values
    healpy.write_map(path, values, nest=is_nested, column_names=["PROB"], dtype=np.float64)
    sky_map = read_sky_map(path.read_bytes())
    assert on_all_pixels(sky_map, 5) == pytest.approx(healpy.reorder(gaussian(5), r2n=True))


def test_a_partial_map_with_its_pixel_numbers_is_read(table_bytes):
    columns = [
        {"name": "PIXEL", "format": "J", "array": [5, 9]},
        {"name": "PROB", "format": "D", "array": [0.25, 0.75]},
    ]
    keywords = {"ORDERING": "NESTED", "NSIDE": 2, "INDXSCHM": "EXPLICIT"}
    sky_map = read_sky_map(table_bytes(columns, **keywords))
    assert sky_map.pixels.tolist() == [5, 9]
    assert sky_map.probabilities.tolist() == [0.25, 0.75]


def test_uniq_numbers_of_the_table(authority, multi_order_bytes):
    # IVOA MOC 2.0 sec. 4.3.1; published. One cell at a time, for some overlap.
    row = authority["uniq"]
    orders, pixels = row["inputs"]["orders"], row["inputs"]["pixels"]
    for order, pixel, uniq in zip(orders, pixels, row["expected"], strict=True):
        sky_map = read_sky_map(multi_order_bytes([uniq], [1.0]))
        assert (sky_map.orders.tolist(), sky_map.pixels.tolist()) == ([order], [pixel])


def test_the_invented_map_agrees_with_astropy_and_healpy(example_bytes, authority):
    sky_map = read_sky_map(example_bytes)
    with fits.open(io.BytesIO(example_bytes)) as file:
        table = file[1].data
    uniq = table["UNIQ"].astype(np.int64)
    orders = (np.floor(np.log2(uniq / 4)) // 2).astype(int)
    sequence = np.argsort((uniq - 4 * 4**orders) * 4 ** (12 - orders))
    areas = 4 * np.pi / (12 * 4.0**orders)
    total = (table["PROBDENSITY"] * areas).sum()
    assert total == pytest.approx(1.0, abs=authority["mom_fits"]["tolerance"])
    assert sky_map.total_probability == pytest.approx(total)
    assert np.array_equal(sky_map.orders, orders[sequence])
    expected = (table["PROBDENSITY"] * areas)[sequence] / total
    assert sky_map.probabilities == pytest.approx(expected)


def test_headers_agree_with_astropy(example_bytes):
    with fits.open(io.BytesIO(example_bytes)) as file:
        expected = dict(file[1].header)
    primary = read_header(example_bytes, 0)
    assert read_header(example_bytes, primary.data_begin).cards == expected


def test_quotes_in_a_header_are_read_as_astropy_does(multi_order_bytes):
    data = multi_order_bytes(ONE_CELL_EACH, range(12), OBJECT="O'Hara's / 'test'")
    assert read_sky_map(data).keywords["OBJECT"] == "O'Hara's / 'test'"


def test_unsigned_uniq_numbers_are_read(multi_order_bytes):
    # TZERO = 2^63, the way FITS stores unsigned 64-bit numbers; written by astropy.
    plain = multi_order_bytes(ONE_CELL_EACH, range(12))
    table = fits.BinTableHDU.from_columns(
        [
            fits.Column("UNIQ", "K", bzero=2**63, array=np.array(ONE_CELL_EACH, dtype=np.uint64)),
            fits.Column("PROBDENSITY", "D", array=np.arange(12.0)),
        ]
    )
    table.header["ORDERING"] = "NUNIQ"
    file = io.BytesIO()
    fits.HDUList([fits.PrimaryHDU(), table]).writeto(file)
    assert b"TZERO1" in file.getvalue()
    found, expected = read_sky_map(file.getvalue()), read_sky_map(plain)
    assert np.array_equal(found.pixels, expected.pixels)
    assert np.array_equal(found.probabilities, expected.probabilities)
    assert found.notes == expected.notes


def test_a_tzero_that_was_set_but_not_applied_is_noticed(multi_order_bytes):
    data = multi_order_bytes(ONE_CELL_EACH, range(12))
    card = b"TFORM1  = 'K       '"
    place = data.index(card)
    quirk = b"TZERO1  =  9223372036854775808".ljust(80)
    # Put in place of a card that nothing needs.
    unneeded = data.index(b"DATE-OBS")
    data = data[:unneeded] + quirk + data[unneeded + 80 :]
    assert place < unneeded
    sky_map = read_sky_map(data)
    assert sky_map.pixels.tolist() == list(range(12))
    assert "TZERO" in sky_map.notes[0]


def test_distance_columns_follow_their_cells(table_bytes):
    names = ["DISTMU", "DISTSIGMA", "DISTNORM"]
    columns = [{"name": "UNIQ", "format": "K", "array": ONE_CELL_EACH[::-1]}]
    columns += [{"name": "PROBDENSITY", "format": "D", "array": np.arange(12.0)}]
    columns += [{"name": n, "format": "D", "array": np.arange(12.0) * 10} for n in names]
    sky_map = read_sky_map(table_bytes(columns, ORDERING="NUNIQ"))
    for name in names:
        assert sky_map.distances[name].tolist() == (np.arange(12.0) * 10)[::-1].tolist()


def test_densities_per_square_degree_are_understood(table_bytes):
    columns = [
        {"name": "UNIQ", "format": "K", "array": ONE_CELL_EACH},
        {"name": "PROBDENSITY", "format": "D", "unit": "deg-2", "array": np.full(12, 1 / 41252.96)},
    ]
    sky_map = read_sky_map(table_bytes(columns, ORDERING="NUNIQ"))
    assert sky_map.total_probability == pytest.approx(1.0, rel=1e-6)


def test_a_sum_other_than_one_is_kept_and_said(multi_order_bytes):
    sky_map = read_sky_map(multi_order_bytes(ONE_CELL_EACH, [2.0 / (4 * np.pi)] * 12))
    assert sky_map.total_probability == pytest.approx(2.0)
    assert sky_map.probabilities.sum() == pytest.approx(1.0)
    assert "summed to 2" in sky_map.notes[0]


def test_a_gzipped_map_is_the_same_map(example_bytes):
    packed = read_sky_map(gzip.compress(example_bytes))
    assert np.array_equal(packed.probabilities, read_sky_map(example_bytes).probabilities)


def test_a_huge_flat_map_leaves_out_only_what_is_negligible(flat_bytes, monkeypatch):
    data = flat_bytes(gaussian(5, sigma=3.0), ordering="RING", per_row=1024)
    full = read_sky_map(data)
    monkeypatch.setattr(read_map, "_MANY_CELLS", 1000)
    thin = read_sky_map(data)
    assert thin.n_cells < full.n_cells / 10
    assert thin.probabilities.sum() == pytest.approx(1.0, abs=1e-6)
    assert thin.total_probability == full.total_probability


# What is refused, and that the message says what to do.

REFUSED = {
    "not FITS": lambda m, f: b"<html>not found</html>" * 200,
    "empty": lambda m, f: b"",
    "truncated table": lambda m, f: m(ONE_CELL_EACH, range(12))[:5800],
    "truncated header": lambda m, f: m(ONE_CELL_EACH, range(12))[:3000],
    "no table": lambda m, f: m(ONE_CELL_EACH, range(12))[:2880],
    "no UNIQ or PROB": lambda m, f: m(ONE_CELL_EACH, range(12)).replace(b"'UNIQ", b"'UNIC"),
    "no PROBDENSITY": lambda m, f: m(ONE_CELL_EACH, range(12)).replace(b"PROBDENS", b"PROBABLY"),
    "negative": lambda m, f: m(ONE_CELL_EACH, [-1e-9, *range(11)]),
    "NaN": lambda m, f: m(ONE_CELL_EACH, [float("nan"), *range(11)]),
    "infinite": lambda m, f: m(ONE_CELL_EACH, [float("inf"), *range(11)]),
    "sum zero": lambda m, f: m(ONE_CELL_EACH, [0.0] * 12),
    "overlap": lambda m, f: m([4, 16], [1.0, 1.0]),
    "twice": lambda m, f: m([4, 4], [1.0, 1.0]),
    "UNIQ too small": lambda m, f: m([3, 4], [1.0, 1.0]),
    "UNIQ negative": lambda m, f: m([-5, 4], [1.0, 1.0]),
    "UNIQ in floats": lambda m, f: m([4.0, 5.0], [1.0, 1.0], form="D"),
    "no rows": lambda m, f: m([], []),
    "RING with UNIQ": lambda m, f: m(ONE_CELL_EACH, range(12), ORDERING="RING"),
    "galactic": lambda m, f: m(ONE_CELL_EACH, range(12), COORDSYS="G"),
    "NUNIQ without UNIQ": lambda m, f: f(range(48), ordering="NUNIQ"),
    "no ORDERING": lambda m, f: f(range(48), ordering=""),
    "ORDERING nonsense": lambda m, f: f(range(48), ordering="SPIRAL"),
    "NSIDE 3": lambda m, f: f(range(108), ordering="RING", NSIDE=3),
    "NSIDE and length": lambda m, f: f(range(48), ordering="RING", NSIDE=4),
    "flat NaN": lambda m, f: f([float("nan")] * 48, ordering="RING"),
    "flat negative": lambda m, f: f([-1.0] + [1.0] * 47, ordering="RING"),
    "broken gzip": lambda m, f: gzip.compress(m(ONE_CELL_EACH, range(12)))[:30] + b"x" * 99,
    "cut gzip": lambda m, f: gzip.compress(m(ONE_CELL_EACH, range(12)))[:-400],
}


@pytest.mark.parametrize("case", REFUSED)
def test_bad_maps_are_refused_with_advice(case, multi_order_bytes, flat_bytes):
    with pytest.raises(MapFileError) as refusal:
        read_sky_map(REFUSED[case](multi_order_bytes, flat_bytes))
    assert refusal.value.code == "bad-map"
    for part in (refusal.value.given, refusal.value.allowed, refusal.value.advice):
        assert part
        assert part in str(refusal.value)


def test_a_file_that_unpacks_to_too_much_is_refused(monkeypatch, example_bytes):
    monkeypatch.setattr(read_map, "MAX_MAP_BYTES", 10_000)
    with pytest.raises(MapFileError, match="multi-order"):
        read_sky_map(gzip.compress(example_bytes))


@settings(max_examples=300, deadline=None, suppress_health_check=list(HealthCheck))
@given(data=st.data())
def test_any_damage_gives_a_map_or_a_clear_refusal(data, multi_order_bytes):
    whole = multi_order_bytes(ONE_CELL_EACH, range(12))
    damaged = bytearray(whole[: data.draw(st.integers(0, len(whole)))])
    for _ in range(data.draw(st.integers(0, 6))):
        if damaged:
            damaged[data.draw(st.integers(0, len(damaged) - 1))] = data.draw(st.integers(0, 255))
    try:
        total = read_sky_map(bytes(damaged)).probabilities.sum()
    except SkytilesError as refusal:
        assert refusal.advice  # noqa: PT017
    else:
        assert total == pytest.approx(1.0)
