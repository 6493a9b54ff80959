"""What pyproject.toml asks for, and whether an interpreter already has it."""

import importlib.metadata
import re
import tomllib

from campaigns.project.set_up.places import ROOT

_SPECIFIER = re.compile(r"(>=|<=|==|!=|<|>)\s*([0-9][0-9.]*)")
_NAME = re.compile(r"[A-Za-z0-9._-]+")


def list_requirements(extras: list[str]) -> list[str]:
    """Requirement lines of the project and of the named extras."""
    with open(ROOT / "pyproject.toml", "rb") as file:
        project = tomllib.load(file)["project"]
    lines = list(project["dependencies"])
    for extra in extras:
        lines += project["optional-dependencies"][extra]
    return lines


def list_unsatisfied(lines: list[str]) -> list[str]:
    """Those requirements that the running interpreter does not meet."""
    return [line for line in lines if not _is_satisfied(line)]


def _is_satisfied(line: str) -> bool:
    name = _NAME.match(line)
    try:
        version = importlib.metadata.version(name.group() if name else line)
    except importlib.metadata.PackageNotFoundError:
        return False
    return all(_holds(version, *part) for part in _SPECIFIER.findall(line))


def _holds(version: str, operator: str, bound: str) -> bool:
    have, want = _release(version), _release(bound)
    width = max(len(have), len(want))
    have, want = have + (0,) * (width - len(have)), want + (0,) * (width - len(want))
    return {
        ">=": have >= want,
        "<=": have <= want,
        "==": have == want,
        "!=": have != want,
        "<": have < want,
        ">": have > want,
    }[operator]


def _release(version: str) -> tuple[int, ...]:
    leading = re.match(r"[0-9]+(\.[0-9]+)*", version)
    return tuple(int(part) for part in leading.group().split(".")) if leading else (0,)
