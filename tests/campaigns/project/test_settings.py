import re
import stat
from pathlib import Path

import pytest
from django.conf import settings
from django.core.checks import run_checks

from campaigns.project.secret_key import read_or_make_secret_key


def test_the_key_is_made_once_and_read_by_its_owner_only(tmp_path):
    path = tmp_path / "new" / "secret-key"
    key = read_or_make_secret_key(path)
    assert len(key) >= 50
    assert read_or_make_secret_key(path) == key
    assert stat.S_IMODE(path.stat().st_mode) == 0o600


def test_an_empty_key_file_is_refused(tmp_path, monkeypatch):
    monkeypatch.setattr("campaigns.project.secret_key._WAIT_S", 0.1)
    path = tmp_path / "secret-key"
    path.touch()
    with pytest.raises(RuntimeError, match="delete it"):
        read_or_make_secret_key(path)


def test_the_environment_is_read_in_one_file_and_every_variable_is_listed():
    source = Path(settings.ROOT, "campaigns/project/settings.py").read_text()
    read = set(re.findall(r'env\.\w+\(\s*"(\w+)"', source))
    assert read == set(settings.ENVIRONMENT)


def test_sqlite_takes_its_turn_before_it_reads_and_survives_a_power_failure():
    database = settings.DATABASES["default"]
    if "sqlite" not in database["ENGINE"]:
        pytest.skip("another database")
    assert database["OPTIONS"]["transaction_mode"] == "IMMEDIATE"
    assert "synchronous=FULL" in database["OPTIONS"]["init_command"]
    assert "journal_mode=WAL" in database["OPTIONS"]["init_command"]
    assert database["OPTIONS"]["timeout"] == 20


def test_django_finds_nothing_wrong():
    assert run_checks() == []
