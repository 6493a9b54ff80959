"""Where somebody observes from. A site is somebody's home: see access_exact_place."""

from django.db import models

from observers.models.person import Person


class Site(models.Model):
    """A place on the Earth, WGS84. Exact values: for owner and coordinators only."""

    owner = models.ForeignKey(Person, on_delete=models.CASCADE, related_name="sites")
    name = models.CharField(max_length=80)
    latitude_deg = models.FloatField()
    longitude_deg = models.FloatField()
    height_m = models.FloatField(default=0.0)
    # V band, zenith, no Moon; mag per square arcsecond.
    sky_brightness_mag = models.FloatField(default=20.5)
    seeing_arcsec = models.FloatField(default=3.0)
    min_altitude_deg = models.FloatField(default=20.0)
    # The skyline as [azimuth_deg, altitude_deg] points: it shows where the home is.
    horizon_mask = models.JSONField(default=list, blank=True)
    clear_chance = models.FloatField(default=0.6)
    created_at = models.DateTimeField()

    class Meta:
        ordering = ["id"]
        constraints = [
            models.CheckConstraint(
                condition=models.Q(latitude_deg__gte=-90, latitude_deg__lte=90),
                name="site_latitude_in_range",
            ),
            models.CheckConstraint(
                condition=models.Q(longitude_deg__gte=-180, longitude_deg__lte=180),
                name="site_longitude_in_range",
            ),
            models.UniqueConstraint(fields=["owner", "name"], name="site_name_unique_per_owner"),
        ]

    def __str__(self) -> str:
        return self.name
