"""Set-up by manage.py: what can be shown without the network. .ci/run does the real thing."""

import json
import shutil
import subprocess
import sys
import time
from pathlib import Path

import pytest

from campaigns.project.set_up import environment, front_end, requirements, turn
from campaigns.project.set_up.places import ROOT, SetUpError


@pytest.fixture
def bare_copy(tmp_path):
    """The project's set-up part alone, as a fresh clone has it."""
    for name in ("manage.py", "pyproject.toml"):
        shutil.copy(ROOT / name, tmp_path / name)
    shutil.copytree(
        ROOT / "campaigns" / "project" / "set_up", tmp_path / "campaigns" / "project" / "set_up"
    )
    for package in ("campaigns", "campaigns/project"):
        (tmp_path / package / "__init__.py").touch()
    return tmp_path


def test_help_works_before_set_up(bare_copy):
    (bare_copy / "run.py").write_text(
        "import sys, runpy\n"
        f"sys.path.insert(0, {str(bare_copy)!r})\n"
        "sys.argv = ['manage.py', '--help']\n"
        "runpy.run_path('manage.py', run_name='__main__')\n"
    )
    result = subprocess.run(
        [sys.executable, "-I", "-S", "run.py"],
        cwd=bare_copy,
        capture_output=True,
        text=True,
        timeout=60,
        check=False,
    )
    assert result.returncode == 0, result.stderr
    assert "rehearse" in result.stdout
    assert not (bare_copy / ".venv").exists()


def test_an_older_python_is_told_which_ones_serve():
    source = (
        (ROOT / "manage.py")
        .read_text()
        .replace("sys.version_info < (3, 11)", "sys.version_info < (9, 9)")
    )
    result = subprocess.run(
        [sys.executable, "-c", source], capture_output=True, text=True, timeout=60, check=False
    )
    assert result.returncode == 3
    assert "3.11, 3.12 or 3.13" in result.stderr


def test_without_ensurepip_the_debian_package_is_named(monkeypatch, tmp_path):
    monkeypatch.setitem(sys.modules, "ensurepip", None)
    monkeypatch.setattr(environment, "VENV_PYTHON", tmp_path / "bin" / "python")
    monkeypatch.setattr(environment.subprocess, "run", lambda *_, **__: pytest.fail("not asked"))
    with pytest.raises(SetUpError, match=r"apt install python3\.\d+-venv"):
        environment._make_venv()


@pytest.mark.parametrize(
    ("version", "operator", "bound", "holds"),
    [
        ("5.2.19", ">=", "5.2", True),
        ("5.2.19", "<", "5.3", True),
        ("6.0", "<", "5.3", False),
        ("3.9", ">=", "3.18", False),
        ("2.4.0rc1", ">=", "2.4", True),
        ("1.0", "==", "1.0.0", True),
    ],
)
def test_a_requirement_is_judged_by_numbers_not_letters(version, operator, bound, holds):
    assert requirements._holds(version, operator, bound) is holds


def test_a_missing_package_is_unsatisfied():
    missing = "no-such-package-anywhere>=1"
    assert requirements.list_unsatisfied([missing, "pytest>=1"]) == [missing]


def test_an_interrupted_set_up_is_not_ready(tmp_path, monkeypatch):
    """The marker is written last: without it, or with another's, .venv does not count."""
    python = tmp_path / "bin" / "python"
    python.parent.mkdir()
    python.touch()
    marker = tmp_path / "quartersky-ready.json"
    monkeypatch.setattr(environment, "VENV_PYTHON", python)
    monkeypatch.setattr(environment, "_MARKER", marker)
    assert not environment.is_ready([])
    marker.write_text(json.dumps({"fingerprint": environment._fingerprint(), "extras": []}))
    assert environment.is_ready([])
    assert not environment.is_ready(["test"])
    marker.write_text(json.dumps({"fingerprint": {"python": "another"}, "extras": []}))
    assert not environment.is_ready([])
    marker.write_text('{"fingerp')
    assert not environment.is_ready([])


def test_a_half_made_environment_is_made_anew(tmp_path, monkeypatch):
    calls = []
    python = tmp_path / "bin" / "python"
    python.parent.mkdir()
    python.touch()
    (tmp_path / "quartersky-building").touch()
    monkeypatch.setattr(environment, "VENV_PYTHON", python)
    monkeypatch.setattr(environment, "_BUILDING", tmp_path / "quartersky-building")
    monkeypatch.setattr(environment, "_is_same_interpreter", lambda: True)

    def record(command, **_options):
        calls.append(command)
        return subprocess.CompletedProcess(command, 0, "", "")

    monkeypatch.setattr(environment.subprocess, "run", record)
    environment._make_venv()
    assert "--clear" in calls[0]


def test_a_second_set_up_waits_and_says_so(tmp_path, monkeypatch, capsys):
    monkeypatch.setattr(turn, "CACHE", tmp_path)
    holder = subprocess.Popen(
        [
            sys.executable,
            "-c",
            (
                "import fcntl, sys, time\n"
                f"lock = open({str(tmp_path / 'set-up.lock')!r}, 'w')\n"
                "fcntl.flock(lock, fcntl.LOCK_EX)\n"
                "print('held', flush=True)\n"
                "time.sleep(0.7)\n"
            ),
        ],
        stdout=subprocess.PIPE,
        text=True,
    )
    assert holder.stdout.readline().strip() == "held"
    started = time.monotonic()
    with turn.one_at_a_time():
        waited_s = time.monotonic() - started
    holder.wait()
    holder.stdout.close()
    assert waited_s > 0.3
    assert "waiting" in capsys.readouterr().err


def test_a_changed_source_makes_the_bundle_due(tmp_path, monkeypatch):
    (tmp_path / "src").mkdir()
    (tmp_path / "src" / "a.js").write_text("export const a = 1;\n")
    (tmp_path / "dist").mkdir()
    monkeypatch.setattr(front_end, "STATIC", tmp_path)
    monkeypatch.setattr(front_end, "_BUILT", tmp_path / "dist" / ".built")
    assert not front_end.is_ready()
    (tmp_path / "dist" / ".built").write_text(front_end._hash_sources())
    assert front_end.is_ready()
    (tmp_path / "src" / "a.js").write_text("export const a = 2;\n")
    assert not front_end.is_ready()


def test_the_lock_file_holds_no_download_address():
    lock = Path(ROOT / "static" / "package-lock.json").read_text()
    assert '"resolved"' not in lock
