"""Sign in, sign out, and who am I."""

from typing import Any

from django.contrib.auth import authenticate, login, logout
from django.http import HttpRequest
from django.middleware.csrf import get_token
from drf_spectacular.utils import extend_schema
from rest_framework import serializers
from rest_framework.exceptions import AuthenticationFailed
from rest_framework.permissions import AllowAny
from rest_framework.request import Request
from rest_framework.response import Response
from rest_framework.views import APIView

from campaigns.api import sign_in_attempts
from campaigns.api.forms import StrictForm, parsed
from observers.models import Person


class SignIn(StrictForm):
    """Name and password of an account."""

    name = serializers.CharField(max_length=80)
    password = serializers.CharField(max_length=512, trim_whitespace=False)


class SignedInObserver(serializers.Serializer[Any]):
    """Who is signed in."""

    id = serializers.IntegerField()
    name = serializers.CharField()
    role = serializers.CharField()


class Session(serializers.Serializer[Any]):
    """The present sign-in; `csrf` goes into X-CSRFToken on everything that writes."""

    signed_in = serializers.BooleanField()
    observer = SignedInObserver(allow_null=True)
    csrf = serializers.CharField()


class SessionView(APIView):
    """One browser's sign-in."""

    permission_classes = (AllowAny,)

    @extend_schema(responses=Session, summary="Who is signed in")
    def get(self, request: Request) -> Response:
        """Say who asks, and give the CSRF token."""
        return Response(session_json(request._request, request.user))

    @extend_schema(request=SignIn, responses=Session, summary="Sign in by name and password")
    def post(self, request: Request) -> Response:
        """Sign in. Failed attempts are counted; after five within five minutes: 429."""
        person = _person_of(request._request, **parsed(SignIn, request.data))
        login(request._request, person)
        return Response(session_json(request._request, person))

    @extend_schema(request=None, responses=Session, summary="Sign out")
    def delete(self, request: Request) -> Response:
        """Sign out of this browser."""
        logout(request._request)
        return Response(session_json(request._request, request._request.user))


def session_json(request: HttpRequest, user: Any) -> dict[str, Any]:
    """What a browser knows about its sign-in."""
    observer = None
    if isinstance(user, Person):
        observer = {"id": user.pk, "name": user.name, "role": user.role}
    return {"signed_in": observer is not None, "observer": observer, "csrf": get_token(request)}


def _person_of(request: HttpRequest, *, name: str, password: str) -> Person:
    address = request.META.get("REMOTE_ADDR", "")
    sign_in_attempts.refuse_too_many(address, name)
    person = authenticate(request, username=name, password=password)
    if person is None:
        sign_in_attempts.count_failure(address, name)
        raise AuthenticationFailed("Name and password do not fit.", code="bad-sign-in")
    sign_in_attempts.forget_failures(address, name)
    assert isinstance(person, Person)
    return person
