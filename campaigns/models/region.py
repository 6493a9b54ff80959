"""Direction information and the region made of it."""

from django.db import models

from campaigns.models.campaign import Campaign
from observers.models import Person


class Constraint(models.Model):
    """One piece of direction information, as read. None is ever deleted."""

    class Ending(models.TextChoices):
        """Why it counts no more, for good."""

        NONE = "", "in use or switched off"
        REPLACED = "replaced", "replaced"
        RETRACTED = "retracted", "retracted"

    campaign = models.ForeignKey(Campaign, on_delete=models.CASCADE, related_name="constraints")
    position = models.PositiveSmallIntegerField()
    kind = models.CharField(max_length=20)
    # Everything but a map: JSON as in an alert file.
    parameters = models.JSONField(default=dict)
    # A map file: its SHA-256 under the uploads folder.
    upload_sha256 = models.CharField(max_length=64, blank=True)
    is_on = models.BooleanField(default=True)
    # The message that it came with: what it calls itself, and when it says that it happened.
    label = models.CharField(max_length=120, blank=True)
    message_time = models.DateTimeField(null=True, blank=True)
    # A coordinator said that it belongs to the event although the times are far apart.
    is_apart_confirmed = models.BooleanField(default=False)
    added_at = models.DateTimeField(null=True, blank=True)
    ending = models.CharField(
        max_length=10, choices=Ending.choices, default=Ending.NONE, blank=True
    )
    ended_at = models.DateTimeField(null=True, blank=True)

    class Meta:
        ordering = ["campaign", "position"]
        constraints = [
            models.UniqueConstraint(
                fields=["campaign", "position"], name="constraint_position_once"
            ),
        ]

    def __str__(self) -> str:
        return f"{self.kind} {self.position} of {self.campaign_id}"


class RegionRevision(models.Model):
    """The product of the constraints on pixels of one order. Arrays are little-endian bytes."""

    campaign = models.ForeignKey(Campaign, on_delete=models.CASCADE, related_name="regions")
    revision = models.PositiveIntegerField()
    order = models.PositiveSmallIntegerField()
    # (p,) int64, HEALPix NESTED, ascending.
    pixels = models.BinaryField()
    # (p,) float64.
    probabilities = models.BinaryField()
    outside = models.FloatField()
    area_deg2 = models.JSONField()
    peak = models.JSONField()
    notes = models.JSONField(default=list)
    # How well the constraint that fits least agrees with the others; empty for a single one.
    overlap = models.FloatField(null=True, blank=True)
    # Positions of the constraints that it is the product of.
    constraints_on = models.JSONField(default=list)
    # What changed since the revision before, as everybody is told; empty at launch.
    change = models.JSONField(null=True, blank=True)
    made_by = models.ForeignKey(
        Person, null=True, blank=True, on_delete=models.PROTECT, related_name="regions_made"
    )
    made_at = models.DateTimeField()

    class Meta:
        ordering = ["campaign", "revision"]
        constraints = [
            models.UniqueConstraint(fields=["campaign", "revision"], name="region_revision_once"),
        ]

    def __str__(self) -> str:
        return f"region {self.revision} of {self.campaign_id}"


class Tile(models.Model):
    """The patch of sky that one frame of one size fills."""

    campaign = models.ForeignKey(Campaign, on_delete=models.CASCADE, related_name="tiles")
    number = models.PositiveIntegerField()
    ra_deg = models.FloatField()
    dec_deg = models.FloatField()
    # The sides of the tile grid: equal sides mean the same grid.
    width_deg = models.FloatField()
    height_deg = models.FloatField()
    probability = models.FloatField()
    seats = models.PositiveSmallIntegerField(default=1)
    # A revision left (almost) nothing of the region in it; number, claims and frames stay.
    is_dropped = models.BooleanField(default=False)

    class Meta:
        ordering = ["campaign", "number"]
        constraints = [
            models.UniqueConstraint(fields=["campaign", "number"], name="tile_number_once"),
        ]

    def __str__(self) -> str:
        return f"tile {self.number}"
