"""A campaign: one alert, one region, many observers."""

from django.db import models

from observers.models import Person


class CampaignStatus(models.TextChoices):
    """A campaign is draft, live or closed."""

    DRAFT = "draft", "draft"
    LIVE = "live", "live"
    CLOSED = "closed", "closed"


class Campaign(models.Model):
    """What everybody works on together. `seq` numbers its events."""

    id = models.CharField(primary_key=True, max_length=40)
    title = models.CharField(max_length=120)
    status = models.CharField(
        max_length=8, choices=CampaignStatus.choices, default=CampaignStatus.DRAFT
    )
    is_rehearsal = models.BooleanField(default=False)
    # Onlookers without an account may watch.
    is_public = models.BooleanField(default=False)
    alert_id = models.CharField(max_length=120, blank=True)
    kind = models.CharField(max_length=80, blank=True)
    event_time = models.DateTimeField()
    source_model = models.JSONField()
    seq = models.PositiveBigIntegerField(default=0)
    planned_seq = models.PositiveBigIntegerField(default=0)
    # Last sequence number at which region or source model changed: older ledgers are void.
    ledger_base_seq = models.PositiveBigIntegerField(default=0)
    # A rehearsal's driver moves this clock; empty: the real one.
    clock_now = models.DateTimeField(null=True, blank=True)
    made_by = models.ForeignKey(Person, on_delete=models.PROTECT, related_name="campaigns_made")
    made_at = models.DateTimeField()
    opened_at = models.DateTimeField(null=True, blank=True)
    closed_at = models.DateTimeField(null=True, blank=True)

    class Meta:
        ordering = ["-made_at", "id"]

    def __str__(self) -> str:
        return self.title


class Membership(models.Model):
    """Somebody's part in one campaign."""

    class Status(models.TextChoices):
        """What a member last said."""

        SILENT = "silent", "silent"
        IN = "in", "in"
        CLOUDED = "clouded", "clouded"
        OUT = "out", "out"

    campaign = models.ForeignKey(Campaign, on_delete=models.CASCADE, related_name="memberships")
    person = models.ForeignKey(Person, on_delete=models.CASCADE, related_name="memberships")
    # Empty: the person's own role.
    role = models.CharField(max_length=12, blank=True)
    status = models.CharField(max_length=8, choices=Status.choices, default=Status.SILENT)
    joined_at = models.DateTimeField()

    class Meta:
        ordering = ["id"]
        constraints = [
            models.UniqueConstraint(
                fields=["campaign", "person"], name="membership_once_per_campaign"
            ),
        ]

    def __str__(self) -> str:
        return f"{self.person_id} in {self.campaign_id}"
