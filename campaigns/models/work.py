"""Who does what: plans, offers, claims."""

from django.db import models

from campaigns.models.campaign import Campaign
from campaigns.models.region import Tile
from observers.models import Instrument, Person


class Plan(models.Model):
    """One run of the planner and what it promises."""

    campaign = models.ForeignKey(Campaign, on_delete=models.CASCADE, related_name="plans")
    made_at = models.DateTimeField()
    planned_seq = models.PositiveBigIntegerField()
    searched_expected = models.FloatField()
    searched_bound = models.FloatField()
    certificate = models.FloatField()
    n_observers = models.PositiveIntegerField()
    n_assignments = models.PositiveIntegerField()
    seconds = models.FloatField()
    # [{"observer": id, "reason": text}]: who got nothing, and why.
    unassigned = models.JSONField(default=list)

    class Meta:
        ordering = ["campaign", "id"]

    def __str__(self) -> str:
        return f"plan {self.pk} of {self.campaign_id}"


class Offer(models.Model):
    """Observer, tile and start proposed by the newest plan."""

    plan = models.ForeignKey(Plan, on_delete=models.CASCADE, related_name="offers")
    person = models.ForeignKey(Person, on_delete=models.CASCADE)
    instrument = models.ForeignKey(Instrument, on_delete=models.CASCADE)
    tile = models.ForeignKey(Tile, on_delete=models.CASCADE)
    starts_at = models.DateTimeField()
    ends_at = models.DateTimeField()
    # Expected increase of searched.
    gain = models.FloatField()

    class Meta:
        ordering = ["plan", "starts_at", "id"]

    def __str__(self) -> str:
        return f"offer {self.pk}"


class Claim(models.Model):
    """One observer's promise to shoot one tile until a stated time: a lease."""

    class State(models.TextChoices):
        """Held, then met, released or lapsed."""

        HELD = "held", "held"
        MET = "met", "met"
        RELEASED = "released", "released"
        LAPSED = "lapsed", "lapsed"

    campaign = models.ForeignKey(Campaign, on_delete=models.CASCADE, related_name="claims")
    tile = models.ForeignKey(Tile, on_delete=models.CASCADE, related_name="claims")
    seat = models.PositiveSmallIntegerField(default=1)
    person = models.ForeignKey(Person, on_delete=models.CASCADE, related_name="claims")
    instrument = models.ForeignKey(Instrument, on_delete=models.PROTECT, related_name="claims")
    state = models.CharField(max_length=8, choices=State.choices, default=State.HELD)
    held_at = models.DateTimeField()
    starts_at = models.DateTimeField()
    until = models.DateTimeField()
    ended_at = models.DateTimeField(null=True, blank=True)

    class Meta:
        ordering = ["id"]
        constraints = [
            models.UniqueConstraint(
                fields=["tile", "seat"],
                condition=models.Q(state="held"),
                name="claim_one_holder_per_seat",
            ),
        ]
        indexes = [
            models.Index(fields=["campaign", "state", "until"], name="claim_by_end"),
        ]

    def __str__(self) -> str:
        return f"claim {self.pk} on tile {self.tile_id}"
