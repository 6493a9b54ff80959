"""What somebody observes with."""

from django.db import models

from observers.models.person import Person
from observers.models.site import Site


class InstrumentKind(models.TextChoices):
    """How the light is detected; decides the depth model and the solar rule."""

    CAMERA = "camera", "camera"
    EYEPIECE = "eyepiece", "telescope with eyepiece"
    BINOCULARS = "binoculars", "binoculars"
    EYE = "eye", "naked eye"


class FieldShape(models.TextChoices):
    """Shape of one exposure on the sky."""

    RECTANGLE = "rectangle", "rectangle"
    CIRCLE = "circle", "circle"


class Instrument(models.Model):
    """One field of view with its light-gathering and its habits."""

    owner = models.ForeignKey(Person, on_delete=models.CASCADE, related_name="instruments")
    site = models.ForeignKey(Site, on_delete=models.PROTECT, related_name="instruments")
    name = models.CharField(max_length=80)
    kind = models.CharField(max_length=12, choices=InstrumentKind.choices)
    shape = models.CharField(
        max_length=12, choices=FieldShape.choices, default=FieldShape.RECTANGLE
    )
    # A circular field has its diameter in both.
    width_deg = models.FloatField()
    height_deg = models.FloatField()
    # Position angle of the frame's height, east of north; empty: not known in advance.
    rotation_deg = models.FloatField(null=True, blank=True)
    aperture_mm = models.FloatField()
    focal_length_mm = models.FloatField(null=True, blank=True)
    pixel_arcsec = models.FloatField(null=True, blank=True)
    obstruction = models.FloatField(default=0.0)
    throughput = models.FloatField(default=0.4)
    read_noise_e = models.FloatField(default=5.0)
    dark_e_per_s = models.FloatField(default=0.0)
    full_well_e = models.FloatField(default=50000.0)
    # Of an eyepiece or binoculars; empty: the usual one of the kind.
    magnification = models.FloatField(null=True, blank=True)
    band = models.CharField(max_length=12, default="clear")
    exposure_s = models.FloatField(default=60.0)
    n_exposures = models.PositiveSmallIntegerField(default=4)
    overhead_s = models.FloatField(default=60.0)
    slew_deg_per_s = models.FloatField(default=1.0)
    tiles_per_night = models.PositiveSmallIntegerField(default=30)
    # Where the mount can point; empty: no limit. Hour angles are 0 on the meridian.
    mount_min_altitude_deg = models.FloatField(null=True, blank=True)
    mount_max_altitude_deg = models.FloatField(null=True, blank=True)
    min_hour_angle_h = models.FloatField(null=True, blank=True)
    max_hour_angle_h = models.FloatField(null=True, blank=True)
    min_dec_deg = models.FloatField(null=True, blank=True)
    max_dec_deg = models.FloatField(null=True, blank=True)
    crosses_meridian = models.BooleanField(default=True)
    is_daytime_rated = models.BooleanField(default=False)
    is_eye_free = models.BooleanField(default=False)
    sun_avoidance_deg = models.FloatField(default=45.0)
    is_in_use = models.BooleanField(default=True)
    created_at = models.DateTimeField()

    class Meta:
        ordering = ["id"]
        constraints = [
            models.CheckConstraint(
                condition=models.Q(width_deg__gt=0, height_deg__gt=0, aperture_mm__gt=0),
                name="instrument_sizes_positive",
            ),
            models.UniqueConstraint(
                fields=["owner", "name"], name="instrument_name_unique_per_owner"
            ),
        ]

    def __str__(self) -> str:
        return self.name
