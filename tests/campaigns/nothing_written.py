"""What a refusal must leave as it was: every table, every sequence number, every uploaded file."""

import re
from contextlib import contextmanager
from pathlib import Path

from django.apps import apps
from django.conf import settings

from campaigns.models import Campaign

PARTS = {"type", "title", "status", "detail", "code", "advice"}
_SENTENCES = re.compile(r"\S.*[.!?]", re.DOTALL)


@contextmanager
def nothing_written():
    """Compare what is stored before and after."""
    before = stored()
    yield
    assert stored() == before


def stored():
    """Rows of every model, the campaigns' sequence numbers, and the uploads."""
    folder = Path(settings.UPLOADS)
    return {
        "rows": {model._meta.label: model.objects.count() for model in apps.get_models()},
        "seqs": dict(Campaign.objects.values_list("pk", "seq")),
        "uploads": sorted(path.name for path in folder.iterdir()) if folder.exists() else [],
    }


def check_problem(problem, *, code, detail, advice):
    """A problem in its one shape whose words say what is wrong and what to do."""
    assert problem.keys() >= PARTS
    assert problem["code"] == code
    for part, words in (("detail", detail), ("advice", advice)):
        said = problem[part]
        assert re.search(words, said), said
        assert _SENTENCES.fullmatch(said), said
        assert "upload " not in said.lower(), said
    assert problem["advice"][0].isupper()
    assert problem["advice"] not in problem["detail"]
