"""Direction information and the region made of it."""

from django.db import models

from campaigns.models.campaign import Campaign


class Constraint(models.Model):
    """One piece of direction information, as read."""

    campaign = models.ForeignKey(Campaign, on_delete=models.CASCADE, related_name="constraints")
    position = models.PositiveSmallIntegerField()
    kind = models.CharField(max_length=20)
    # Everything but a map: JSON as in an alert file.
    parameters = models.JSONField(default=dict)
    # A map file: its SHA-256 under the uploads folder.
    upload_sha256 = models.CharField(max_length=64, blank=True)
    is_on = models.BooleanField(default=True)

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

    class Meta:
        ordering = ["campaign", "number"]
        constraints = [
            models.UniqueConstraint(fields=["campaign", "number"], name="tile_number_once"),
        ]

    def __str__(self) -> str:
        return f"tile {self.number}"
