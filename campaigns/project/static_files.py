"""Serve static/dist/ from this process, as one piece per file."""

from typing import Any

from django.http import HttpResponse
from whitenoise.middleware import WhiteNoiseMiddleware


class StaticFilesMiddleware(WhiteNoiseMiddleware):
    """WhiteNoise, with the whole (small) file in the response.

    A file handed over as an iterator would be read on the event loop under ASGI.
    """

    @staticmethod
    def serve(static_file: Any, request: Any) -> HttpResponse:
        """Answer for one file: 200, 304 or 405 as WhiteNoise decides."""
        answer = static_file.get_response(request.method, request.META)
        body = b""
        if answer.file is not None:
            with answer.file as file:
                body = file.read()
        response = HttpResponse(body, status=int(answer.status))
        del response["Content-Type"]
        for name, value in answer.headers:
            response[name] = value
        return response
