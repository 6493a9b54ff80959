"""One frame of 4 square degrees into the ledger of 1,500, against rebuilding 2,000 frames."""

import time

import healpy
import numpy as np

from skytiles.ledger.ledger import Ledger
from skytiles.ledger.ledger_frame import LedgerFrame
from skytiles.ledger.undetectable import undetectable_fraction
from skytiles.source.presets import steady_model

ORDER = 8
N_FRAMES = 2_000
N_TIMED = 200
SIDE_DEG = 2.0


def bench_ledger():
    """Steady source; the peer is our own rebuild of all frames, which an outsider would do."""
    rng = np.random.default_rng(1)
    nside = 1 << ORDER
    pixels = healpy.query_disc(
        nside, healpy.ang2vec(150.0, 20.0, lonlat=True), np.radians(21.95), nest=True
    )
    frames = [_frame(rng, nside, pixels, number) for number in range(N_FRAMES + N_TIMED)]
    started = time.perf_counter()
    ledger = _new_ledger(nside, pixels)
    for frame in frames[:N_FRAMES]:
        ledger.add(*frame)
    rebuild_s = time.perf_counter() - started
    seconds = []
    for frame in frames[N_FRAMES:]:
        started = time.perf_counter()
        ledger.add(*frame)
        seconds.append(time.perf_counter() - started)
    again = _new_ledger(nside, pixels)
    for frame in reversed(frames):
        again.add(*frame)
    ours_s = float(np.median(seconds))
    return {
        "ours_s": ours_s,
        "peer": f"our own rebuild of {N_FRAMES} frames",
        "peer_s": rebuild_s,
        "ratio": rebuild_s / ours_s,
        "error": f"{abs(again.searched - ledger.searched):.1e} from a rebuild in reverse order",
        "p99_s": float(np.quantile(seconds, 0.99)),
        "area_deg2": round(len(pixels) * healpy.nside2pixarea(nside, degrees=True)),
    }


def _new_ledger(nside, pixels):
    ras_deg, decs_deg = healpy.pix2ang(nside, pixels, nest=True, lonlat=True)
    return Ledger(
        np.full(len(pixels), 0.999 / len(pixels)),
        0.001,
        undetectable=undetectable_fraction(ras_deg, decs_deg),
        source_model=steady_model(),
    )


def _frame(rng, nside, pixels, number):
    ra_deg, dec_deg = healpy.pix2ang(nside, rng.choice(pixels), nest=True, lonlat=True)
    under = healpy.query_disc(
        nside,
        healpy.ang2vec(ra_deg, dec_deg, lonlat=True),
        np.radians(SIDE_DEG / np.sqrt(np.pi)),
        nest=True,
    )
    indices = np.flatnonzero(np.isin(pixels, under))
    frame = LedgerFrame(
        key=number,
        t_d=float(rng.uniform(0.0, 0.5)),
        instrument=int(rng.integers(40)),
        ra_deg=float(ra_deg),
        dec_deg=float(dec_deg),
        field_deg=SIDE_DEG,
        is_examined=True,
        completeness=0.85,
        m_eff=float(rng.uniform(12.0, 18.0)),
        s=0.2,
        saturation_mag=None,
        masks_saturated=False,
        band="clear",
    )
    return frame, indices, np.ones(len(indices))
