"""Parsing of request bodies: types only. What the values may be stands in rules."""

from typing import Any

from rest_framework import serializers

from campaigns.rules.examination import LIMIT_KINDS, WAYS


class StrictForm(serializers.Serializer[Any]):
    """Unknown fields are refused: a misspelt one must not vanish silently."""

    def to_internal_value(self, data: Any) -> Any:
        """Parse, after a look for unknown names."""
        unknown = set(data) - set(self.fields) if isinstance(data, dict) else set()
        if unknown:
            raise serializers.ValidationError(
                {name: ["There is no such field."] for name in sorted(map(str, unknown))}
            )
        return super().to_internal_value(data)


class SiteForm(StrictForm):
    """A site with its exact place; only its owner and coordinators ever see that."""

    name = serializers.CharField(max_length=80)
    latitude_deg = serializers.FloatField(help_text="WGS84, north positive")
    longitude_deg = serializers.FloatField(help_text="WGS84, east positive, -180..180")
    height_m = serializers.FloatField(required=False)
    sky_brightness_mag = serializers.FloatField(required=False)
    seeing_arcsec = serializers.FloatField(required=False)
    min_altitude_deg = serializers.FloatField(required=False)
    horizon_mask = serializers.ListField(
        child=serializers.ListField(child=serializers.FloatField(), min_length=2, max_length=2),
        required=False,
        help_text="the skyline as [azimuth_deg, altitude_deg] points; as private as the place",
    )
    clear_chance = serializers.FloatField(required=False)


class SiteShown(SiteForm):
    """A site as its owner sees it."""

    id = serializers.IntegerField()


class InstrumentForm(StrictForm):
    """An instrument at a site."""

    site = serializers.IntegerField(help_text="number of one of your sites")
    name = serializers.CharField(max_length=80)
    kind = serializers.CharField(help_text="camera, eyepiece, binoculars or eye")
    shape = serializers.CharField(required=False, help_text="rectangle or circle")
    width_deg = serializers.FloatField()
    height_deg = serializers.FloatField()
    rotation_deg = serializers.FloatField(required=False, allow_null=True)
    aperture_mm = serializers.FloatField()
    focal_length_mm = serializers.FloatField(required=False, allow_null=True)
    pixel_arcsec = serializers.FloatField(required=False, allow_null=True)
    obstruction = serializers.FloatField(required=False)
    throughput = serializers.FloatField(required=False)
    read_noise_e = serializers.FloatField(required=False)
    dark_e_per_s = serializers.FloatField(required=False)
    full_well_e = serializers.FloatField(required=False)
    magnification = serializers.FloatField(required=False, allow_null=True)
    band = serializers.CharField(required=False)
    exposure_s = serializers.FloatField(required=False)
    n_exposures = serializers.IntegerField(required=False)
    overhead_s = serializers.FloatField(required=False)
    slew_deg_per_s = serializers.FloatField(required=False)
    tiles_per_night = serializers.IntegerField(required=False)
    mount_min_altitude_deg = serializers.FloatField(required=False, allow_null=True)
    mount_max_altitude_deg = serializers.FloatField(required=False, allow_null=True)
    min_hour_angle_h = serializers.FloatField(
        required=False, allow_null=True, help_text="0 on the meridian, negative before it"
    )
    max_hour_angle_h = serializers.FloatField(required=False, allow_null=True)
    min_dec_deg = serializers.FloatField(required=False, allow_null=True)
    max_dec_deg = serializers.FloatField(required=False, allow_null=True)
    crosses_meridian = serializers.BooleanField(
        required=False, help_text="false: a series lies wholly before or after the meridian"
    )
    is_daytime_rated = serializers.BooleanField(required=False)
    is_eye_free = serializers.BooleanField(required=False)
    sun_avoidance_deg = serializers.FloatField(required=False)
    is_in_use = serializers.BooleanField(required=False)


class InstrumentShown(InstrumentForm):
    """An instrument as its owner sees it."""

    id = serializers.IntegerField()


