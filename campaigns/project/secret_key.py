"""The key that signs sessions: made once, readable by its owner only."""

import os
import secrets
import time
from pathlib import Path

_WAIT_S = 2.0


def read_or_make_secret_key(path: Path) -> str:
    """Return the key in `path`; the first process makes it with mode 0600."""
    path.parent.mkdir(parents=True, exist_ok=True)
    try:
        handle = os.open(path, os.O_WRONLY | os.O_CREAT | os.O_EXCL, 0o600)
    except FileExistsError:
        return _read(path)
    key = secrets.token_urlsafe(50)
    with os.fdopen(handle, "w") as file:
        file.write(key)
        file.flush()
        os.fsync(file.fileno())
    return key


def _read(path: Path) -> str:
    """Another process may have created the file and not yet written to it."""
    deadline = time.monotonic() + _WAIT_S
    while time.monotonic() < deadline:
        if key := path.read_text().strip():
            return key
        time.sleep(0.05)
    raise RuntimeError(f"{path} is empty: delete it, and everybody signs in again.")
