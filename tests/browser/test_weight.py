"""What a phone must load."""

import gzip

import httpx
import pytest

from tests.browser.conftest import PHONE
from tests.browser.world import COORDINATOR

# One worker: one server and one Chromium for all of them.
pytestmark = [pytest.mark.browser, pytest.mark.xdist_group("browser")]
BUDGET_BYTES = 150_000


@pytest.mark.parametrize("page_name", ["board", "tonight", "launch", "gear", "home"])
def test_the_script_of_every_page_stays_within_the_budget(
    world, live_campaign, open_screen, page_name
):
    addresses = {
        "board": f"/c/{live_campaign}/",
        "tonight": f"/c/{live_campaign}/tonight/",
        "launch": "/launch/",
        "gear": "/gear/",
        "home": "/",
    }
    page = open_screen(COORDINATOR, size=PHONE)
    scripts = set()

    def note(request):
        if request.resource_type == "script":
            scripts.add(request.url)

    page.on("request", note)
    page.goto(addresses[page_name])
    page.wait_for_load_state("networkidle")
    assert scripts
    bodies = [httpx.get(address, trust_env=False).content for address in scripts]
    assert sum(len(gzip.compress(body)) for body in bodies) <= BUDGET_BYTES
