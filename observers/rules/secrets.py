"""Secrets that are shown once and kept only as a hash."""

import hashlib
import secrets


def new_secret() -> str:
    """256 random bits, safe in a link and in a header."""
    return secrets.token_urlsafe(32)


def secret_sha256(secret: str) -> str:
    """What the database holds of a secret. No salt is needed: nobody can guess 256 bits."""
    return hashlib.sha256(secret.encode()).hexdigest()
