"""The Django app of people, sites and instruments."""

from django.apps import AppConfig


class ObserversConfig(AppConfig):
    """People, their sites and their instruments."""

    name = "observers"
    default_auto_field = "django.db.models.BigAutoField"
