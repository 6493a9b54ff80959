"""The Django app of campaigns."""

from django.apps import AppConfig


class CampaignsConfig(AppConfig):
    """Alerts, campaigns, claims, frames and what happens to them."""

    name = "campaigns"
    default_auto_field = "django.db.models.BigAutoField"
