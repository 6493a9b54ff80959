"""Damaged files: whole ones with bytes changed, lost, doubled, and words put in that hurt."""

import io
import json
import random
import time

import numpy as np
from astropy.io import fits

from skytiles.errors import SkytilesError
from skytiles.region.read_alert import read_alert
from tests.skytiles.region.voevent_words import packet, where_when

NOW = 61500.0
# Nothing that small takes longer than this, even beside other work.
SLOWEST_S = 5.0
WORDS = [
    *(b"<", b">", b"]]>", b"<!DOCTYPE a>", b"<!--", b"&lt;", b"&a;", b'"', b"\0", b"\xff\xfe"),
    *(b"-1", b"0", b"NaN", b"1e999", b"-1e-999", b"9" * 30, b"9" * 5000, b"nan", b"inf", b"30/"),
    *(b"null", b"true", b"[[", b"{", b"}", b"/", b"-", b" ", b"\n", b"T", b"= ", b"'", b"END"),
    *(b"0001-01-01T00:00:00", b"9999-12-31T23:59:59Z"),
]


def whole_files(folder):
    """A small whole file for each reader, by the reader's name."""
    return {
        "voevent": [path.read_bytes() for path in sorted(folder.glob("*.xml"))]
        + [packet(where_when(system="TDB-FK5-BARY"), version="2.1")],
        "our json": [path.read_bytes() for path in sorted(folder.glob("*.json"))],
        "moc text": [b"1/1 2 4 2/12-14 21 23 25 8/", (folder / "example-moc.txt").read_bytes()],
        "moc json": [json.dumps({"1": [1, 2, 4], "2": [12, 13, 14, 21], "8": []}).encode()],
        "moc fits": [
            _table("UNIQ", [17, 18, 20, 76, 77, 78], MOCVERS="2.0", ORDERING="NUNIQ", MOCORDER=8),
            _table("RANGE", [0, 4, 8, 20, 1 << 60, 1 << 61], MOCVERS="2.0", ORDERING="RANGE"),
        ],
        "map fits": [_map("NESTED"), _map("RING")],
    }


def _table(name, values, **keywords):
    column = fits.Column(name=name, format="K", array=np.array(values))
    return _bytes(fits.BinTableHDU.from_columns([column]), COORDSYS="C", **keywords)


def _map(ordering):
    column = fits.Column(name="PROB", format="D", array=np.arange(48) / 1128.0)
    table = fits.BinTableHDU.from_columns([column])
    return _bytes(table, ORDERING=ordering, NSIDE=2, INDXSCHM="IMPLICIT", COORDSYS="C")


def _bytes(table, **keywords):
    table.header.update(keywords)
    file = io.BytesIO()
    fits.HDUList([fits.PrimaryHDU(), table]).writeto(file)
    return file.getvalue()


def damaged(rng: random.Random, data: bytes) -> bytes:
    """A file with one to four faults."""
    for _ in range(rng.randint(1, 4)):
        data = rng.choice((_changed, _lost, _doubled, _worded, _cut, _other_digit))(rng, data)
    return data


def _place(rng, data):
    return rng.randrange(len(data) + 1)


def _span(rng, data):
    first = _place(rng, data)
    return first, first + rng.choice((1, 1, 2, 8, 80, 500))


def _changed(rng, data):
    first = _place(rng, data)
    return data[:first] + bytes([rng.randrange(256)]) + data[first + 1 :]


def _lost(rng, data):
    first, end = _span(rng, data)
    return data[:first] + data[end:]


def _doubled(rng, data):
    first, end = _span(rng, data)
    return data[:end] + data[first:]


def _worded(rng, data):
    first = _place(rng, data)
    return data[:first] + rng.choice(WORDS) + data[first + rng.choice((0, 1, 4)) :]


def _cut(rng, data):
    return data[: _place(rng, data)] if rng.random() < 0.2 else data


def _other_digit(rng, data):
    digits = [place for place, byte in enumerate(data) if 48 <= byte <= 57]
    if not digits:
        return data
    place = rng.choice(digits)
    return data[:place] + rng.choice((b"-", b"9", b"e5", b"0", b".", b"/")) + data[place + 1 :]


def outcomes(files, *, n_files, seed):
    """How often a damaged file was still read, and how often it was refused in words.

    Anything but an alert or a named problem leaves as it is, with the file's seed.
    """
    n_read, n_refused = 0, 0
    for number in range(n_files):
        rng = random.Random(f"{seed} {number}")
        data = damaged(rng, rng.choice(files))
        begun = time.perf_counter()
        refusal = _refusal(data)
        assert time.perf_counter() - begun < SLOWEST_S, (number, data)
        if refusal is None:
            n_read += 1
        else:
            n_refused += 1
            assert refusal.advice, (number, data)
            assert len(str(refusal)) < 2000, (number, data)
    return n_read, n_refused


def _refusal(data):
    """The named problem of a file; None when it is read. Anything else is raised."""
    try:
        read_alert(data, filename="damaged", now_mjd=NOW)
    except SkytilesError as refusal:
        return refusal
    return None
