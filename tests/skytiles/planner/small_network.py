"""An invented network over an invented region, for planner tests."""

import numpy as np

from skytiles.depth.gear import Gear
from skytiles.ledger.ledger import Ledger
from skytiles.ledger.undetectable import undetectable_fraction
from skytiles.night.place import Place
from skytiles.night.sun_rule import SolarRating
from skytiles.planner.observers_to_plan import PlannerInstrument, PlannerObserver
from skytiles.planner.tiles_to_plan import make_planner_tiles
from skytiles.source.presets import steady_model
from skytiles.sphere.angles import separations_deg
from skytiles.sphere.healpix_door import n_pixels, pixel_centres

SIDES_DEG = (1.0, 1.6, 2.5, 4.0, 8.0)


def disc_region(*, ra_deg, dec_deg, area_deg2, order):
    """Pixels of a disc, likeliest in the middle: centres and probabilities, 2 % outside."""
    pixels = np.arange(n_pixels(order))
    ras_deg, decs_deg = pixel_centres(order, pixels)
    radius_deg = np.degrees(np.arccos(1.0 - area_deg2 / (2.0 * np.pi * (180.0 / np.pi) ** 2)))
    apart_deg = separations_deg(ra_deg, dec_deg, ras_deg, decs_deg)
    is_in = apart_deg <= radius_deg
    weights = np.exp(-0.5 * (apart_deg[is_in] / (radius_deg / 2.0)) ** 2)
    return ras_deg[is_in], decs_deg[is_in], 0.98 * weights / weights.sum()


def grid_tiles(ras_deg, decs_deg, probabilities, *, sides_deg=SIDES_DEG):
    """Declination rows of square tiles for every side; each pixel belongs to the nearest centre."""
    keys, covered, ras, decs, sides = [], [], [], [], []
    for side_deg in sides_deg:
        rows = np.floor(decs_deg / side_deg)
        row_decs = (rows + 0.5) * side_deg
        n_in_row = np.ceil(360.0 * np.cos(np.radians(np.clip(row_decs, -89.0, 89.0))) / side_deg)
        columns = np.floor(ras_deg / 360.0 * n_in_row)
        cells, cell_of = np.unique(np.stack([rows, columns]), axis=1, return_inverse=True)
        cell_of = cell_of.reshape(-1)
        for number in range(cells.shape[1]):
            members = np.flatnonzero(cell_of == number)
            keys.append(len(keys))
            covered.append((members, np.ones(len(members))))
            ras.append((cells[1, number] + 0.5) * 360.0 / n_in_row[members[0]])
            decs.append((cells[0, number] + 0.5) * side_deg)
            sides.append(side_deg)
    return make_planner_tiles(
        keys, covered, ras_deg=ras, decs_deg=decs, widths_deg=sides, heights_deg=sides
    )


def camera(key, *, side_deg, aperture_mm=100.0, n_tiles_left=30, **changes):
    gear = Gear(
        kind="camera", aperture_mm=aperture_mm, pixel_arcsec=2.0, exposure_s=60.0, n_exposures=4
    )
    values = {
        "key": key,
        "gear": gear,
        "rating": SolarRating(kind="camera", field_radius_deg=0.7 * side_deg),
        "overhead_s": 60.0,
        "slew_deg_per_s": 1.0,
        "tile_width_deg": side_deg,
        "tile_height_deg": side_deg,
        "n_tiles_left": n_tiles_left,
    }
    return PlannerInstrument(**(values | changes))


def observer(key, *, latitude_deg, longitude_deg, now_mjd, instruments, **changes):
    values = {
        "key": key,
        "place": Place(latitude_deg, longitude_deg, 100.0, 20.0),
        "instruments": tuple(instruments),
        "free_from_mjd": now_mjd,
        "free_until_mjd": now_mjd + 2.0,
    }
    return PlannerObserver(**(values | changes))


def network(n_observers, *, now_mjd, rng):
    """Observers between 55 south and 60 north, all longitudes, with one camera each."""
    people = []
    for key in range(1, n_observers + 1):
        side_deg = SIDES_DEG[int(rng.integers(len(SIDES_DEG)))]
        aperture_mm = float(rng.uniform(40.0, 200.0)) / max(1.0, side_deg / 2.5)
        people.append(
            observer(
                key,
                latitude_deg=float(rng.uniform(-55.0, 60.0)),
                longitude_deg=float(rng.uniform(-180.0, 180.0)),
                now_mjd=now_mjd,
                instruments=[camera(1000 + key, side_deg=side_deg, aperture_mm=aperture_mm)],
            )
        )
    return people


def fresh_ledger(ras_deg, decs_deg, probabilities, source_model=None):
    return Ledger(
        probabilities,
        0.02,
        undetectable=undetectable_fraction(ras_deg, decs_deg),
        source_model=source_model or steady_model(),
    )
