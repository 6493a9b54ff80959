"""Arrays that take long to compute, kept in the data folder under the hash of what made them.

They can be computed again at any time: a missing, old or damaged file is only slow.
"""

import hashlib
import json
import os
import tempfile
import zipfile
from collections.abc import Callable, Iterable, Mapping
from pathlib import Path
from typing import Any

import numpy as np
import numpy.typing as npt
from django.conf import settings

Arrays = Mapping[str, npt.NDArray[Any]]

# The ones that were used longest ago go first.
MOST_FILES = 16
MOST_BYTES = 1_000_000_000


def hash_of(*parts: Any) -> str:
    """SHA-256 of values and bytes in their order."""
    digest = hashlib.sha256()
    for part in parts:
        data = part if isinstance(part, bytes) else json.dumps(part, sort_keys=True).encode()
        digest.update(len(data).to_bytes(8, "big") + data)
    return digest.hexdigest()


def kept_arrays(sha256: str, *, compute: Callable[[], Arrays]) -> Arrays:
    """The arrays of a hash, computed when they are not there."""
    path = _folder() / f"{sha256}.npz"
    found = _read(path)
    if found is not None:
        return found
    arrays = compute()
    _write(path, arrays)
    _make_room(_folder().glob("*.npz"), but_not=path)
    return arrays


def _read(path: Path) -> Arrays | None:
    try:
        # Opened here: a damaged file would stay open in numpy.
        with path.open("rb") as opened, np.load(opened, allow_pickle=False) as file:
            arrays = {name: file[name] for name in file.files}
        path.touch()
    except (OSError, ValueError, KeyError, EOFError, zipfile.BadZipFile):
        return None
    return arrays


def _write(path: Path, arrays: Arrays) -> None:
    handle, temporary = tempfile.mkstemp(dir=path.parent, prefix="incoming-")
    try:
        with os.fdopen(handle, "wb") as file:
            np.savez(file, allow_pickle=False, **arrays)
        Path(temporary).replace(path)
    finally:
        Path(temporary).unlink(missing_ok=True)


def _make_room(paths: Iterable[Path], *, but_not: Path) -> None:
    found = []
    for path in paths:
        try:
            found.append((path.stat().st_mtime, path.stat().st_size, path))
        except FileNotFoundError:  # another process made room
            continue
    n_bytes, n_files = sum(size for _, size, _ in found), len(found)
    for _, size, path in sorted(found):
        if n_files <= MOST_FILES and n_bytes <= MOST_BYTES:
            return
        if path != but_not:
            path.unlink(missing_ok=True)
            n_files, n_bytes = n_files - 1, n_bytes - size


def _folder() -> Path:
    folder = Path(settings.COMPUTED)
    folder.mkdir(parents=True, exist_ok=True)
    return folder
