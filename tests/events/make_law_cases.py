"""Record the law of events from the real actions: python tests/events/make_law_cases.py

Every case is what an action did: the state before, its events, the state after. Python and
JavaScript apply the events of tests/events/law-cases.json to `before` and compare with `after`.
"""

import importlib
import json
import os
import sys
import tempfile
from pathlib import Path

import django
from django.core.management import call_command

ROOT = Path(__file__).resolve().parents[2]
FILE = Path(__file__).with_name("law-cases.json")


def main():
    """Write the file from a database of its own."""
    with tempfile.TemporaryDirectory() as folder:
        os.environ["QUARTERSKY_DATA"] = folder
        os.environ["DATABASE_URL"] = f"sqlite:///{folder}/law.sqlite3"
        os.environ["DJANGO_SETTINGS_MODULE"] = "campaigns.project.settings"
        sys.path.insert(0, str(ROOT))
        django.setup()
        call_command("migrate", verbosity=0)
        cases = importlib.import_module("tests.events.law_play").record_cases()
    # One case a line: a change shows in a diff without drowning it.
    lines = ",\n".join(json.dumps(case, separators=(",", ":")) for case in cases)
    FILE.write_text(f"[\n{lines}\n]\n")
    print(f"{len(cases)} cases in {FILE.relative_to(ROOT)}")  # noqa: T201


if __name__ == "__main__":
    main()
