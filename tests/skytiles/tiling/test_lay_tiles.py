import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from skytiles.errors import FootprintError
from skytiles.region.constraints import ConeConstraint
from skytiles.region.make_region import make_region
from skytiles.sphere.healpix_door import pixel_vectors
from skytiles.sphere.solid_angle import SKY_DEG2, rectangle_area_deg2
from skytiles.tiling.lattice import make_lattice
from skytiles.tiling.lay_tiles import LEAST_PROBABILITY, lay_tiles, tile_footprint
from skytiles.tiling.pixels_under import pixels_under

SIZES = [
    (1.0, 1.0),
    (0.631, 0.912),
    (5.0, 3.0),
    (2.0, 11.0),
    (30.0, 20.0),
    (60.0, 60.0),
    (40.0, 1.0),
]


def random_points(n, *, seed):
    """Over the whole sky, with many at the poles and at RA 0."""
    rng = np.random.default_rng(seed)
    ras, decs = rng.uniform(0, 360, n), np.degrees(np.arcsin(rng.uniform(-1, 1, n)))
    decs[: n // 10] = 90.0 - 10.0 ** rng.uniform(-7, 1, n // 10)
    decs[n // 10 : n // 5] = -90.0 + 10.0 ** rng.uniform(-7, 1, n // 10)
    ras[: n // 50] = 0.0
    ras[-n // 50 :] = rng.uniform(-1e-9, 1e-9, n // 50 + (n % 50 > 0)) % 360.0
    return ras, decs


def is_under_tile(ras, decs, tile_ras, tile_decs, width, height):
    """On the plane of each point's tile: our own projection, in angles, not vectors."""
    a, d, e = np.radians(ras - tile_ras), np.radians(tile_decs), np.radians(decs)
    depth = np.sin(d) * np.sin(e) + np.cos(d) * np.cos(e) * np.cos(a)
    x = np.cos(e) * np.sin(a) / depth
    y = (np.cos(d) * np.sin(e) - np.sin(d) * np.cos(e) * np.cos(a)) / depth
    is_wide = np.abs(x) <= np.tan(np.radians(width / 2.0))
    return (depth > 0) & is_wide & (np.abs(y) <= np.tan(np.radians(height / 2.0)))


@pytest.mark.parametrize(("width", "height"), SIZES)
def test_every_point_of_the_sky_is_under_the_tile_of_its_cell(width, height):
    lattice = make_lattice(width, height)
    ras, decs = random_points(50_000, seed=1)
    tile_ras, tile_decs = lattice.centres_deg(lattice.cells_at(ras, decs))
    assert is_under_tile(ras, decs, tile_ras, tile_decs, width, height).all()


@settings(max_examples=60, deadline=None)
@given(st.floats(0.5, 60.0), st.floats(0.5, 60.0), st.integers(0, 1000))
def test_lattices_of_any_size_have_no_gap(width, height, seed):
    lattice = make_lattice(width, height)
    ras, decs = random_points(500, seed=seed)
    tile_ras, tile_decs = lattice.centres_deg(lattice.cells_at(ras, decs))
    assert is_under_tile(ras, decs, tile_ras, tile_decs, width, height).all()


@pytest.mark.parametrize("dec", [-90.0, 90.0])
@pytest.mark.parametrize("ra", [0.0, 200.0, 359.999999])
def test_the_poles_are_covered(ra, dec):
    lattice = make_lattice(3.0, 2.0)
    tile_ras, tile_decs = lattice.centres_deg(lattice.cells_at([ra], [dec]))
    tile = tile_footprint(tile_ras[0], tile_decs[0], width_deg=3.0, height_deg=2.0)
    normals = np.cross(tile.corners, np.roll(tile.corners, -1, axis=0))
    assert (normals @ [0.0, 0.0, np.sign(dec)] > 0).all()


@pytest.mark.parametrize("side", [0.3, 1.0, 3.0])
def test_small_tiles_waste_little_sky(side):
    lattice = make_lattice(side, side)
    wanted = SKY_DEG2 / float(rectangle_area_deg2(side, side))
    assert lattice.counts.sum() <= 1.06 * wanted


@pytest.mark.parametrize(
    "cone",
    [
        ConeConstraint(0.1, 0.0, 5.0),
        ConeConstraint(10.0, 89.0, 5.0),
        ConeConstraint(200.0, -89.9, 6.0),
        ConeConstraint(77.0, 45.0, 0.1),
    ],
)
@pytest.mark.parametrize(("width", "height"), [(1.0, 0.7), (6.0, 6.0), (20.0, 3.0)])
def test_random_points_of_the_region_are_under_a_tile(cone, width, height):
    region = make_region([cone])
    grid = lay_tiles(region, width_deg=width, height_deg=height, max_tiles=10_000)
    assert grid.n_left_out == 0
    # Random points: random parts of pixels, four orders finer, drawn by probability.
    rng = np.random.default_rng(3)
    parents = rng.choice(region.n_pixels, 2000, p=region.probabilities / region.probabilities.sum())
    parts = region.pixels[parents] * 256 + rng.integers(0, 256, 2000)
    points = pixel_vectors(region.order + 4, parts)
    is_under = np.zeros(len(points), dtype=bool)
    for ra, dec in zip(grid.ras_deg, grid.decs_deg, strict=True):
        tile = tile_footprint(ra, dec, width_deg=width, height_deg=height)
        normals = np.cross(tile.corners, np.roll(tile.corners, -1, axis=0))
        is_under |= (points @ normals.T >= 0).all(axis=1)
    # Tiles with less than 1e-5 of the probability are dropped, and no more than that.
    assert is_under.mean() >= 0.998


def test_a_tile_holds_the_probability_of_the_pixels_under_it():
    region = make_region([ConeConstraint(40.0, 60.0, 10.0)])
    grid = lay_tiles(region, width_deg=5.0, height_deg=5.0)
    for j in range(0, grid.n_tiles, 7):
        tile = tile_footprint(grid.ras_deg[j], grid.decs_deg[j], width_deg=5.0, height_deg=5.0)
        is_under = np.isin(region.pixels, pixels_under(tile, region.order))
        # The grid counts parts of pixels: borders differ.
        assert grid.probabilities[j] == pytest.approx(
            region.probabilities[is_under].sum(), rel=0.1, abs=1e-4
        )


def test_tiles_stand_by_row_and_then_by_right_ascension():
    grid = lay_tiles(make_region([ConeConstraint(0.0, 0.0, 8.0)]), width_deg=3.0, height_deg=3.0)
    keys = list(zip(grid.decs_deg, grid.ras_deg, strict=True))
    assert keys == sorted(keys)
    assert (grid.probabilities >= LEAST_PROBABILITY).all()
    assert {0.0, 357.0} <= set(np.round(grid.ras_deg))


def test_the_best_tiles_are_kept_and_the_others_counted():
    region = make_region([ConeConstraint(0.0, 0.0, 8.0)])
    all_tiles = lay_tiles(region, width_deg=2.0, height_deg=2.0)
    few = lay_tiles(region, width_deg=2.0, height_deg=2.0, max_tiles=10)
    assert few.n_tiles == 10
    assert few.n_left_out == all_tiles.n_tiles - 10
    assert few.probabilities.min() >= np.sort(all_tiles.probabilities)[-10]


def test_the_same_size_gives_the_same_lattice_for_another_region():
    first = lay_tiles(make_region([ConeConstraint(10.0, 20.0, 4.0)]), width_deg=2.0, height_deg=2.0)
    second = lay_tiles(
        make_region([ConeConstraint(12.0, 21.0, 4.0)]), width_deg=2.0, height_deg=2.0
    )
    shared = set(zip(first.ras_deg, first.decs_deg, strict=True)) & set(
        zip(second.ras_deg, second.decs_deg, strict=True)
    )
    assert len(shared) > 10


@pytest.mark.parametrize("side", [0.0, -1.0, 61.0, float("nan")])
def test_impossible_tiles_are_refused(side):
    region = make_region([ConeConstraint(0.0, 0.0, 1.0)])
    with pytest.raises(FootprintError):
        lay_tiles(region, width_deg=side, height_deg=1.0)
