"""A real server and a real Chromium for the browser tests."""

import os
from pathlib import Path

import pytest
from playwright.sync_api import sync_playwright

from campaigns.rehearsal.server_process import start_server
from tests.browser.world import PASSWORD, make_world

CHROMIUM = Path("/usr/bin/chromium")
FLAGS = [
    "--no-sandbox",
    "--disable-gpu",
    "--disable-quic",
    "--no-first-run",
    "--disable-background-networking",
    "--disable-component-update",
    "--disable-sync",
]
PHONE = {"width": 390, "height": 844}
LAPTOP = {"width": 1440, "height": 900}
ROOT = Path(__file__).resolve().parents[2]


@pytest.fixture(scope="package")
def chromium():
    if not CHROMIUM.exists():
        pytest.skip("Chromium is not installed (Debian: apt install chromium)")
    with sync_playwright() as playwright:
        browser = playwright.chromium.launch(executable_path=str(CHROMIUM), args=FLAGS)
        yield browser
        browser.close()


@pytest.fixture(scope="package")
def world(tmp_path_factory):
    server = start_server(tmp_path_factory.mktemp("browser-data"))
    yield make_world(server.url, server.link_token)
    server.stop()


@pytest.fixture(scope="package")
def live_campaign(world):
    """A campaign for looking at pages, with a plan, a claim and a frame."""
    campaign = world.launch("Looking at pages")
    world.begin_night(campaign)
    return campaign


@pytest.fixture
def open_screen(chromium, world):
    """open_screen(name, size=..., theme=...) -> a page of that person, watched for errors."""
    contexts, complaints = [], []

    def open_one(name=None, *, size=PHONE, theme="dusk"):
        context = chromium.new_context(
            base_url=world.url, viewport=size, has_touch=size is PHONE, locale="en-GB"
        )
        contexts.append(context)
        context.add_init_script(f"localStorage.setItem('quartersky.theme', {theme!r})")
        page = context.new_page()
        page.set_default_timeout(15_000)
        _listen(page, complaints)
        if name:
            _sign_in(page, name)
        return page

    # Words of console errors that a test provokes on purpose.
    open_one.expected = {"status of 409"}
    yield open_one
    for context in contexts:
        context.close()
    assert [one for one in complaints if not any(word in one for word in open_one.expected)] == []


@pytest.fixture
def blank_page(chromium):
    """A page without a Content-Security-Policy, to look at pictures with."""
    page = chromium.new_page()
    yield page
    page.close()


@pytest.fixture(scope="package")
def screenshots():
    """Where screenshots go: QUARTERSKY_SCREENSHOTS or .cache/screenshots."""
    folder = Path(os.environ.get("QUARTERSKY_SCREENSHOTS", ROOT / ".cache" / "screenshots"))
    folder.mkdir(parents=True, exist_ok=True)
    return folder


def _listen(page, complaints):
    """Console errors hold refused scripts and styles (CSP) too."""

    def hear(message):
        if message.type == "error":
            complaints.append(f"{page.url}: {message.text}")

    page.on("console", hear)
    page.on("pageerror", lambda error: complaints.append(f"{page.url}: {error}"))


def _sign_in(page, name):
    page.goto("/sign-in/")
    page.get_by_label("name").fill(name)
    page.get_by_label("password").fill(PASSWORD)
    page.get_by_role("button", name="sign in").click()
    page.wait_for_url(lambda url: "/sign-in/" not in url)
