"""The tools that read the sources have nothing to say. Settings: pyproject.toml."""

import subprocess
import sys

import pytest

from tests.architecture.source_tree import PACKAGES, ROOT

_PYTHON_FOLDERS = [*PACKAGES, "tests", "fixtures", "manage.py"]
TOOLS = {
    "ruff check": ["-m", "ruff", "check", "--no-cache", *_PYTHON_FOLDERS],
    "ruff format": ["-m", "ruff", "format", "--no-cache", "--check", *_PYTHON_FOLDERS],
    "mypy": ["-m", "mypy", *PACKAGES],
    "import-linter": ["-c", "from importlinter.cli import lint_imports_command as c; c()"],
}


@pytest.mark.parametrize("name", TOOLS)
def test_the_tool_finds_nothing(name):
    answer = subprocess.run(
        [sys.executable, *TOOLS[name]], cwd=ROOT, capture_output=True, text=True, check=False
    )
    assert answer.returncode == 0, answer.stdout + answer.stderr
