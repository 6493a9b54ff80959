"""Invented alert files that cannot be used, written by astropy."""

import gzip
import io
import json

import numpy as np
from astropy.io import fits

N_PIXELS = 12 * 16**2
# 4 x 4^order + pixel (IVOA MOC 2.0): the twelve pixels of order 0.
WHOLE_SKY = np.arange(4, 16)
EVENT = "2024-03-14T20:00:00"


def table_bytes(columns, **keywords):
    """Columns {name: values} as a FITS table."""
    formats = {"i": "K", "f": "D"}
    table = fits.BinTableHDU.from_columns(
        [
            fits.Column(name, formats[np.asarray(values).dtype.kind], array=np.asarray(values))
            for name, values in columns.items()
        ]
    )
    for name, value in {"DATE_OBS": EVENT, **keywords}.items():
        table.header[name.replace("_", "-")] = value
    file = io.BytesIO()
    fits.HDUList([fits.PrimaryHDU(), table]).writeto(file)
    return file.getvalue()


def flat_map(*, column="PROB", ordering="NESTED", changes=(), **keywords):
    """A single-resolution map, flat but for the changed values {pixel: probability}."""
    values = np.full(N_PIXELS, 1.0 / N_PIXELS)
    for pixel, value in dict(changes).items():
        values[pixel] = value
    return table_bytes({column: values}, ORDERING=ordering, NSIDE=16, **keywords)


def multi_order_map(*, density=1.0 / (4.0 * np.pi), first=None, **keywords):
    """A multi-order map of twelve cells."""
    densities = np.full(len(WHOLE_SKY), density)
    densities[0] = density if first is None else first
    columns = {"UNIQ": WHOLE_SKY, "PROBDENSITY": densities}
    return table_bytes(columns, **{"ORDERING": "NUNIQ", **keywords})


def cone_json(*, event_time=EVENT + "Z", **changes):
    """An alert in JSON with a cone; None takes a field out."""
    cone = {"type": "cone", "ra_deg": 140.0, "dec_deg": 30.0, "radius_deg": 3.0, **changes}
    kept = {name: value for name, value in cone.items() if value is not None}
    return {"event_time": event_time, "constraints": [kept]}


def json_bytes(alert):
    """The alert as a file."""
    return json.dumps(alert).encode()


GOOD_MAP = flat_map()
# What the person calls it: (file name, bytes, code, words of the detail, words of the advice).
BAD_FILES = {
    "not FITS": ("notes.txt", b"The alert of tonight", "bad-alert", "neither FITS", "alert file"),
    "a web page": (
        "page.html",
        b"<!DOCTYPE html><html><body>Sign in</body></html>",
        "bad-alert",
        "web page",
        "alert",
    ),
    "a picture": ("m31.png", b"\x89PNG\r\n\x1a\n\0", "bad-alert", "neither FITS", "alert file"),
    "empty": ("empty.fits", b"", "bad-alert", "neither FITS", "alert file"),
    "truncated table": ("a.fits", GOOD_MAP[:-9000], "bad-map", "of its table", "cut short"),
    "truncated header": ("a.fits", GOOD_MAP[:3200], "bad-map", "no END", "cut short"),
    "truncated gzip": (
        "a.fits.gz",
        gzip.compress(GOOD_MAP)[:300],
        "bad-map",
        "bytes|unpacked",
        "cut short",
    ),
    "truncated JSON": ("a.json", json_bytes(cone_json())[:-9], "bad-alert", "JSON", "alert file"),
    "no UNIQ or PROB column": (
        "flux.fits",
        flat_map(column="FLUX"),
        "bad-map",
        "has the columns FLUX.*UNIQ .* PROB",
        "sky map of the alert",
    ),
    "no table": (
        "image.fits",
        GOOD_MAP[:2880],
        "bad-map",
        "no binary table",
        "sky map of the alert",
    ),
    "negative probability": (
        "n.fits",
        flat_map(changes={5: -0.01}),
        "bad-map",
        "1 of its probabilities are negative, the least -0.01",
        "maker of the map",
    ),
    "NaN probability": (
        "nan.fits",
        flat_map(changes={5: np.nan, 9: np.inf}),
        "bad-map",
        "2 of its probabilities are not finite",
        "maker of the map",
    ),
    "sum zero": (
        "zero.fits",
        flat_map(changes=dict.fromkeys(range(N_PIXELS), 0.0)),
        "bad-map",
        "sum to 0",
        "maker of the map",
    ),
    "negative density": ("n.fits", multi_order_map(first=-1.0), "bad-map", "negative", "maker"),
    "NaN density": ("n.fits", multi_order_map(first=np.nan), "bad-map", "finite", "maker"),
    "density zero": ("n.fits", multi_order_map(density=0.0), "bad-map", "sum to 0", "maker"),
    "wrong ORDERING": (
        "o.fits",
        flat_map(ordering="SPIRAL"),
        "bad-map",
        "ORDERING = 'SPIRAL'.*RING or NESTED",
        "which order it has",
    ),
    "no ORDERING": ("o.fits", flat_map(ordering=""), "bad-map", "ORDERING = ''", "which order"),
    "RING beside UNIQ": (
        "o.fits",
        multi_order_map(ORDERING="RING"),
        "bad-map",
        "ORDERING = 'RING'.*NUNIQ",
        "which order",
    ),
    "map of the future": (
        "late.fits",
        flat_map(DATE_OBS="2199-01-01T00:00:00"),
        "bad-alert",
        "hours in the future",
        "UTC",
    ),
}
BAD_MESSAGES = {
    "impossible declination": (cone_json(dec_deg=-95.0), "dec_deg is -95.0", "Correct dec_deg"),
    "impossible right ascension": (cone_json(ra_deg=400.0), "ra_deg is 400.0", "Correct ra_deg"),
    "no position": (cone_json(ra_deg=None), "has no ra_deg", "Correct ra_deg"),
    "date in the future": (
        cone_json(event_time="2199-01-01T00:00:00Z"),
        "hours in the future",
        "UTC",
    ),
    "no date": (cone_json(event_time="tomorrow"), "'tomorrow'", "Correct the time"),
    "unknown and missing fields": (
        {"x": 1, "constraints": []},
        r"unknown fields \(x\) and it lacks event_time\. What is allowed: the fields .*constraints",
        "Compare with the example alerts",
    ),
    "no constraint": ({**cone_json(), "constraints": []}, "too few", "example alerts"),
    "a map that is elsewhere": (
        {**cone_json(), "constraints": [{"type": "map", "file": "sky.fits"}]},
        "sky.fits",
        ".",
    ),
}
for name, (message, detail, advice) in BAD_MESSAGES.items():
    BAD_FILES[name] = ("burst.json", json_bytes(message), "bad-alert", detail, advice)
