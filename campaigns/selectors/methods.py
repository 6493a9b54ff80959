"""The methods of the science, read from the sources of skytiles: so they cannot drift from them."""

import ast
import json
import re
import textwrap
from collections.abc import Iterable, Iterator
from dataclasses import dataclass
from functools import lru_cache
from pathlib import Path

import skytiles

_ROOT = Path(skytiles.__file__).resolve().parent
# In the order in which the numbers are made.
_CHAPTERS = {
    "region": "Region: where the source may be",
    "source": "Source: how bright it may be, and when",
    "tiling": "Tiles and footprints",
    "night": "Night: what is up, dark and safe",
    "depth": "Depth: how faint a frame goes",
    "ledger": "Ledger: what has been searched",
    "planner": "Planner: who looks where, when",
    "sphere": "Sphere: directions, areas, times",
}
_SECTION = re.compile(r"^(\w+)\n-{3,}$", re.M)
# Paragraphs that begin with one of these words, and the name that they have on the page.
_MARKED = {"Formula": "formula", "Source": "source", "Valid": "valid", "Error": "valid"}

Described = ast.FunctionDef | ast.ClassDef


@dataclass(frozen=True)
class Symbol:
    """A name, its shape and unit, and what it means."""

    name: str
    meaning: str


@dataclass(frozen=True)
class Check:
    """A test by the name that it has, and the published values that it reads."""

    claim: str
    against: tuple[str, ...]


@dataclass(frozen=True)
class Method:
    """One public function: what its docstring says, the code itself, and who checks it."""

    name: str
    module: str
    purpose: str
    formula: str
    symbols: tuple[Symbol, ...]
    gives: str
    refuses: str
    valid: str
    source: str
    code: str
    checks: tuple[Check, ...]

    @property
    def anchor(self) -> str:
        """Where it stands on the page."""
        return f"{self.module.removeprefix('skytiles.').replace('.', '-')}-{self.name}"


@dataclass(frozen=True)
class Chapter:
    """The methods of one package."""

    package: str
    title: str
    about: str
    methods: tuple[Method, ...]


@lru_cache(maxsize=1)
def list_methods() -> tuple[Chapter, ...]:
    """All public functions of skytiles that name a source, chapter by chapter."""
    checks = _checks()
    return tuple(
        Chapter(package, title, _about(package), _formulas_first(_methods_of(package, checks)))
        for package, title in _CHAPTERS.items()
    )


def _formulas_first(methods: Iterable[Method]) -> tuple[Method, ...]:
    """What is held against published values or written as a formula comes before the plumbing."""

    def rank(method: Method) -> int:
        if method.formula:
            return 0
        return 1 if any(check.against for check in method.checks) else 2

    return tuple(sorted(methods, key=rank))


def read_method(
    function: Described, *, name: str, module: str, text: str, checks: tuple[Check, ...] = ()
) -> Method:
    """One function as a method; `text` is the source of its module."""
    doc = ast.get_docstring(function) or ""
    head, sections = _sections(doc)
    told = _marked(doc)
    return Method(
        name=name,
        module=module,
        purpose=head.split("\n\n")[0].replace("\n", " ").strip(),
        formula=told.get("formula", ""),
        symbols=tuple(_symbols(sections.get("Parameters", ""))),
        gives=_with_colons(sections.get("Returns", sections.get("Yields", ""))),
        refuses=_with_colons(sections.get("Raises", "")),
        valid=told.get("valid", ""),
        source=told.get("source", ""),
        code=_code(function, text),
        checks=checks,
    )


def _about(package: str) -> str:
    tree = ast.parse((_ROOT / package / "__init__.py").read_text())
    return (ast.get_docstring(tree) or "").split("\n\n")[0]


def _methods_of(package: str, checks: dict[str, tuple[Check, ...]]) -> Iterator[Method]:
    for path in sorted((_ROOT / package).glob("*.py")):
        text = path.read_text()
        module = f"skytiles.{package}.{path.stem}"
        for name, node in public_functions(ast.parse(text)):
            # What a test asks of a class it asks of its methods.
            known = checks.get(f"{module}.{name.split('.')[0]}", ())
            method = read_method(node, name=name, module=module, text=text, checks=known)
            if method.source:
                yield method


def public_functions(tree: ast.Module) -> Iterator[tuple[str, Described]]:
    """Functions, classes, and methods by class and name, that do not begin with a line."""
    for node in tree.body:
        if isinstance(node, ast.FunctionDef) and not node.name.startswith("_"):
            yield node.name, node
        if isinstance(node, ast.ClassDef) and not node.name.startswith("_"):
            yield node.name, node
            for inner in node.body:
                if isinstance(inner, ast.FunctionDef) and not inner.name.startswith("_"):
                    yield f"{node.name}.{inner.name}", inner


