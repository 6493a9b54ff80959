"""Writes healpix-cases.json: pixels and centres by healpy, for the test of sky/healpix.js.

Run: .venv/bin/python tests/static/sky/make_healpix_cases.py
"""

import json
from pathlib import Path

import healpy
import numpy as np


def directions(rng):
    """Random directions, and the places where formulas break."""
    vectors = rng.normal(size=(60, 3))
    vectors /= np.linalg.norm(vectors, axis=1)[:, None]
    ras_decs = [
        (0, 90),
        (0, -90),
        (0.001, 89.999),
        (359.999, -89.999),
        (0, 0.01),
        (359.99999, 12.0),
    ]
    ras_decs += [
        (45.0, 41.8103),
        (45.0, 41.8104),
        (200.0, -41.811),
        (89.9999, 60.0),
        (90.0001, -60.0),
    ]
    special = [healpy.ang2vec(ra, dec, lonlat=True) for ra, dec in ras_decs]
    return np.vstack([vectors, special])


def cases():
    """One case an order: directions with their pixels, pixels with their centres."""
    rng = np.random.default_rng(11)
    for order in (0, 1, 5, 8, 10):
        nside = 2**order
        vectors = directions(rng)
        pixels = rng.integers(0, healpy.nside2npix(nside), size=25)
        yield {
            "order": order,
            "directions": vectors.tolist(),
            "pixels_at": healpy.vec2pix(nside, *vectors.T, nest=True).tolist(),
            "pixels": pixels.tolist(),
            "centres": np.transpose(healpy.pix2vec(nside, pixels, nest=True)).tolist(),
        }


if __name__ == "__main__":
    target = Path(__file__).with_name("healpix-cases.json")
    text = json.dumps({"made_with": f"healpy {healpy.__version__}", "cases": list(cases())})
    target.write_text(text + "\n")
