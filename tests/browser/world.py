"""A real server with a real night for the browser tests: wherever it is midnight now."""

from __future__ import annotations

import io
import json
import uuid
from dataclasses import dataclass
from datetime import UTC, datetime, timedelta

import httpx
import numpy as np
from astropy.io import fits

LATITUDE_DEG = 10.0
PASSWORD = "lantern-over-the-moor"  # an invented account on a server that lives for one test run
COORDINATOR, OBSERVER = "Isaura Penhale", "Bram Oosterveen"
LENS = {
    "name": "135 mm lens",
    "kind": "camera",
    "shape": "rectangle",
    "width_deg": 10.0,
    "height_deg": 6.7,
    "aperture_mm": 67.0,
    "focal_length_mm": 135.0,
    "pixel_arcsec": 60.0,
    "throughput": 0.4,
    "read_noise_e": 3.0,
    "band": "clear",
    "exposure_s": 45.0,
    "n_exposures": 4,
    "overhead_s": 60.0,
}


@dataclass
class World:
    """Where the server is, who may sign in, and where it is midnight."""

    url: str
    coordinator_token: str
    observer_token: str
    instrument: int = 0
    coordinator_instrument: int = 0
    ra_deg: float = 0.0

    def ask(self, method: str, path: str, *, body=None, token: str = "") -> dict:
        """One request of a program, for what a test needs but does not try."""
        headers = {
            "Authorization": f"Bearer {token or self.coordinator_token}",
            "Idempotency-Key": str(uuid.uuid4()),
        }
        answer = httpx.request(
            method, f"{self.url}/api/v1/{path}", json=body, headers=headers, trust_env=False
        )
        assert answer.is_success, answer.text
        return answer.json()

    def launch(self, title: str) -> str:
        """A live campaign around the zenith of midnight."""
        alert = json.loads(midnight_alert(self.ra_deg))
        wanted = {"alert": alert, "title": title, "source": "steady", "draft": False}
        body = wanted | {"is_public": True, "is_rehearsal": False}
        return self.ask("POST", "campaigns", body=body)["campaign"]

    def begin_night(self, campaign: str) -> None:
        """A plan, one frame by the observer, and one tile held by the coordinator."""
        for token in (self.observer_token, self.coordinator_token):
            self.ask("POST", f"campaigns/{campaign}/status", body={"status": "in"}, token=token)
        self.ask("POST", f"campaigns/{campaign}/plan", body={})
        self.claim_best(campaign, self.coordinator_instrument, self.coordinator_token)
        self.report_best(campaign)

    def claim_best(self, campaign: str, instrument: int, token: str) -> dict:
        """Take the best tile now."""
        path = f"campaigns/{campaign}/best-tile?instrument={instrument}"
        best = self.ask("GET", path, token=token)["best"]
        wanted = {"tile": best["tile"], "instrument": instrument, "starts_at": best["starts_at"]}
        return self.ask("POST", f"campaigns/{campaign}/claims", body=wanted, token=token)

    def report_best(self, campaign: str) -> dict:
        """A frame of the observer's best tile, examined by eye."""
        path = f"campaigns/{campaign}/best-tile?instrument={self.instrument}"
        best = self.ask("GET", path, token=self.observer_token)["best"]
        mid_at = datetime.now(UTC) - timedelta(minutes=5)
        frame = {
            "instrument": self.instrument,
            "ra_deg": best["ra_deg"],
            "dec_deg": best["dec_deg"],
            "mid_time": mid_at.strftime("%Y-%m-%dT%H:%M:%SZ"),
            "duration_s": 180.0,
            "band": "clear",
            "limit_mag": 13.4,
            "limit_kind": "5 sigma",
            "is_examined": True,
            "examined_way": "image by eye",
        }
        path = f"campaigns/{campaign}/frames"
        return self.ask("POST", path, body=frame, token=self.observer_token)


def midnight_longitude_deg(now: datetime) -> float:
    """Where the mean Sun is at lower culmination now."""
    hours = now.hour + now.minute / 60.0 + now.second / 3600.0
    return (-15.0 * hours + 180.0) % 360.0 - 180.0


