"""Names, lengths, errors, docstrings. Every check is shown to fail on a made-up breach."""

import pytest

from tests.architecture import style_checks as checks
from tests.architecture.source_tree import ROOT, made_up_modules, read_modules

_FOLDERS = ("skytiles", "observers", "campaigns", "static/src", "tests", "fixtures")
_KINDS = {".py", ".js", ".css", ".html"}
_MADE_BY_PROGRAMS = {"migrations", "__pycache__", "node_modules", "dist"}


@pytest.fixture(scope="module")
def modules():
    return read_modules()


@pytest.fixture(scope="module")
def written_files():
    """{path: text} of every file that people write."""
    paths = [path for folder in _FOLDERS for path in sorted((ROOT / folder).rglob("*"))]
    return {
        str(path.relative_to(ROOT)): path.read_text()
        for path in paths
        if path.suffix in _KINDS and not _MADE_BY_PROGRAMS & set(path.parts)
    }


@pytest.mark.parametrize(
    "check",
    [
        checks.catch_alls,
        checks.environment_reads,
        checks.unsectioned_docstrings,
        checks.positional_switches,
        checks.crowded_signatures,
    ],
    ids=lambda check: check.__name__,
)
def test_the_sources_keep_the_rule(modules, check):
    assert list(check(modules)) == []


def test_no_file_is_longer_than_a_reader_can_hold(written_files):
    assert list(checks.long_files(written_files)) == []


def test_every_name_says_what_is_inside(written_files):
    assert list(checks.empty_names(written_files)) == []


GOOD_DOCSTRING = '''
def f(ras_deg: Floats, *, name: str) -> Floats:
    """What it is.

    Parameters
    ----------
    ras_deg : (n,) float    degrees
    name : str              a name

    Returns
    -------
    (n,) float    degrees
    """
'''
BREACHES = {
    "every exception is caught": (
        checks.catch_alls,
        "try:\n    pass\nexcept Exception:\n    pass",
    ),
    "everything is caught": (checks.catch_alls, "try:\n    pass\nexcept:\n    pass"),
    "every exception among others": (
        checks.catch_alls,
        "try:\n    pass\nexcept (OSError, Exception):\n    pass",
    ),
    "the environment is read": (checks.environment_reads, "import os\nx = os.environ['X']"),
    "the environment is asked": (checks.environment_reads, "import os\nx = os.getenv('X')"),
    "no docstring": (checks.unsectioned_docstrings, "def f():\n    pass"),
    "a parameter without a word": (
        checks.unsectioned_docstrings,
        GOOD_DOCSTRING.replace("name : str", "nome : str"),
    ),
    "an array without a shape": (
        checks.unsectioned_docstrings,
        GOOD_DOCSTRING.replace("ras_deg : (n,) float", "ras_deg : float"),
    ),
    "no word about the answer": (
        checks.unsectioned_docstrings,
        GOOD_DOCSTRING.replace("Returns", "Remarks"),
    ),
    "an answer without a shape": (
        checks.unsectioned_docstrings,
        GOOD_DOCSTRING.replace('    (n,) float    degrees\n    "', '    float    degrees\n    "'),
    ),
    "a switch by position": (checks.positional_switches, "def f(a, is_on: bool = True):\n    pass"),
    "many parameters by position": (
        checks.crowded_signatures,
        "def f(a, b, c, d, e, f, g):\n    pass",
    ),
}


@pytest.mark.parametrize("name", BREACHES)
def test_a_breach_is_found(name):
    check, text = BREACHES[name]
    assert len(list(check(made_up_modules({"skytiles.a": text})))) == 1


def test_a_good_docstring_passes():
    assert (
        list(checks.unsectioned_docstrings(made_up_modules({"skytiles.a": GOOD_DOCSTRING}))) == []
    )


def test_a_long_file_is_found():
    assert len(list(checks.long_files({"a.py": "\n" * 351, "b.py": "\n" * 350}))) == 1


@pytest.mark.parametrize(
    "path", ["campaigns/utils.py", "static/src/draw/helpers.js", "observers/site_manager.py"]
)
def test_a_name_that_says_nothing_is_found(path):
    assert len(list(checks.empty_names([path, "campaigns/management/json_command.py"]))) == 1
