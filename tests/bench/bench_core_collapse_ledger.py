"""Frames into the core-collapse ledger of 1,500 square degrees, against rebuilding 2,000 frames."""

import resource
import sys
import time

import numpy as np

from tests.bench import core_collapse_stage as stage

N_FRAMES = 2_000
N_SMALL = 400
N_LARGE = 8
SMALL_DEG2, LARGE_DEG2 = 4.0, 300.0


def bench_core_collapse_ledger():
    """Per-pixel offsets in five bands; the peer is our own rebuild of all frames."""
    rng = np.random.default_rng(1)
    pixels = stage.region_pixels()
    placed = stage.placed_core_collapse(pixels)
    frames = [
        stage.make_frame(rng, pixels, number, area_deg2=SMALL_DEG2)
        for number in range(N_FRAMES + N_SMALL)
    ]
    started = time.perf_counter()
    ledger = stage.new_ledger(pixels, placed)
    for frame in frames[:N_FRAMES]:
        ledger.add(*frame)
    rebuild_s = time.perf_counter() - started
    small_s = [_seconds(ledger, frame) for frame in frames[N_FRAMES:]]
    large = [
        stage.make_frame(rng, pixels, len(frames) + number, area_deg2=LARGE_DEG2)
        for number in range(N_LARGE)
    ]
    large_s = [_seconds(ledger, frame) for frame in large]
    again = stage.new_ledger(pixels, placed)
    for frame in [*frames, *large][::-1]:
        again.add(*frame)
    ours_s = float(np.median(small_s))
    return {
        "ours_s": ours_s,
        "peer": f"our own rebuild of {N_FRAMES} frames",
        "peer_s": rebuild_s,
        "ratio": rebuild_s / ours_s,
        "error": f"{abs(again.searched - ledger.searched):.1e} from a rebuild in reverse order",
        "p99_s": float(np.quantile(small_s, 0.99)),
        "large_s": float(np.median(large_s)),
        "large_most_s": float(np.max(large_s)),
        "n_nodes": len(placed.model.hypotheses) * len(placed.model.offsets_mag),
        "most_memory_mb": round(_most_memory_mb()),
    }


def _seconds(ledger, frame):
    started = time.perf_counter()
    ledger.add(*frame)
    return time.perf_counter() - started


def _most_memory_mb():
    """Of this process, whatever it did before."""
    most = resource.getrusage(resource.RUSAGE_SELF).ru_maxrss
    return most / 1e6 if sys.platform == "darwin" else most / 1e3
