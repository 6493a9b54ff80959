import pytest
from django.core.cache import cache
from django.utils import timezone

from observers.models import Person, Role

PASSWORD = "a dark clear night"


@pytest.fixture(autouse=True)
def _no_attempts_before():
    cache.clear()


@pytest.fixture
def make_person(db):
    def make(name, role=Role.OBSERVER):
        person = Person(name=name, role=role, created_at=timezone.now())
        person.set_password(PASSWORD)
        person.save()
        return person

    return make


@pytest.fixture
def coordinator(make_person):
    return make_person("Ada Merken", Role.COORDINATOR)


@pytest.fixture
def observer(make_person):
    return make_person("Jon Veld")


@pytest.fixture
def onlooker(make_person):
    return make_person("Mira Sol", Role.ONLOOKER)


@pytest.fixture(autouse=True)
def _quick_passwords(settings):
    settings.PASSWORD_HASHERS = ["django.contrib.auth.hashers.MD5PasswordHasher"]