def zenith_ra_deg(now: datetime, longitude_deg: float) -> float:
    """Right ascension overhead (Meeus, Astronomical Algorithms, eq. 12.4; from memory)."""
    days = (now - datetime(2000, 1, 1, 12, tzinfo=UTC)).total_seconds() / 86400.0
    return (280.46061837 + 360.98564736629 * days + longitude_deg) % 360.0


def midnight_alert(ra_deg: float) -> bytes:
    """An alert of twenty minutes ago, overhead where it is midnight."""
    event_at = datetime.now(UTC) - timedelta(minutes=20)
    cone = {"type": "cone", "ra_deg": round(ra_deg, 3), "dec_deg": LATITUDE_DEG}
    return json.dumps(
        {
            "id": "invented-overhead-1",
            "event_time": event_at.strftime("%Y-%m-%dT%H:%M:%SZ"),
            "kind": "neutrino burst",
            "role": "observation",
            "constraints": [{**cone, "radius_deg": 7.0, "containment": 0.9}],
        }
    ).encode()


def fits_frame(*, ra_deg: float, dec_deg: float, mid_at: datetime) -> bytes:
    """A plate-solved FITS file as a camera program writes it, with cards that must not leave."""
    header = fits.Header()
    header["OBJECT"] = "tile"
    header["DATE-OBS"] = (mid_at - timedelta(seconds=90)).strftime("%Y-%m-%dT%H:%M:%S")
    header["EXPTIME"] = 180.0
    header["FILTER"] = "clear"
    header["CTYPE1"], header["CTYPE2"] = "RA---TAN", "DEC--TAN"
    header["CRVAL1"], header["CRVAL2"] = ra_deg, dec_deg
    header["CRPIX1"], header["CRPIX2"] = 300.5, 200.5
    header["CD1_1"], header["CD1_2"] = -1.0 / 60.0, 0.0
    header["CD2_1"], header["CD2_2"] = 0.0, 1.0 / 60.0
    header["OBSERVER"] = "a secret name"
    header["SITELAT"] = "10 00 00"
    header["SITELONG"] = "a secret place"
    stored = io.BytesIO()
    fits.PrimaryHDU(np.zeros((400, 600), dtype=np.uint8), header).writeto(stored)
    return stored.getvalue()


def make_world(url: str, link_token: str) -> World:
    """A coordinator, one observer with a lens at midnight, and nothing else."""
    now = datetime.now(UTC)
    coordinator_token = _join(url, link_token, COORDINATOR)
    world = World(url, coordinator_token, "")
    invitation = world.ask("POST", "invitations", body={"role": "observer"})
    secret = invitation["link"].rstrip("/").rsplit("/", 1)[-1]
    world.observer_token = _join(url, secret, OBSERVER)
    longitude_deg = midnight_longitude_deg(now)
    world.ra_deg = zenith_ra_deg(now, longitude_deg)
    world.instrument = _add_lens(world, world.observer_token, longitude_deg)
    world.coordinator_instrument = _add_lens(world, coordinator_token, longitude_deg)
    return world


def _add_lens(world: World, token: str, longitude_deg: float) -> int:
    site = {
        "name": "Midnight field",
        "latitude_deg": LATITUDE_DEG,
        "longitude_deg": round(longitude_deg, 4),
        "height_m": 300.0,
        "sky_brightness_mag": 21.0,
        "seeing_arcsec": 3.0,
        "clear_chance": 0.8,
    }
    made = world.ask("POST", "sites", body=site, token=token)
    return world.ask("POST", "instruments", body={**LENS, "site": made["id"]}, token=token)["id"]


def _join(url: str, secret: str, name: str) -> str:
    """Accept an invitation and make a token, as a browser would."""
    with httpx.Client(base_url=url, trust_env=False) as http:
        csrf = http.get("/api/v1/session").json()["csrf"]
        acceptance = {"token": secret, "name": name, "password": PASSWORD}
        accepted = http.post(
            "/api/v1/invitations/accept", json=acceptance, headers={"X-CSRFToken": csrf}
        )
        assert accepted.is_success, accepted.text
        made = http.post(
            "/api/v1/tokens",
            json={"label": "browser test"},
            headers={"X-CSRFToken": accepted.json()["csrf"]},
        )
        assert made.is_success, made.text
        return made.json()["token"]
