"""Writes sun-moon-cases.json: Sun and Moon by astropy, for the test of static/src/sky/sun_moon.js.

Run: .venv/bin/python tests/static/sky/make_sun_moon_cases.py
"""

import json
from pathlib import Path

import astropy
import numpy as np
from astropy.coordinates import get_body, solar_system_ephemeris
from astropy.time import Time
from astropy.utils import iers

iers.conf.auto_download = False
iers.conf.auto_max_age = None


def cases():
    """Sixty random times of 2010 to 2040, geocentric places."""
    rng = np.random.default_rng(4)
    times = Time(np.sort(rng.uniform(55197, 66154, size=60)), format="mjd", scale="utc")
    with solar_system_ephemeris.set("builtin"):
        sun, moon = get_body("sun", times), get_body("moon", times)
    for i, time in enumerate(times):
        yield {
            "time_ms": round(time.unix * 1000),
            "sun": [float(sun.ra.deg[i]), float(sun.dec.deg[i])],
            "moon": [float(moon.ra.deg[i]), float(moon.dec.deg[i])],
        }


if __name__ == "__main__":
    target = Path(__file__).with_name("sun-moon-cases.json")
    text = json.dumps({"made_with": f"astropy {astropy.__version__}", "cases": list(cases())})
    target.write_text(text + "\n")
