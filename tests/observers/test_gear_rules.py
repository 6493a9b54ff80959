"""Rules of sites and instruments: form, API and action refuse the same."""

import pytest

from observers.actions.add_instrument import add_instrument
from observers.actions.add_site import add_site
from observers.errors import InvalidInput
from observers.models import Instrument, Site
from observers.rules.instrument import instrument_problems
from observers.rules.site import public_place_deg, site_problems
from tests.campaigns.stage import CAMERA, NOW, make_person, make_site

BAD_SITES = [
    ({"latitude_deg": 91.0}, "latitude_deg"),
    ({"longitude_deg": 181.0}, "longitude_deg"),
    ({"latitude_deg": float("nan")}, "latitude_deg"),
    ({"height_m": 20_000.0}, "height_m"),
    ({"clear_chance": 1.5}, "clear_chance"),
    ({"name": " "}, "name"),
]
BAD_INSTRUMENTS = [
    ({"width_deg": 0.0}, "width_deg"),
    ({"aperture_mm": float("inf")}, "aperture_mm"),
    ({"kind": "drone"}, "kind"),
    ({"kind": "eyepiece", "is_eye_free": True}, "is_eye_free"),
    ({"is_daytime_rated": True, "sun_avoidance_deg": 10.0}, "sun_avoidance_deg"),
    ({"shape": "circle"}, "height_deg"),
    ({"band": ""}, "band"),
    ({"n_exposures": 0}, "n_exposures"),
]


@pytest.mark.parametrize(("values", "field"), BAD_SITES)
@pytest.mark.django_db
def test_a_bad_site_is_refused_by_rule_and_action(values, field):
    whole = {"name": "hill", "latitude_deg": 47.0, "longitude_deg": 10.0, **values}
    assert field in [problem.field for problem in site_problems(Site(**whole))]
    with pytest.raises(InvalidInput):
        add_site(make_person("Ada"), whole, now=NOW)
    assert not Site.objects.exists()


@pytest.mark.parametrize(("values", "field"), BAD_INSTRUMENTS)
@pytest.mark.django_db
def test_a_bad_instrument_is_refused_by_rule_and_action(values, field):
    whole = {**CAMERA, "name": "camera", **values}
    assert field in [problem.field for problem in instrument_problems(Instrument(**whole))]
    site = make_site(make_person("Ada"))
    with pytest.raises(InvalidInput):
        add_instrument(site.owner, site, values=whole, now=NOW)
    assert not Instrument.objects.exists()


@pytest.mark.django_db
def test_an_instrument_stands_at_a_site_of_its_owner():
    site = make_site(make_person("Ada"))
    with pytest.raises(InvalidInput, match="somebody else"):
        add_instrument(make_person("Ben"), site, values={**CAMERA, "name": "x"}, now=NOW)


@pytest.mark.django_db
def test_a_name_is_used_once_by_one_owner():
    ada = make_person("Ada")
    add_site(ada, {"name": "hill", "latitude_deg": 47.0, "longitude_deg": 10.0}, now=NOW)
    with pytest.raises(InvalidInput, match="already"):
        add_site(ada, {"name": "hill", "latitude_deg": 1.0, "longitude_deg": 1.0}, now=NOW)


def test_a_public_place_is_rounded_to_a_tenth_of_a_degree():
    assert public_place_deg(48.1234, -11.5678) == (48.1, -11.6)
