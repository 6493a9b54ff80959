"""Rules about imports. Each takes modules and returns one line for each breach."""

from tests.architecture.source_tree import PACKAGES, resolved

# Lower numbers know nothing of higher ones.
PACKAGE_RANK = {"skytiles": 0, "observers": 1, "campaigns": 2}
AREA_RANK = {
    "rules": 0,
    "models": 0,
    "errors": 0,
    "apps": 0,
    "problem_details": 1,
    "bridge": 1,
    "events": 1,
    "ingest": 2,
    "ledger_replica": 2,
    "selectors": 2,
    "actions": 3,
    # What runs actions without being asked by anybody.
    "background": 4,
    "ticker": 4,
    "api": 5,
    "live": 5,
    "pages": 5,
    "exports": 5,
    "rehearsal": 5,
    # What puts the parts together: settings, addresses, servers, commands.
    "project": 6,
    "management": 7,
}
EDGES = {"api", "live", "pages", "exports", "rehearsal"}
# Rules are pure: they judge plain values and science, nothing that holds state.
PURE_AREAS = {"rules"}
STATEFUL = ("django", "rest_framework", "channels", "observers.models", "campaigns.models")

DOORS = {
    "healpy": "skytiles.sphere.healpix_door",
    "astropy": "skytiles.sphere.astropy_door",
    "erfa": "skytiles.sphere.astropy_door",
}
# skytiles is numpy in, numpy out.
FORBIDDEN_IN_SKYTILES = (
    "django", "rest_framework", "channels", "asgiref", "observers", "campaigns", "requests",
    "httpx", "urllib.request", "socket", "sqlite3", "time", "random", "scipy.optimize", "os",
    "subprocess", "threading",
)  # fmt: skip
# Loaded at every start: they must not load the science, which costs seconds.
LOADED_AT_START = ("models", "apps")
MAY_IMPORT_LATE = {
    **dict.fromkeys(DOORS.values(), "they cost seconds"),
    "campaigns.project.set_up": "packages exist only after set-up",
    "campaigns.project.server": "the application is named by its address",
    "campaigns.live.visitor": "the session engine is named in the settings",
}
NO_SIGNALS = ("django.db.models.signals", "django.dispatch", "django.core.signals")


def upward_imports(modules):
    """Arrows that point up: between packages, and between the layers of an app."""
    names = {module.name for module in modules}
    for module, imported, target in _own_imports(modules, names):
        here, there = _rank(module.name), _rank(target)
        if there > here:
            yield _line(module, imported, "points up")


def edge_to_edge_imports(modules):
    """An edge that imports another edge."""
    names = {module.name for module in modules}
    for module, imported, target in _own_imports(modules, names):
        here, there = _area(module.name), _area(target)
        if here in EDGES and there in EDGES and here != there:
            yield _line(module, imported, "goes from edge to edge")


def import_cycles(modules):
    """Modules that import each other, in a circle of any length."""
    names = {module.name for module in modules}
    arrows = {name: set() for name in names}
    for module, _, target in _own_imports(modules, names):
        arrows[module.name].add(target)
    yield from (" -> ".join(circle) for circle in _circles(arrows))


def area_cycles(modules, package):
    """Folders of a package that import each other."""
    names = {module.name for module in modules}
    arrows = {}
    for module, _, target in _own_imports(modules, names):
        if module.name.startswith(package + ".") and target.startswith(package + "."):
            here, there = _area(module.name), _area(target)
            arrows.setdefault(there, set())
            if here != there:
                arrows.setdefault(here, set()).add(there)
    yield from (" -> ".join(circle) for circle in _circles(arrows))


def hidden_imports(modules):
    """Imports inside functions."""
    for module in modules:
        if not module.name.startswith(tuple(MAY_IMPORT_LATE)):
            for imported in module.imports:
                if imported.is_hidden:
                    yield _line(module, imported, "is hidden in a function")


def side_door_imports(modules):
    """healpy or astropy by another way than their doors, or at import time."""
    for module in modules:
        for imported in module.imports:
            door = DOORS.get(imported.target.partition(".")[0])
            if door and module.name != door:
                yield _line(module, imported, f"belongs in {door}")
            elif door and not imported.is_hidden and not imported.is_for_types:
                yield _line(module, imported, "costs seconds: import it inside the function")


def impure_science(modules):
    """Django, network, clock or hidden randomness in skytiles."""
    for module in modules:
        if module.name.startswith("skytiles"):
            for imported in module.imports:
                if _is_one_of(imported.target, FORBIDDEN_IN_SKYTILES):
                    yield _line(module, imported, "has no place in skytiles")


def impure_rules(modules):
    """Rules that know rows, requests or Django."""
    for module in modules:
        if _area(module.name) in PURE_AREAS:
            for imported in module.imports:
                if _is_one_of(imported.target, STATEFUL):
                    yield _line(module, imported, "makes a rule depend on state")


def science_at_start(modules):
    """Science imported by what every start loads."""
    for module in modules:
        if _area(module.name) in LOADED_AT_START or module.name.endswith("project.settings"):
            for imported in module.imports:
                if imported.target.startswith("skytiles"):
                    yield _line(module, imported, "loads science at every start")


def signal_imports(modules):
    """Model signals: an action calls the next function itself."""
    for module in modules:
        for imported in module.imports:
            if _is_one_of(imported.target, NO_SIGNALS):
                yield _line(module, imported, "is hidden control flow")


def unknown_areas(modules):
    """A folder of an app whose layer nobody has stated."""
    for module in modules:
        package, _, rest = module.name.partition(".")
        if package in {"observers", "campaigns"} and rest and _area(module.name) not in AREA_RANK:
            yield f"{module.path}: state the layer of {_area(module.name)} in AREA_RANK"


def _own_imports(modules, names):
    for module in modules:
        for imported in module.imports:
            if imported.is_for_types or imported.target.partition(".")[0] not in PACKAGES:
                continue
            target = resolved(imported.target, names)
            if target and target != module.name:
                yield module, imported, target


def _area(name):
    parts = name.split(".")
    return parts[1] if len(parts) > 1 else ""


def _rank(name):
    package = name.partition(".")[0]
    layer = 0 if package == "skytiles" else AREA_RANK.get(_area(name), 0)
    return PACKAGE_RANK[package] * 100 + layer


def _is_one_of(target, packages):
    return any(target == package or target.startswith(package + ".") for package in packages)


def _line(module, imported, what):
    return f"{module.path}:{imported.line}: import of {imported.target} {what}"


def _circles(arrows):
    """One circle for each knot of names that reach each other."""
    reach = {name: _reachable(arrows, name) for name in arrows}
    seen = set()
    for name in sorted(arrows):
        if name in reach[name] and name not in seen:
            knot = sorted(other for other in reach[name] if name in reach.get(other, ()))
            seen.update(knot)
            yield [*knot, knot[0]]


def _reachable(arrows, start):
    found, waiting = set(), list(arrows[start])
    while waiting:
        name = waiting.pop()
        if name not in found:
            found.add(name)
            waiting += arrows.get(name, ())
    return found
