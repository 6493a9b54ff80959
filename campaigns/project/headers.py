"""Headers that every answer carries."""

from collections.abc import Callable

from django.http import HttpRequest, HttpResponse

# Nothing but the position is ever asked for, and that only on My gear.
_PERMISSIONS = "camera=(), microphone=(), payment=(), usb=(), geolocation=(self)"


class HeadersMiddleware:
    """Permissions for the browser; answers of the API and personal pages are not kept by others."""

    def __init__(self, get_response: Callable[[HttpRequest], HttpResponse]) -> None:
        self.get_response = get_response

    def __call__(self, request: HttpRequest) -> HttpResponse:
        """Add what the view has not set itself."""
        response = self.get_response(request)
        response.setdefault("Permissions-Policy", _PERMISSIONS)
        response.setdefault("X-Frame-Options", "DENY")
        response.setdefault("Cache-Control", "private, no-cache")
        return response
