"""A person (or a robotic observatory) with an account."""

from django.contrib.auth.base_user import AbstractBaseUser, BaseUserManager
from django.db import models
from django.db.models.functions import Lower


class Role(models.TextChoices):
    """What a person may do in a campaign that says nothing else of them."""

    COORDINATOR = "coordinator", "coordinator"
    OBSERVER = "observer", "observer"
    ONLOOKER = "onlooker", "onlooker"


class Person(AbstractBaseUser):
    """An account: a name, a password, a role. No e-mail is needed."""

    name = models.CharField(max_length=80, unique=True)
    role = models.CharField(max_length=12, choices=Role.choices, default=Role.OBSERVER)
    is_active = models.BooleanField(default=True)
    created_at = models.DateTimeField()

    objects = BaseUserManager()

    USERNAME_FIELD = "name"

    class Meta:
        constraints = [
            models.UniqueConstraint(Lower("name"), name="person_name_unique_in_any_case"),
        ]

    def __str__(self) -> str:
        return self.name
