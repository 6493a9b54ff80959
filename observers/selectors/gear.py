"""Sites and instruments of one person."""

from typing import Any

from observers.models import Instrument, Person, Role, Site


def list_sites(person: Person) -> list[Site]:
    """The person's own sites, exact."""
    return list(Site.objects.filter(owner=person))


def list_instruments(person: Person) -> list[Instrument]:
    """The person's own instruments."""
    return list(Instrument.objects.filter(owner=person).select_related("site"))


def list_instruments_in_use(person_ids: list[int]) -> list[Instrument]:
    """Instruments in use of some persons, with site and owner, by their number."""
    rows = Instrument.objects.filter(owner_id__in=person_ids, is_in_use=True)
    return list(rows.select_related("site", "owner").order_by("id"))


SITE_FIELDS = (
    "id",
    "name",
    "latitude_deg",
    "longitude_deg",
    "height_m",
    "sky_brightness_mag",
    "seeing_arcsec",
    "min_altitude_deg",
    "horizon_mask",
    "clear_chance",
)
INSTRUMENT_FIELDS = (
    "id",
    "name",
    "kind",
    "shape",
    "width_deg",
    "height_deg",
    "rotation_deg",
    "aperture_mm",
    "focal_length_mm",
    "pixel_arcsec",
    "obstruction",
    "throughput",
    "read_noise_e",
    "dark_e_per_s",
    "full_well_e",
    "magnification",
    "band",
    "exposure_s",
    "n_exposures",
    "overhead_s",
    "slew_deg_per_s",
    "tiles_per_night",
    "mount_min_altitude_deg",
    "mount_max_altitude_deg",
    "min_hour_angle_h",
    "max_hour_angle_h",
    "min_dec_deg",
    "max_dec_deg",
    "crosses_meridian",
    "is_daytime_rated",
    "is_eye_free",
    "sun_avoidance_deg",
    "is_in_use",
)


def site_as_owned(site: Site) -> dict[str, Any]:
    """A site with its exact place, for its owner and for coordinators."""
    return {field: getattr(site, field) for field in SITE_FIELDS}


def instrument_as_owned(instrument: Instrument) -> dict[str, Any]:
    """An instrument as its owner sees it."""
    values = {field: getattr(instrument, field) for field in INSTRUMENT_FIELDS}
    return {**values, "site": instrument.site_id}


def list_network() -> dict[Person, list[Instrument]]:
    """Everybody who can observe: active, no onlooker, with an instrument in use."""
    rows = Instrument.objects.filter(is_in_use=True, owner__is_active=True)
    rows = rows.exclude(owner__role=Role.ONLOOKER).select_related("owner", "site").order_by("id")
    network: dict[Person, list[Instrument]] = {}
    for instrument in rows:
        network.setdefault(instrument.owner, []).append(instrument)
    return network
