"""Every page in every theme on phone and laptop: screenshots, colours, no error."""

import pytest

from tests.browser.conftest import LAPTOP, PHONE
from tests.browser.pixels import read_colours, relative_luminance
from tests.browser.world import COORDINATOR

# One worker: one server and one Chromium for all of them.
pytestmark = [pytest.mark.browser, pytest.mark.xdist_group("browser")]

PAGES = {
    "home": "/",
    "launch": "/launch/",
    "gear": "/gear/",
    "board": "/c/{campaign}/",
    "tonight": "/c/{campaign}/tonight/",
    "log": "/c/{campaign}/log/",
    "methods": "/methods/",
}
SIZES = {"phone": PHONE, "laptop": LAPTOP}
GROUNDS = {"day": "rgb(247, 245, 240)", "dusk": "rgb(12, 19, 34)", "night": "rgb(0, 0, 0)"}
MOST_LUMINANCE = 0.20


def is_red_only(colours):
    return colours["most"][1] == colours["most"][2] == 0


@pytest.mark.parametrize("size", SIZES)
@pytest.mark.parametrize("theme", GROUNDS)
def test_every_page_is_drawn_in_its_theme(
    live_campaign, open_screen, blank_page, screenshots, theme, size
):
    page = open_screen(COORDINATOR, size=SIZES[size], theme=theme)
    for name, address in PAGES.items():
        page.goto(address.format(campaign=live_campaign))
        settle(page)
        # Methods are longer than any picture.
        whole = name not in ("board", "tonight", "methods")
        png = page.screenshot(
            path=screenshots / f"{name}-{size}-{theme}.png", full_page=whole, animations="disabled"
        )
        ground = page.evaluate("getComputedStyle(document.body).backgroundColor")
        assert ground == GROUNDS[theme], name
        if theme == "night":
            assert_dark_adapted(read_colours(blank_page, png), name)


def assert_dark_adapted(colours, name):
    assert is_red_only(colours), f"{name}: {colours}"
    assert relative_luminance(colours["most"][0]) <= MOST_LUMINANCE, f"{name}: {colours}"
    # A picture that is all black would pass: something must be there to read.
    assert colours["most"][0] >= 150, f"{name}: {colours}"


@pytest.mark.parametrize("name", ["sign-in", "join"])
def test_pages_before_sign_in_are_red_only_at_night(
    world, open_screen, blank_page, screenshots, name
):
    page = open_screen(theme="night")
    link = "/sign-in/"
    if name == "join":
        link = world.ask("POST", "invitations", body={"role": "observer"})["link"]
    page.goto(link)
    settle(page)
    png = page.screenshot(path=screenshots / f"{name}-phone-night.png", full_page=True)
    assert_dark_adapted(read_colours(blank_page, png), name)


def test_every_theme_of_a_page_looks_different(live_campaign, open_screen, blank_page):
    means = []
    for theme in GROUNDS:
        page = open_screen(COORDINATOR, size=LAPTOP, theme=theme)
        page.goto(f"/c/{live_campaign}/")
        settle(page)
        means.append(sum(read_colours(blank_page, page.screenshot())["mean"]))
    assert means[0] > means[1] > means[2]


@pytest.mark.parametrize("name", PAGES)
def test_no_page_is_wider_than_the_phone(live_campaign, open_screen, name):
    page = open_screen(COORDINATOR, size=PHONE)
    page.goto(PAGES[name].format(campaign=live_campaign))
    settle(page)
    assert page.evaluate("document.documentElement.scrollWidth") <= PHONE["width"]


@pytest.mark.parametrize("name", PAGES)
def test_every_page_has_a_way_back(live_campaign, open_screen, name):
    page = open_screen(COORDINATOR, size=PHONE)
    page.goto(PAGES[name].format(campaign=live_campaign))
    assert page.locator("header a[href='/']").first.is_visible()


def settle(page):
    """Pages keep a socket open: wait for their first answers, then two drawn frames."""
    page.wait_for_load_state("load")
    page.wait_for_timeout(1200)
    page.evaluate("new Promise((done) => requestAnimationFrame(() => requestAnimationFrame(done)))")
