"""Make, repair and find the project's own .venv."""

import hashlib
import json
import os
import subprocess
import sys
from pathlib import Path
from typing import Any

from campaigns.project.set_up.places import ROOT, VENV, VENV_PYTHON, SetUpError, say
from campaigns.project.set_up.requirements import list_requirements

_MARKER = VENV / "quartersky-ready.json"
_BUILDING = VENV / "quartersky-building"


def is_inside() -> bool:
    """True when the running interpreter is the one of .venv."""
    return Path(sys.prefix).resolve() == VENV.resolve()


def is_ready(extras: list[str]) -> bool:
    """True when .venv was finished for this interpreter, these requirements and these extras."""
    marker = _read_marker()
    return (
        VENV_PYTHON.exists()
        and marker.get("fingerprint") == _fingerprint()
        and set(extras) <= set(marker.get("extras", []))
    )


def make(extras: list[str]) -> None:
    """Build or repair .venv; the marker is written last, so what is interrupted is repaired."""
    extras = sorted(set(extras) | set(_read_marker().get("extras", [])))
    _make_venv()
    _MARKER.unlink(missing_ok=True)
    _BUILDING.touch()
    install(list_requirements(extras))
    marker = {"fingerprint": _fingerprint(), "extras": extras}
    _MARKER.write_text(json.dumps(marker))
    _BUILDING.unlink()


def install(lines: list[str]) -> None:
    """Let .venv's own pip install requirements, with its progress on stderr."""
    say(f"installing {len(lines)} packages and what they need into .venv")
    command = [str(VENV_PYTHON), "-m", "pip", "install", "--no-input", "--prefer-binary"]
    command += ["--progress-bar", "off", "--disable-pip-version-check", *lines]
    with subprocess.Popen(
        command, stdout=subprocess.PIPE, stderr=subprocess.STDOUT, text=True, cwd=ROOT
    ) as process:
        last_lines = _relay(process)
    if process.returncode:
        raise SetUpError(
            "pip could not install the packages. Its last words:\n  "
            + "\n  ".join(last_lines)
            + "\nCheck the connection to the package index and run the same command again."
        )


def _relay(process: "subprocess.Popen[str]") -> list[str]:
    last_lines: list[str] = []
    for line in process.stdout or ():
        last_lines = [*last_lines[-9:], line.rstrip()]
        if line.startswith(("Collecting", "Building", "Installing collected")):
            say(line.strip()[:100])
    return last_lines


def _make_venv() -> None:
    if VENV_PYTHON.exists() and not _BUILDING.exists() and _is_same_interpreter():
        return
    _check_ensurepip()
    say(f"making .venv with Python {sys.version.split()[0]}")
    command = [sys._base_executable, "-m", "venv", "--clear", str(VENV)]  # type: ignore[attr-defined]
    result = subprocess.run(command, capture_output=True, text=True, check=False)
    if result.returncode:
        raise SetUpError(
            f".venv could not be made: {(result.stdout + result.stderr).strip()}\n"
            "Check that this folder can be written and the disk is not full."
        )


def _is_same_interpreter() -> bool:
    made_with: str = str(_read_marker().get("fingerprint", {}).get("python", ""))
    return made_with == _python_identity()


def _check_ensurepip() -> None:
    try:
        import ensurepip  # noqa: F401 - only whether it is there
    except ImportError:
        version = f"{sys.version_info.major}.{sys.version_info.minor}"
        raise SetUpError(
            "this Python comes without ensurepip, so no virtual environment can be made.\n"
            f"On Debian and Ubuntu: apt install python{version}-venv; then run this again."
        ) from None


def _read_marker() -> dict[str, Any]:
    try:
        return dict(json.loads(_MARKER.read_text()))
    except (OSError, ValueError):
        return {}


def _python_identity() -> str:
    executable = os.path.realpath(sys._base_executable)  # type: ignore[attr-defined]
    return f"{sys.version} {executable}"


def _fingerprint() -> dict[str, str]:
    pyproject = hashlib.sha256(_requirement_text().encode()).hexdigest()
    return {"python": _python_identity(), "requirements": pyproject}


def _requirement_text() -> str:
    return "\n".join(list_requirements(["node", "grown", "test"]))
