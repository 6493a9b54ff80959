"""python tests/campaigns/run_contest.py NAME N: one contest, its outcome as JSON.

A process of its own, because the tests' database lives in memory and belongs to one thread.
"""

import importlib
import json
import os
import sys
from pathlib import Path

import django
from django.core.management import call_command

ROOT = Path(__file__).resolve().parents[2]

if __name__ == "__main__":
    os.environ["DJANGO_SETTINGS_MODULE"] = "campaigns.project.settings"
    sys.path.insert(0, str(ROOT))
    django.setup()
    call_command("migrate", verbosity=0)
    contest = getattr(importlib.import_module("tests.campaigns.contest"), sys.argv[1])
    print(json.dumps(contest(int(sys.argv[2]))))  # noqa: T201
