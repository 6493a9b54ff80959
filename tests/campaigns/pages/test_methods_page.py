"""The methods page says what the code says: held against the imported modules."""

import ast
import importlib
import inspect
import pkgutil
import re

import pytest
from django.test import Client

import skytiles
from campaigns.selectors.methods import list_methods, read_method

pytestmark = pytest.mark.django_db

METHODS = {f"{m.module}.{m.name}": m for chapter in list_methods() for m in chapter.methods}


def described_objects():
    """Public functions, classes and methods of skytiles with a source in their docstring."""
    for found in pkgutil.walk_packages(skytiles.__path__, "skytiles."):
        module = importlib.import_module(found.name)
        for name, given in vars(module).items():
            # What is kept in a cache is still the function.
            thing = inspect.unwrap(given) if callable(given) else given
            if name.startswith("_") or getattr(thing, "__module__", "") != found.name:
                continue
            if inspect.isfunction(thing) or inspect.isclass(thing):
                yield f"{found.name}.{name}", thing
            if inspect.isclass(thing):
                for inner, function in vars(thing).items():
                    if inspect.isfunction(function) and not inner.startswith("_"):
                        yield f"{found.name}.{name}.{inner}", function


DESCRIBED = {
    name: thing
    for name, thing in described_objects()
    # Errors are no method.
    if thing.__module__ != "skytiles.errors"
    and re.search(r"^Source:", inspect.getdoc(thing) or "", re.M)
}


def words(text):
    return " ".join(text.split())


def test_every_public_function_with_a_source_stands_on_the_page_and_nothing_else():
    assert len(DESCRIBED) > 150
    assert set(METHODS) == set(DESCRIBED)


@pytest.mark.parametrize("name", sorted(DESCRIBED))
def test_purpose_source_symbols_and_code_are_those_of_the_function(name):
    method, thing = METHODS[name], DESCRIBED[name]
    doc = inspect.getdoc(thing)
    assert method.purpose == words(doc.split("\n\n")[0])
    assert method.source in words(doc.split("Source:", 1)[1])
    assert method.formula in words(doc)
    if inspect.isfunction(thing):
        told = {name for symbol in method.symbols for name in re.split(r"[, ]+", symbol.name)}
        asked = set(inspect.signature(thing).parameters) - {"self", "cls"}
        assert asked <= told or "." in name.removeprefix(thing.__module__ + ".")
    last = [line for line in inspect.getsource(thing).splitlines() if line.strip()][-1]
    assert method.code.splitlines()[-1].strip() == last.strip()


def test_a_changed_word_changes_the_page():
    text = '''
def area_deg2(width_deg: float) -> float:
    """Area of a square.

    Parameters
    ----------
    width_deg : float    side, degrees,
        above 0

    Returns
    -------
    float    square degrees

    Raises
    ------
    ValueError    never

    Formula: A = w^2.

    Valid: small squares.

    Source: Euclid, Elements, book 1.
    """
    return width_deg**2
'''

    def read(source):
        return read_method(ast.parse(source).body[0], name="area_deg2", module="m", text=source)

    method = read(text)
    assert (method.purpose, method.formula) == ("Area of a square.", "A = w^2.")
    assert method.symbols[0].meaning == "float: side, degrees, above 0"
    assert method.gives == "float: square degrees"
    assert method.refuses == "ValueError: never"
    assert method.valid == "small squares."
    assert method.code.splitlines() == [
        "def area_deg2(width_deg: float) -> float:",
        "    return width_deg**2",
    ]
    assert read(text.replace("book 1", "book 2")).source.endswith("book 2.")
    assert "**3" in read(text.replace("**2", "**3")).code


def test_published_checks_are_named_with_their_source():
    checks = METHODS["skytiles.night.airmass.airmass"].checks
    assert any("Kasten & Young 1989" in source for check in checks for source in check.against)


def test_everybody_may_read_it_and_it_runs_no_script_of_its_own():
    answer = Client().get("/methods/")
    assert answer.status_code == 200
    page = answer.content.decode()
    assert "Krisciunas &amp; Schaefer 1991" in page
    assert page.count('class="panel stack method"') == len(METHODS)
    assert len(set(re.findall(r'id="([^"]+)"', page))) == len(re.findall(r'id="([^"]+)"', page))
    scripts = re.findall(r"<script[^>]*>(.*?)</script>", page, re.S)
    assert not any(script.strip() for script in scripts)
    assert "style=" not in page
    assert 'href="/methods/"' in Client().get("/sign-in/").content.decode()
