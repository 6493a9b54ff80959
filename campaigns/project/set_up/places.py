"""Where things are, and how set-up speaks and fails."""

import sys
from pathlib import Path

ROOT = Path(__file__).resolve().parents[3]
STATIC = ROOT / "static"
VENV = ROOT / ".venv"
VENV_PYTHON = VENV / "bin" / "python"
CACHE = ROOT / ".cache"


class SetUpError(Exception):
    """Set-up cannot go on; the message says what to do. Ends with exit status 3."""


def say(text: str) -> None:
    """Progress goes to stderr, so that stdout stays pure for --json."""
    sys.stderr.write(f"set-up: {text}\n")
    sys.stderr.flush()
