"""Invented bursts: what stations of known place would have measured."""

import numpy as np

from skytiles.region.arrival_times_json import arrival_times_from_json
from skytiles.sphere.angles import unit_vectors
from skytiles.sphere.calendar import mjd_from_iso
from skytiles.sphere.earth_places import LIGHT_M_PER_S, earth_to_icrs_matrix, place_vectors_m

REFERENCE_TIME = "2027-03-14T05:06:07Z"
# Longitude and latitude, degrees: the stations of the table "baselines".
PLACES = {"A": (137.31, 36.43), "B": (-81.20, 46.47), "C": (13.58, 42.45), "D": (0.0, -90.0)}


def arrivals_s(names, direction, *, reference_time=REFERENCE_TIME):
    """Light times of a burst from an ICRS direction against the centre of the Earth."""
    places_m = [place_vectors_m(*PLACES[name], 0.0) for name in names]
    matrix = earth_to_icrs_matrix(mjd_from_iso(reference_time))
    return -(np.array(places_m) @ matrix.T) @ np.asarray(direction) / LIGHT_M_PER_S


def burst_json(names, times_s, *, sigma_s=None, **more):
    """The JSON of arrival times at stations of the table."""
    stations = [
        {
            "name": name,
            "longitude_deg": PLACES[name][0],
            "latitude_deg": PLACES[name][1],
            "arrival_s": float(time_s),
            **({"sigma_s": sigma_s} if sigma_s else {}),
        }
        for name, time_s in zip(names, times_s, strict=True)
    ]
    fields = {"type": "arrival times", "reference_time": REFERENCE_TIME, "stations": stations}
    return {**fields, **more}


def burst(names, *, sigma_s, ra_deg=100.0, dec_deg=20.0, errors_s=0.0):
    """A constraint from a direction, with errors of the times if wanted."""
    times_s = arrivals_s(names, unit_vectors(ra_deg, dec_deg)) + errors_s
    return arrival_times_from_json(burst_json(names, times_s, sigma_s=sigma_s))
