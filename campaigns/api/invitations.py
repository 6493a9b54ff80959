"""Links that make accounts."""

from typing import Any

from django.contrib.auth import login
from django.urls import reverse
from django.utils import timezone
from drf_spectacular.utils import extend_schema
from rest_framework import serializers, status
from rest_framework.permissions import AllowAny
from rest_framework.request import Request
from rest_framework.response import Response
from rest_framework.views import APIView

from campaigns.api.forms import StrictForm, parsed
from campaigns.api.session import Session, session_json
from observers.actions.accept_invitation import accept_invitation
from observers.actions.invite_person import invite_person
from observers.models import Person, Role
from observers.selectors.access import access_coordinator

BACKEND = "observers.actions.sign_in.NameBackend"


class Invite(StrictForm):
    """Either a role for somebody new, or the person who needs a new password."""

    role = serializers.ChoiceField(choices=Role.choices, default=Role.OBSERVER)
    person = serializers.PrimaryKeyRelatedField[Person](
        queryset=Person.objects.all(), required=False, allow_null=True, default=None
    )


class InvitationMade(serializers.Serializer[Any]):
    """The link is shown once: hand it to one person."""

    link = serializers.URLField()
    expires_at = serializers.DateTimeField()


class Acceptance(StrictForm):
    """The secret at the end of the link, and how to sign in from now on."""

    token = serializers.CharField(max_length=200)
    name = serializers.CharField(max_length=80, required=False, default="", allow_blank=True)
    password = serializers.CharField(max_length=512, trim_whitespace=False)


class InvitationsView(APIView):
    """Coordinators invite."""

    @extend_schema(request=Invite, responses={201: InvitationMade}, summary="Make a link")
    def post(self, request: Request) -> Response:
        """Make a link, good for one use and seven days.

        An Idempotency-Key is not kept here: the answer is a secret, and secrets are not stored.
        """
        coordinator = access_coordinator(request.user)
        wanted = parsed(Invite, request.data)
        role, person = Role(wanted["role"]), wanted["person"]
        invited = invite_person(coordinator, role=role, person=person, now=timezone.now())
        link = request.build_absolute_uri(reverse("join", args=[invited.secret]))
        made = InvitationMade({"link": link, "expires_at": invited.expires_at})
        return Response(made.data, status=status.HTTP_201_CREATED)


class AcceptInvitationView(APIView):
    """Use a link."""

    permission_classes = (AllowAny,)

    @extend_schema(request=Acceptance, responses={201: Session}, summary="Use a link and sign in")
    def post(self, request: Request) -> Response:
        """Make the account (or set the new password) and sign in."""
        wanted = parsed(Acceptance, request.data)
        person = accept_invitation(
            wanted["token"], name=wanted["name"], password=wanted["password"], now=timezone.now()
        )
        login(request._request, person, backend=BACKEND)
        return Response(session_json(request._request, person), status=status.HTTP_201_CREATED)
