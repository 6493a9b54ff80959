"""My gear: sites and instruments."""

from typing import Any

from django.utils import timezone
from drf_spectacular.utils import extend_schema
from rest_framework.request import Request
from rest_framework.response import Response
from rest_framework.views import APIView

from campaigns.actions.register_instrument import alter_instrument, register_instrument
from campaigns.actions.register_site import alter_site, register_site
from campaigns.api.forms import InstrumentForm, InstrumentShown, SiteForm, SiteShown, parsed
from campaigns.api.once import once_of, response_of
from observers.selectors.access import access_account, access_own_instrument, access_site
from observers.selectors.gear import (
    instrument_as_owned,
    list_instruments,
    list_sites,
    site_as_owned,
)


class SitesView(APIView):
    """The sites of the person who asks."""

    @extend_schema(responses=SiteShown(many=True), summary="My sites, exact")
    def get(self, request: Request) -> Response:
        """List one's own sites."""
        return Response([site_as_owned(site) for site in list_sites(access_account(request.user))])

    @extend_schema(request=SiteForm, responses={201: SiteShown}, summary="Add a site")
    def post(self, request: Request) -> Response:
        """Add a site."""
        person, now = access_account(request.user), timezone.now()
        values = parsed(SiteForm, request.data)
        once = once_of(request, person, operation="sites", wall_now=now)
        return response_of(register_site(person, values=values, wall_now=now, once=once))


class SiteView(APIView):
    """One site."""

    @extend_schema(request=SiteForm, responses=SiteShown, summary="Set a site right")
    def patch(self, request: Request, site_id: int) -> Response:
        """Change the given fields."""
        site = access_site(request.user, site_id)
        values = parsed(SiteForm, request.data, partial=True)
        return response_of(alter_site(site, values, wall_now=timezone.now()))


class InstrumentsView(APIView):
    """The instruments of the person who asks."""

    @extend_schema(responses=InstrumentShown(many=True), summary="My instruments")
    def get(self, request: Request) -> Response:
        """List one's own instruments."""
        person = access_account(request.user)
        return Response([instrument_as_owned(one) for one in list_instruments(person)])

    @extend_schema(
        request=InstrumentForm, responses={201: InstrumentShown}, summary="Add an instrument"
    )
    def post(self, request: Request) -> Response:
        """Add an instrument; campaigns that run lay its tiles at once."""
        person, now = access_account(request.user), timezone.now()
        values = parsed(InstrumentForm, request.data)
        site = access_site(person, values.pop("site"))
        once = once_of(request, person, operation="instruments", wall_now=now)
        answer = register_instrument(person, site, values=values, wall_now=now, once=once)
        return response_of(answer)


class InstrumentView(APIView):
    """One instrument."""

    @extend_schema(
        request=InstrumentForm, responses=InstrumentShown, summary="Set an instrument right"
    )
    def patch(self, request: Request, instrument_id: int) -> Response:
        """Change the given fields."""
        instrument = access_own_instrument(request.user, instrument_id)
        values: dict[str, Any] = parsed(InstrumentForm, request.data, partial=True)
        if "site" in values:
            values["site"] = access_site(request.user, values["site"])
        return response_of(alter_instrument(instrument, values, wall_now=timezone.now()))
