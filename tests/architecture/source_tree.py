"""The sources as the house rules see them: modules, their text, what they import."""

import ast
from dataclasses import dataclass
from functools import cached_property
from pathlib import Path

ROOT = Path(__file__).resolve().parents[2]
PACKAGES = ("skytiles", "observers", "campaigns")


@dataclass(frozen=True)
class Import:
    """One imported module."""

    target: str
    line: int
    is_hidden: bool
    is_for_types: bool


@dataclass(frozen=True)
class Module:
    """One Python file."""

    name: str
    path: str
    text: str

    @cached_property
    def tree(self):
        return ast.parse(self.text, self.path)

    @cached_property
    def imports(self):
        return list(_imports(self.tree, self.name))


def read_modules():
    """Every module of the three packages, migrations left out: they are written by Django."""
    paths = [path for package in PACKAGES for path in sorted((ROOT / package).rglob("*.py"))]
    return [
        Module(_name_of(path), str(path.relative_to(ROOT)), path.read_text())
        for path in paths
        if "migrations" not in path.parts
    ]


def made_up_modules(texts):
    """Modules from {dotted name: text}: to show that a check can fail."""
    return [Module(name, name.replace(".", "/") + ".py", text) for name, text in texts.items()]


def resolved(target, names):
    """The module that an imported name lies in: a.b.Thing lies in a.b."""
    while target and target not in names:
        target = target.rpartition(".")[0]
    return target


def _name_of(path):
    parts = path.relative_to(ROOT).with_suffix("").parts
    return ".".join(parts[:-1] if parts[-1] == "__init__" else parts)


def _imports(tree, own_name, *, is_hidden=False, is_for_types=False):
    for node in ast.iter_child_nodes(tree):
        if isinstance(node, ast.Import):
            for alias in node.names:
                yield Import(alias.name, node.lineno, is_hidden, is_for_types)
        elif isinstance(node, ast.ImportFrom):
            base = _base_of(node, own_name)
            for alias in node.names:
                yield Import(f"{base}.{alias.name}", node.lineno, is_hidden, is_for_types)
        elif isinstance(node, ast.Call) and _is_late_import(node):
            name = node.args[0].value if isinstance(node.args[0], ast.Constant) else "?"
            yield Import(str(name), node.lineno, True, False)
            yield from _imports(node, own_name, is_hidden=is_hidden, is_for_types=is_for_types)
        else:
            yield from _imports(
                node,
                own_name,
                is_hidden=is_hidden or isinstance(node, ast.FunctionDef | ast.AsyncFunctionDef),
                is_for_types=is_for_types or _is_type_checking(node),
            )


def _base_of(node, own_name):
    if not node.level:
        return node.module
    parents = own_name.split(".")[: -node.level]
    return ".".join([*parents, *([node.module] if node.module else [])])


def _is_late_import(node):
    name = getattr(node.func, "attr", getattr(node.func, "id", ""))
    return name in {"import_module", "__import__"} and bool(node.args)


def _is_type_checking(node):
    return isinstance(node, ast.If) and "TYPE_CHECKING" in ast.dump(node.test)