class LaunchForm(StrictForm):
    """A campaign to launch: an uploaded file or an alert, and what the coordinator chose."""

    upload = serializers.CharField(required=False, help_text="SHA-256 given by POST region")
    filename = serializers.CharField(
        required=False,
        default="",
        allow_blank=True,
        max_length=100,
        help_text="what the uploaded file was called",
    )
    alert = serializers.JSONField(required=False, help_text="an alert in our JSON")
    title = serializers.CharField(max_length=120)
    source = serializers.JSONField(
        required=False, help_text="name of a source model, or a model as JSON (GET source-models)"
    )
    prior = serializers.CharField(
        required=False,
        default="",
        allow_blank=True,
        max_length=20,
        help_text="flat or galactic; without it what suits the source model",
    )
    draft = serializers.BooleanField(required=False, default=False)
    is_public = serializers.BooleanField(required=False, default=False)
    is_rehearsal = serializers.BooleanField(required=False, default=False)
    clock_now = serializers.DateTimeField(required=False, allow_null=True, default=None)


class ClaimForm(StrictForm):
    """A tile for an instrument."""

    tile = serializers.IntegerField(min_value=1)
    instrument = serializers.IntegerField()
    starts_at = serializers.DateTimeField(required=False, allow_null=True, default=None)


class DepthForm(StrictForm):
    """How deep a frame is, and who has looked at it how."""

    limit_mag = serializers.FloatField(required=False, allow_null=True)
    limit_kind = serializers.ChoiceField(
        LIMIT_KINDS, required=False, help_text='"estimate" without limit_mag: we estimate it'
    )
    star_mag = serializers.FloatField(
        required=False, allow_null=True, help_text="of one star, with star_snr: makes the limit"
    )
    star_snr = serializers.FloatField(required=False, allow_null=True)
    reference_mag = serializers.FloatField(required=False, allow_null=True)
    is_examined = serializers.BooleanField(required=False)
    examined_way = serializers.ChoiceField(WAYS, required=False, allow_blank=True)
    completeness = serializers.FloatField(required=False, allow_null=True)
    saturation_mag = serializers.FloatField(required=False, allow_null=True)
    masks_saturated = serializers.BooleanField(required=False)


class PlaceForm(DepthForm):
    """Where and when a frame was taken, typed by hand."""

    ra_deg = serializers.FloatField(required=False, allow_null=True)
    dec_deg = serializers.FloatField(required=False, allow_null=True)
    width_deg = serializers.FloatField(required=False, allow_null=True)
    height_deg = serializers.FloatField(required=False, allow_null=True)
    rotation_deg = serializers.FloatField(required=False, allow_null=True)
    mid_time = serializers.DateTimeField(required=False, allow_null=True)
    duration_s = serializers.FloatField(required=False, allow_null=True)
    band = serializers.CharField(required=False, allow_blank=True)


class FrameForm(PlaceForm):
    """A frame: `header` with FITS cards, or the typed values."""

    instrument = serializers.IntegerField()
    claim = serializers.IntegerField(required=False, allow_null=True)
    header = serializers.DictField(
        required=False, allow_null=True, help_text="allow-listed FITS cards, others are dropped"
    )
    pictures = serializers.ListField(
        child=serializers.DictField(),
        required=False,
        max_length=128,
        help_text="of a mosaic: the cards of each picture; together they are one frame",
    )


class ExamineForm(StrictForm):
    """Who has looked at the frame, and how."""

    is_examined = serializers.BooleanField(required=False, default=True)
    examined_way = serializers.ChoiceField(WAYS, required=False, allow_blank=True, default="")


class StatusForm(StrictForm):
    """In, clouded or out."""

    status = serializers.CharField()


class ClockForm(StrictForm):
    """Where a rehearsal's clock is moved to."""

    now = serializers.DateTimeField()


def parsed(form_class: type[StrictForm], data: Any, *, partial: bool = False) -> dict[str, Any]:
    """The values of a body; ValidationError becomes a problem object."""
    form = form_class(data=data, partial=partial)
    form.is_valid(raise_exception=True)
    return dict(form.validated_data)
