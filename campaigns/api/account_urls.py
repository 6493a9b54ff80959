"""Addresses of sign-in, invitations and tokens, below /api/v1/."""

from django.urls import path

from campaigns.api.invitations import AcceptInvitationView, InvitationsView
from campaigns.api.session import SessionView
from campaigns.api.tokens import TokensView, TokenView

urlpatterns = [
    path("session", SessionView.as_view(), name="api-session"),
    path("invitations", InvitationsView.as_view(), name="api-invitations"),
    path("invitations/accept", AcceptInvitationView.as_view(), name="api-accept-invitation"),
    path("tokens", TokensView.as_view(), name="api-tokens"),
    path("tokens/<int:token_id>", TokenView.as_view(), name="api-token"),
]
