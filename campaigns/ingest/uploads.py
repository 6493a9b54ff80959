"""Uploaded files, kept under their SHA-256: the same file twice is one file."""

import hashlib
import os
import re
import tempfile
from collections.abc import Iterable
from pathlib import Path

from django.conf import settings

from campaigns.errors import InvalidInput, NotFound

# On the command line a map may have 2 GB; what comes through HTTP is held in memory by a server.
MOST_BYTES = 256 * 1024 * 1024
_SHA256 = re.compile(r"[0-9a-f]{64}")


class UploadTooLarge(InvalidInput):
    """More bytes than any alert has."""

    code = "upload-too-large"
    status = 413
    title = "The file is too large"


def keep_upload(chunks: Iterable[bytes]) -> str:
    """Write a file below the uploads folder and return its SHA-256. Nothing half written stays."""
    folder = _folder()
    digest = hashlib.sha256()
    n_bytes = 0
    handle, temporary = tempfile.mkstemp(dir=folder, prefix="incoming-")
    try:
        with os.fdopen(handle, "wb") as file:
            for chunk in chunks:
                n_bytes += len(chunk)
                _refuse_too_large(n_bytes)
                digest.update(chunk)
                file.write(chunk)
        Path(temporary).replace(folder / digest.hexdigest())
    finally:
        Path(temporary).unlink(missing_ok=True)
    return digest.hexdigest()


def sha256_of(data: bytes) -> str:
    """Under which name a file is kept."""
    return hashlib.sha256(data).hexdigest()


def joined(chunks: Iterable[bytes]) -> bytes:
    """The bytes of an upload, refused as soon as they are too many."""
    parts: list[bytes] = []
    for chunk in chunks:
        parts.append(chunk)
        _refuse_too_large(sum(map(len, parts)))
    return b"".join(parts)


def read_upload(sha256: str) -> bytes:
    """The bytes of a kept file."""
    path = _folder() / sha256
    if not _SHA256.fullmatch(sha256) or not path.is_file():
        raise NotFound(
            f"There is no uploaded file {sha256[:12]!r}.", "Upload the alert again, then launch."
        )
    return path.read_bytes()


def _refuse_too_large(n_bytes: int) -> None:
    if n_bytes > MOST_BYTES:
        raise UploadTooLarge(
            f"The file has more than {MOST_BYTES // 1024**2} MB.",
            "Send the multi-order version of the map, which is much smaller.",
        )


def _folder() -> Path:
    folder = Path(settings.UPLOADS)
    folder.mkdir(parents=True, exist_ok=True)
    return folder
