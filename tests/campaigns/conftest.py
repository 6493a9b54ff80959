import pytest

from campaigns.ledger_replica import drop_replicas
from observers.models import Role
from tests.campaigns import stage


@pytest.fixture(autouse=True)
def uploads(settings, tmp_path):
    settings.UPLOADS = tmp_path / "uploads"
    settings.COMPUTED = tmp_path / "computed"


@pytest.fixture(autouse=True)
def no_replicas():
    """Every test has a database of its own: what a process remembers ends with it."""
    drop_replicas()


@pytest.fixture
def coordinator(db):
    return stage.make_person("Coordinator Cleo", Role.COORDINATOR)


@pytest.fixture
def camera(db):
    """The camera of an observer in Europe."""
    return stage.make_observer("Observer Ada")


@pytest.fixture
def other_camera(db):
    """The same kind of camera, somebody else's."""
    return stage.make_observer("Observer Ben")


@pytest.fixture
def campaign(coordinator, camera, other_camera):
    """A live campaign with two observers."""
    return stage.launch(coordinator)
