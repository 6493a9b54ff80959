"""The arrows between the parts. Every check is shown to fail on a made-up breach."""

import pytest

from tests.architecture import import_checks as checks
from tests.architecture.source_tree import made_up_modules, read_modules


@pytest.fixture(scope="module")
def modules():
    return read_modules()


@pytest.mark.parametrize(
    "check",
    [
        checks.upward_imports,
        checks.edge_to_edge_imports,
        checks.import_cycles,
        checks.hidden_imports,
        checks.side_door_imports,
        checks.impure_science,
        checks.impure_rules,
        checks.science_at_start,
        checks.signal_imports,
        checks.unknown_areas,
    ],
    ids=lambda check: check.__name__,
)
def test_the_sources_keep_the_rule(modules, check):
    assert list(check(modules)) == []


@pytest.mark.parametrize("package", ["skytiles", "observers", "campaigns"])
def test_folders_do_not_import_each_other_in_a_circle(modules, package):
    # Selectors read the ledger replica, which reads the database through selectors: one layer.
    known = {("ledger_replica", "selectors")}
    found = [
        circle
        for circle in checks.area_cycles(modules, package)
        if tuple(circle.split(" -> ")[:-1]) not in known
    ]
    assert found == []


BREACHES = {
    "science imports an app": (
        checks.upward_imports,
        {"skytiles.a": "import observers.models", "observers.models": ""},
    ),
    "observers imports campaigns": (
        checks.upward_imports,
        {"observers.actions.a": "from campaigns.errors import E", "campaigns.errors": ""},
    ),
    "a selector imports an action": (
        checks.upward_imports,
        {"campaigns.selectors.a": "from campaigns.actions import b", "campaigns.actions.b": ""},
    ),
    "an action imports an edge": (
        checks.upward_imports,
        {"campaigns.actions.a": "import campaigns.live.hub", "campaigns.live.hub": ""},
    ),
    "a relative import points up": (
        checks.upward_imports,
        {"campaigns.rules.a": "from ..actions import b", "campaigns.actions.b": ""},
    ),
    "an edge imports an edge": (
        checks.edge_to_edge_imports,
        {"campaigns.api.a": "from campaigns.live.hub import Hub", "campaigns.live.hub": ""},
    ),
    "two modules import each other": (
        checks.import_cycles,
        {"skytiles.a": "import skytiles.b", "skytiles.b": "from skytiles.a import x"},
    ),
    "three modules import each other": (
        checks.import_cycles,
        {
            "skytiles.a": "import skytiles.b",
            "skytiles.b": "import skytiles.c",
            "skytiles.c": "import skytiles.a",
        },
    ),
    "an import is hidden in a function": (
        checks.hidden_imports,
        {"campaigns.actions.a": "def f():\n    import json"},
    ),
    "an import is hidden in a method": (
        checks.hidden_imports,
        {"campaigns.actions.a": "class A:\n    async def f(self):\n        from json import dumps"},
    ),
    "an import is hidden in a call": (
        checks.hidden_imports,
        {"campaigns.actions.a": "import importlib\nx = importlib.import_module('json')"},
    ),
    "healpy by a side door": (checks.side_door_imports, {"skytiles.tiling.a": "import healpy"}),
    "astropy by a side door": (
        checks.side_door_imports,
        {"campaigns.ingest.a": "from astropy.io import fits"},
    ),
    "a door that opens at start": (
        checks.side_door_imports,
        {"skytiles.sphere.healpix_door": "import healpy"},
    ),
    "Django in the science": (
        checks.impure_science,
        {"skytiles.a": "from django.db import models"},
    ),
    "a clock in the science": (checks.impure_science, {"skytiles.a": "import time"}),
    "a rule that reads rows": (
        checks.impure_rules,
        {"campaigns.rules.a": "from campaigns.models import Frame"},
    ),
    "science in a model": (
        checks.science_at_start,
        {"observers.models.a": "from skytiles.night import Place"},
    ),
    "a signal": (
        checks.signal_imports,
        {"campaigns.models.a": "from django.db.models.signals import post_save"},
    ),
    "a folder without a layer": (checks.unknown_areas, {"campaigns.misc.a": ""}),
}


@pytest.mark.parametrize("name", BREACHES)
def test_a_breach_is_found(name):
    check, texts = BREACHES[name]
    assert len(list(check(made_up_modules(texts)))) == 1


def test_folders_in_a_circle_are_found():
    texts = {
        "skytiles.night.a": "import skytiles.depth.b",
        "skytiles.depth.b": "",
        "skytiles.depth.c": "import skytiles.night.d",
        "skytiles.night.d": "",
    }
    assert list(checks.area_cycles(made_up_modules(texts), "skytiles")) == [
        "depth -> night -> depth"
    ]


def test_imports_for_types_alone_draw_no_arrow():
    text = "from typing import TYPE_CHECKING\nif TYPE_CHECKING:\n    import campaigns.api.b"
    texts = {"campaigns.actions.a": text, "campaigns.api.b": ""}
    assert list(checks.upward_imports(made_up_modules(texts))) == []
