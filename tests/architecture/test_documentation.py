"""The documentation names what exists, and what it names exists."""

import ast
import re

import pytest
from django.conf import settings
from django.core.management import get_commands
from django.urls import URLPattern, get_resolver
from drf_spectacular.generators import SchemaGenerator

from campaigns.events.kinds import KINDS
from tests.architecture.source_tree import ROOT

# Read on the first line of manage.py, before there is any Django.
COMMANDS_OF_MANAGE = {"test"}
OUR_APPS = {"campaigns", "observers"}
_FOLDERS = ("skytiles", "observers", "campaigns", "static", "fixtures", "tests")
# Made by set-up, never in the repository.
_MADE = ("static/dist", "static/node_modules")


@pytest.fixture(scope="module")
def developers():
    return (ROOT / "DEVELOPERS.md").read_text()


@pytest.fixture(scope="module")
def openapi():
    return SchemaGenerator().get_schema(request=None, public=True)


def missing_words(words, text):
    """Words that a text does not name, as whole words."""
    return [
        word
        for word in words
        if not re.search(rf"(?<![\w.-]){re.escape(word)}(?![\w-]|\.\w)", text)
    ]


def our_commands():
    return {name for name, app in get_commands().items() if app in OUR_APPS} | COMMANDS_OF_MANAGE


def our_tunables():
    """Settings of our own, not Django's and not another package's."""
    return [name for name in dir(settings) if name.startswith(("LIVE_", "QUARTERSKY_"))]


def addresses(patterns, prefix=""):
    """Every address of the server, as it is written in the URL tables."""
    for pattern in patterns:
        address = prefix + str(pattern.pattern)
        if isinstance(pattern, URLPattern):
            yield address
        else:
            yield from addresses(pattern.url_patterns, address)


def as_openapi(address):
    return "/" + re.sub(r"<(?:\w+:)?(\w+)>", r"{\1}", address)


def named_paths(text):
    """What a text in backticks names as a file or folder of this repository."""
    quoted = re.findall(r"`([\w./-]+)`", text)
    return [path for path in quoted if path.split("/")[0] in _FOLDERS and "/" in path]


def environment_reads():
    """Names that the settings read from the environment."""
    tree = ast.parse((ROOT / "campaigns/project/settings.py").read_text())
    for node in ast.walk(tree):
        if isinstance(node, ast.Call) and isinstance(node.func, ast.Attribute):
            owner = getattr(node.func.value, "id", "")
            if owner in {"env", "environ"} and node.args and isinstance(node.args[0], ast.Constant):
                yield node.args[0].value


def test_every_environment_variable_is_named(developers):
    assert missing_words(settings.ENVIRONMENT, developers) == []


def test_the_settings_read_what_they_declare():
    assert set(environment_reads()) == set(settings.ENVIRONMENT)


def test_every_tunable_of_ours_is_named(developers):
    assert missing_words(our_tunables(), developers) == []


def test_every_command_is_named(developers):
    assert missing_words(our_commands(), developers) == []


def test_every_kind_of_event_is_named(developers):
    assert missing_words(KINDS, developers) == []


def test_every_endpoint_of_the_api_is_in_the_openapi_text(openapi):
    api = [
        as_openapi(address)
        for address in addresses(get_resolver().url_patterns)
        if address.startswith("api/v1/")
    ]
    assert api
    assert [address for address in api if address not in openapi["paths"]] == []


def test_every_other_address_is_named(developers):
    others = [
        "/" + re.sub(r"<(?:\w+:)?\w+>", "<id>", address)
        for address in addresses(get_resolver().url_patterns)
        if not address.startswith("api/v1/") and "<path:" not in address
    ]
    plain = re.sub(r"<\w+>", "<id>", developers)
    assert [address for address in others if f"`{address}`" not in plain] == []
    assert "/live/campaigns/<id>/" in plain


@pytest.mark.parametrize("page", ["README.md", "DEVELOPERS.md"])
def test_every_file_that_is_named_exists(page):
    paths = [path for path in named_paths((ROOT / page).read_text()) if not path.startswith(_MADE)]
    assert [path for path in paths if not (ROOT / path).exists()] == []


@pytest.mark.parametrize("page", ["README.md", "DEVELOPERS.md"])
def test_every_command_that_is_named_exists(page):
    named = set(re.findall(r"manage\.py (\w+)", (ROOT / page).read_text()))
    assert named - our_commands() == set()


def test_a_word_that_is_not_named_is_found():
    assert missing_words(["plan.made", "plan"], "`plan.made` and plans") == ["plan"]
    assert missing_words(["LIVE_POLL_S"], "LIVE_POLL_SECONDS") == ["LIVE_POLL_S"]


def test_a_file_that_does_not_exist_is_found():
    assert named_paths("see `skytiles/night/` and `campaigns/gone.py` and `x/y`") == [
        "skytiles/night/",
        "campaigns/gone.py",
    ]


def test_an_address_is_written_as_openapi_writes_it():
    assert as_openapi("api/v1/campaigns/<str:campaign_id>/frames/<int:number>") == (
        "/api/v1/campaigns/{campaign_id}/frames/{number}"
    )
