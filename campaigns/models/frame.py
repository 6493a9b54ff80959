"""An exposure (or stack) that was taken."""

from django.db import models

from campaigns.models.campaign import Campaign
from campaigns.models.work import Claim
from observers.models import Instrument, Person


class Frame(models.Model):
    """Footprint, mid-time, duration, band, limit, and who has looked at it."""

    class State(models.TextChoices):
        """Counted or withdrawn; a correction keeps the frame counted and adds history."""

        COUNTED = "counted", "counted"
        WITHDRAWN = "withdrawn", "withdrawn"

    class LimitKind(models.TextChoices):
        """What the reported limit means (DEVELOPERS.md, ledger)."""

        M50 = "50 %", "50 % of sources are found at this magnitude"
        SIGMA_5 = "5 sigma", "5 sigma"
        SIGMA_3 = "3 sigma", "3 sigma"
        M90 = "90 %", "90 % of sources are found at this magnitude"
        FAINTEST = "faintest star seen", "faintest star seen"
        ESTIMATE = "estimate", "estimated from gear and sky"

    class Way(models.TextChoices):
        """How the frame was examined for new sources."""

        EYEPIECE = "eyepiece", "at the eyepiece"
        BY_EYE = "image by eye", "image by eye"
        CATALOGUE = "program against a catalogue", "program against a catalogue"
        DIFFERENCE = "difference imaging", "difference imaging"

    campaign = models.ForeignKey(Campaign, on_delete=models.CASCADE, related_name="frames")
    number = models.PositiveIntegerField()
    person = models.ForeignKey(Person, on_delete=models.PROTECT, related_name="frames")
    instrument = models.ForeignKey(Instrument, on_delete=models.PROTECT, related_name="frames")
    claim = models.ForeignKey(
        Claim, null=True, blank=True, on_delete=models.SET_NULL, related_name="frames"
    )
    state = models.CharField(max_length=10, choices=State.choices, default=State.COUNTED)
    # A polygon by its corners or a circle, as skytiles.tiling writes a Footprint.
    footprint = models.JSONField()
    ra_deg = models.FloatField()
    dec_deg = models.FloatField()
    field_deg = models.FloatField()
    mid_time = models.DateTimeField()
    duration_s = models.FloatField()
    band = models.CharField(max_length=12)
    limit_mag = models.FloatField(null=True, blank=True)
    limit_kind = models.CharField(
        max_length=20, choices=LimitKind.choices, default=LimitKind.SIGMA_5
    )
    # Depth of the reference that the frame was compared with.
    reference_mag = models.FloatField(null=True, blank=True)
    is_examined = models.BooleanField(default=False)
    examined_way = models.CharField(max_length=30, choices=Way.choices, blank=True)
    completeness = models.FloatField(null=True, blank=True)
    saturation_mag = models.FloatField(null=True, blank=True)
    masks_saturated = models.BooleanField(default=False)
    # "header" or "form", and the allow-listed keywords as sent.
    origin = models.CharField(max_length=8, default="form")
    header = models.JSONField(default=dict)
    # SHA-256 of footprint, mid-time, duration, band and instrument: the same frame twice is one.
    identity_sha256 = models.CharField(max_length=64)
    reported_at = models.DateTimeField()

    class Meta:
        ordering = ["campaign", "number"]
        constraints = [
            models.UniqueConstraint(fields=["campaign", "number"], name="frame_number_once"),
            models.UniqueConstraint(
                fields=["campaign", "identity_sha256"],
                condition=models.Q(state="counted"),
                name="frame_counted_once",
            ),
        ]

    def __str__(self) -> str:
        return f"frame {self.number}"
