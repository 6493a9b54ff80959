"""python tests/bench/server_stage.py N: migrate, make a live rehearsal and N observers; JSON out.

A process of its own, so that the benchmark's client shares nothing with the server but TCP.
"""

import json
import sys

import django

django.setup()

from django.core.management import call_command  # noqa: E402 (after django.setup)

from observers.actions.make_token import make_token  # noqa: E402
from observers.models import Role  # noqa: E402
from tests.campaigns import stage  # noqa: E402


def _make_scene(n_observers):
    coordinator = stage.make_person("Coordinator Cleo", Role.COORDINATOR)
    cameras = [stage.make_observer(f"Observer {number}") for number in range(n_observers)]
    campaign = stage.launch(coordinator, is_rehearsal=True, is_public=True, clock_now=stage.NOW)
    tile = stage.tile_at(campaign)
    secrets = [make_token(camera.owner, label="bench", now=stage.NOW)[1] for camera in cameras]
    return {
        "campaign": campaign.pk,
        "tile": tile.number,
        "ra_deg": tile.ra_deg,
        "dec_deg": tile.dec_deg,
        "now": stage.NOW.isoformat(),
        "observers": [
            {"token": secret, "instrument": camera.pk}
            for secret, camera in zip(secrets, cameras, strict=True)
        ],
    }


call_command("migrate", verbosity=0)
sys.stdout.write(json.dumps(_make_scene(int(sys.argv[1]))))
