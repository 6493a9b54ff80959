"""Everything in one process: pages, API and the live channel."""

import os
from collections.abc import Awaitable, Callable
from typing import Any

from channels.routing import ProtocolTypeRouter, URLRouter
from django.core.asgi import get_asgi_application
from django.urls import path

os.environ.setdefault("DJANGO_SETTINGS_MODULE", "campaigns.project.settings")
pages_and_api = get_asgi_application()

# The live channel needs the apps, which exist from here on.
from campaigns import background  # noqa: E402
from campaigns.live.channel import LiveChannel  # noqa: E402
from campaigns.project.body_limit import BodyLimit  # noqa: E402

Receive = Callable[[], Awaitable[dict[str, Any]]]
Send = Callable[[dict[str, Any]], Awaitable[None]]

live = LiveChannel()
background.listen()


async def _nowhere(scope: dict[str, Any], receive: Receive, send: Send) -> None:
    """A socket at an address that does not exist: the handshake is refused."""
    await receive()
    await send({"type": "websocket.close", "code": 4404})


async def _lifespan(scope: dict[str, Any], receive: Receive, send: Send) -> None:
    """Close the live channel when the server stops."""
    await receive()
    await send({"type": "lifespan.startup.complete"})
    await receive()
    await live.close()
    await send({"type": "lifespan.shutdown.complete"})


application = ProtocolTypeRouter(
    {
        "http": BodyLimit(pages_and_api),
        "websocket": URLRouter(
            [path("live/campaigns/<str:campaign_id>/", live), path("<path:rest>", _nowhere)]
        ),
        "lifespan": _lifespan,
    }
)