def _sections(doc: str) -> tuple[str, dict[str, str]]:
    """What stands before the first heading, and the text under each."""
    parts = _SECTION.split(doc)
    found = dict(zip(parts[1::2], parts[2::2], strict=True))
    return _plain(parts[0]), {title: _plain(text) for title, text in found.items()}


def _plain(text: str) -> str:
    """Without the paragraphs that have a word of their own."""
    kept = [part for part in text.strip("\n").split("\n\n") if not _mark_of(part)]
    return "\n\n".join(kept).strip("\n")


def _marked(doc: str) -> dict[str, str]:
    told: dict[str, str] = {}
    for part in doc.split("\n\n"):
        mark = _mark_of(part)
        if mark:
            words = " ".join(part.split(":", 1)[1].split())
            told[_MARKED[mark]] = f"{told.get(_MARKED[mark], '')} {words}".strip()
    return told


def _mark_of(part: str) -> str:
    word = part.lstrip().split(":", 1)[0]
    return word if word in _MARKED and ":" in part else ""


def _symbols(text: str) -> Iterator[Symbol]:
    """Entries begin at the margin; what is indented goes on with the one before."""
    entries: list[list[str]] = []
    for line in text.splitlines():
        if line and not line.startswith(" "):
            entries.append([line])
        elif entries and line.strip():
            entries[-1].append(line.strip())
    for entry in entries:
        name, _, meaning = " ".join(entry).partition(" : ")
        yield Symbol(name.strip(), _with_colons(meaning))


def _with_colons(text: str) -> str:
    """The gap of several blanks between a kind and its meaning becomes a colon."""
    return re.sub(r"(?<=\S) {2,}(?=\S)", ": ", text.strip())


def _code(function: Described, text: str) -> str:
    """The function's own lines, without its docstring."""
    lines = text.splitlines()
    body = function.body[1:] if ast.get_docstring(function) else function.body
    if not body:
        return ""
    head = lines[function.lineno - 1 : function.body[0].lineno - 1]
    # Comments above the first statement belong to it.
    first = (function.body[0].end_lineno or 0) if body is not function.body else body[0].lineno - 1
    return textwrap.dedent("\n".join([*head, *lines[first : function.end_lineno]]))


def _checks() -> dict[str, tuple[Check, ...]]:
    """Tests by the function that they call, with the published rows that they ask for."""
    found: dict[str, list[Check]] = {}
    sources = _published_sources()
    for path in sorted((_ROOT.parent / "tests" / "skytiles").rglob("test_*.py")):
        tree = ast.parse(path.read_text())
        imported = dict(_imported(tree))
        for node in tree.body:
            if isinstance(node, ast.FunctionDef) and node.name.startswith("test_"):
                for full_name in sorted(_called(node, imported)):
                    found.setdefault(full_name, []).append(_check(node, sources))
    return {name: tuple(claims) for name, claims in found.items()}


def _imported(tree: ast.Module) -> Iterator[tuple[str, str]]:
    for node in tree.body:
        if isinstance(node, ast.ImportFrom) and (node.module or "").startswith("skytiles."):
            for alias in node.names:
                yield alias.asname or alias.name, f"{node.module}.{alias.name}"


def _called(test: ast.FunctionDef, imported: dict[str, str]) -> set[str]:
    names = {node.id for node in ast.walk(test) if isinstance(node, ast.Name)}
    return {imported[name] for name in names & set(imported)}


def _check(test: ast.FunctionDef, sources: dict[str, str]) -> Check:
    """The test's name as a sentence, with the sources of the rows that it reads."""
    rows = [
        str(node.slice.value)
        for node in ast.walk(test)
        if isinstance(node, ast.Subscript)
        and getattr(node.value, "id", "") == "authority"
        and isinstance(node.slice, ast.Constant)
    ]
    claim = test.name.removeprefix("test_").replace("_", " ")
    return Check(claim, tuple(sources[row] for row in rows if row in sources))


def _published_sources() -> dict[str, str]:
    """Where each published value of fixtures/authority is from, and how far that was traced."""
    found = {}
    for path in sorted((_ROOT.parent / "fixtures" / "authority").glob("*.json")):
        for row in json.loads(path.read_text())["rows"]:
            found[row["id"]] = f"{row['source']} ({row['status']})"
    return found
