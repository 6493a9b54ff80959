"""All addresses of the server but the live channel's (asgi.py)."""

from django.urls import include, path
from drf_spectacular.views import SpectacularJSONAPIView

from campaigns.api.problems import no_such_endpoint

handler400 = "campaigns.project.failures.bad_request"
handler403 = "campaigns.project.failures.not_allowed"
handler404 = "campaigns.project.failures.not_found"
handler500 = "campaigns.project.failures.server_error"

urlpatterns = [
    path("api/schema/", SpectacularJSONAPIView.as_view(), name="api-schema"),
    path("api/v1/", include("campaigns.api.account_urls")),
    path("api/v1/", include("campaigns.api.urls")),
    path("api/<path:rest>", no_such_endpoint),
    path("", include("campaigns.pages.urls")),
]
