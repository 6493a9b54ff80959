"""The share that cannot be found, against astropy's Galactic frame."""

import numpy as np
from astropy import units as u
from astropy.coordinates import SkyCoord

from skytiles.ledger.undetectable import undetectable_fraction


def test_it_is_larger_within_five_degrees_of_the_galactic_plane():
    rng = np.random.default_rng(3)
    longitudes, latitudes = rng.uniform(0, 360, 500), rng.uniform(-10, 10, 500)
    clear = np.abs(np.abs(latitudes) - 5.0) > 1e-4
    sky = SkyCoord(longitudes[clear] * u.deg, latitudes[clear] * u.deg, frame="galactic").icrs
    shares = undetectable_fraction(sky.ra.deg, sky.dec.deg)
    expected = np.where(np.abs(latitudes[clear]) < 5.0, 0.05, 0.02)
    np.testing.assert_array_equal(shares, expected)


def test_galactic_centre_and_pole():
    np.testing.assert_array_equal(
        undetectable_fraction([266.405, 192.859], [-28.936, 27.128]), [0.05, 0.02]
    )
