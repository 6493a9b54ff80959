"""Published values, and the rule that the science never goes to the network."""

import json
import socket
from pathlib import Path

import pytest

_TABLES = Path(__file__).resolve().parents[2] / "fixtures" / "authority"


@pytest.fixture(scope="session")
def authority():
    """Rows of fixtures/authority by their id; each carries its source and status."""
    tables = [json.loads(path.read_text()) for path in sorted(_TABLES.glob("*.json"))]
    return {row["id"]: row for table in tables for row in table["rows"]}


@pytest.fixture
def no_network(monkeypatch):
    """Every attempt to open a connection fails."""

    def refuse(*_args, **_kwargs):
        raise OSError("the science asked for the network")

    monkeypatch.setattr(socket.socket, "connect", refuse)
    monkeypatch.setattr(socket, "create_connection", refuse)
    monkeypatch.setattr(socket, "getaddrinfo", refuse)
