"""What happened: sequenced events, and the answers already given."""

from django.db import models

from campaigns.models.campaign import Campaign
from observers.models import Person


class Event(models.Model):
    """One sequenced change of shared state, holding only what an onlooker may see."""

    campaign = models.ForeignKey(Campaign, on_delete=models.CASCADE, related_name="events")
    seq = models.PositiveBigIntegerField()
    kind = models.CharField(max_length=40)
    at = models.DateTimeField()
    payload = models.JSONField()

    class Meta:
        ordering = ["campaign", "seq"]
        constraints = [
            models.UniqueConstraint(fields=["campaign", "seq"], name="event_seq_once"),
        ]

    def __str__(self) -> str:
        return f"{self.seq} {self.kind}"


class IdempotencyKey(models.Model):
    """The answer given to a keyed request, stored in the transaction of what it did."""

    person = models.ForeignKey(Person, on_delete=models.CASCADE)
    operation = models.CharField(max_length=40)
    key = models.UUIDField()
    body_sha256 = models.CharField(max_length=64)
    status = models.PositiveSmallIntegerField()
    answer = models.JSONField()
    made_at = models.DateTimeField()

    class Meta:
        constraints = [
            models.UniqueConstraint(
                fields=["person", "operation", "key"], name="idempotency_key_once"
            ),
        ]

    def __str__(self) -> str:
        return f"{self.operation} {self.key}"
