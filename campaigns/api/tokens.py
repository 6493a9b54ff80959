"""Tokens for robotic observatories and other programs."""

from typing import Any

from django.utils import timezone
from drf_spectacular.utils import extend_schema
from rest_framework import serializers, status
from rest_framework.request import Request
from rest_framework.response import Response
from rest_framework.views import APIView

from campaigns.api.forms import StrictForm, parsed
from observers.actions.make_token import make_token, revoke_token
from observers.selectors.access import access_account
from observers.selectors.tokens import list_tokens


class TokenForm(StrictForm):
    """What the token is for."""

    label = serializers.CharField(max_length=80)


class TokenShown(serializers.Serializer[Any]):
    """A token without its secret."""

    id = serializers.IntegerField(read_only=True)
    label = serializers.CharField(read_only=True)
    made_at = serializers.DateTimeField(read_only=True)
    revoked_at = serializers.DateTimeField(read_only=True, allow_null=True)


class TokenMade(TokenShown):
    """A new token; `token` is shown this once."""

    token = serializers.CharField(read_only=True)


class TokensView(APIView):
    """The tokens of the person who asks."""

    @extend_schema(responses=TokenShown(many=True), summary="My tokens")
    def get(self, request: Request) -> Response:
        """List one's own tokens, the revoked ones too."""
        owner = access_account(request.user)
        return Response(TokenShown(list_tokens(owner), many=True).data)

    @extend_schema(request=TokenForm, responses={201: TokenMade}, summary="Make a token")
    def post(self, request: Request) -> Response:
        """Make a token.

        An Idempotency-Key is not kept here: the answer is a secret, and secrets are not stored.
        """
        label = parsed(TokenForm, request.data)["label"]
        now = timezone.now()
        token, secret = make_token(request.user, label=label, now=now)
        answer = {**TokenShown(token).data, "token": secret}
        return Response(answer, status=status.HTTP_201_CREATED)


class TokenView(APIView):
    """One token."""

    @extend_schema(request=None, responses={204: None}, summary="Revoke a token")
    def delete(self, request: Request, token_id: int) -> Response:
        """From this moment the token opens nothing."""
        revoke_token(request.user, token_id, now=timezone.now())
        return Response(status=status.HTTP_204_NO_CONTENT)
