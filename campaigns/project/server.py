"""One process that serves pages, API and live channel on one port."""

import importlib
import logging
import socket
import threading
from collections.abc import Callable
from typing import Any

import uvicorn
from django.conf import settings

from campaigns.project.worker import WorkerProcess
from skytiles.sphere import healpix_door

logger = logging.getLogger(__name__)

APPLICATION = "campaigns.project.asgi"
_LOOPBACK = ("127.0.0.1", "::1", "localhost")
_EVERY_ADDRESS = ("0.0.0.0", "::")


class PortTakenError(Exception):
    """The wanted address cannot be listened on."""


def listen(host: str, port: int) -> socket.socket:
    """Bind a socket, port 0 for any free one."""
    family = socket.AF_INET6 if ":" in host else socket.AF_INET
    listener = socket.socket(family)
    listener.setsockopt(socket.SOL_SOCKET, socket.SO_REUSEADDR, 1)
    try:
        listener.bind((host, port))
    except OSError as error:
        listener.close()
        raise PortTakenError(f"{host} port {port}: {error.strerror or error}") from error
    listener.set_inheritable(False)
    return listener


def address_of(listener: socket.socket) -> str:
    """The address that a browser on this machine opens."""
    host, port = listener.getsockname()[:2]
    if host in _EVERY_ADDRESS:
        host = "127.0.0.1"
    return f"http://[{host}]:{port}" if ":" in host else f"http://{host}:{port}"


def list_other_addresses(listener: socket.socket) -> list[str]:
    """The addresses for phones and laptops on the same network, when it listens to them."""
    host, port = listener.getsockname()[:2]
    address = _address_towards_network() if host in _EVERY_ADDRESS else ""
    return [f"http://{address}:{port}"] if address else []


def allow_own_names(host: str) -> None:
    """Without QUARTERSKY_HOSTS a server that listens beyond this machine answers to its names."""
    if settings.HOSTS or host in _LOOPBACK:
        return
    names = [host] if host not in _EVERY_ADDRESS else list_own_names()
    settings.ALLOWED_HOSTS += [f"[{name}]" if ":" in name else name for name in names]


def list_own_names() -> list[str]:
    """The names and addresses by which others on the network reach this machine."""
    name = socket.gethostname()
    names = {name, f"{name}.local"}
    try:
        names |= {str(found[4][0]) for found in socket.getaddrinfo(name, None)}
    except OSError:
        logger.warning("this machine does not know its own address")
    names |= {address for address in [_address_towards_network()] if address}
    return sorted(names)


def serve_until_stopped(
    listener: socket.socket, *, when_ready: Callable[[], None], with_worker: bool = True
) -> None:
    """Serve on a bound socket until SIGINT or SIGTERM; the worker lives as long."""
    application = importlib.import_module(APPLICATION).application
    server = _Server(_config(application), when_ready)
    worker = WorkerProcess() if with_worker else None
    try:
        server.run(sockets=[listener])
    finally:
        if worker:
            worker.stop()


class _Server(uvicorn.Server):
    """Says when it has started, then warms what is slow to import."""

    def __init__(self, config: uvicorn.Config, when_ready: Callable[[], None]) -> None:
        super().__init__(config)
        self._when_ready = when_ready

    async def startup(self, sockets: list[socket.socket] | None = None) -> None:
        """Start, then tell."""
        await super().startup(sockets=sockets)
        if self.started:
            self._when_ready()
            threading.Thread(target=warm_science, name="warm-science", daemon=True).start()


def warm_science() -> None:
    """Load what the first request would wait for: the API with its science, and bit tables."""
    importlib.import_module(settings.ROOT_URLCONF)
    healpix_door.warm()


def _config(application: Any) -> uvicorn.Config:
    return uvicorn.Config(
        application,
        log_config=None,
        access_log=False,
        lifespan="on",
        # Compressing each message once per screen would cost more than everything else.
        ws_per_message_deflate=False,
        # Screens only listen: nothing long comes from them.
        ws_max_size=65_536,
        ws_ping_interval=20,
        ws_ping_timeout=20,
        backlog=2048,
        server_header=False,
        proxy_headers=settings.HTTPS,
        timeout_keep_alive=30,
        timeout_graceful_shutdown=3,
    )


def _address_towards_network() -> str:
    """The address of the interface that leads out; nothing is sent."""
    with socket.socket(socket.AF_INET, socket.SOCK_DGRAM) as probe:
        try:
            probe.connect(("192.0.2.1", 9))
        except OSError:
            return ""
        return str(probe.getsockname()[0])
