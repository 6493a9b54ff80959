"""Accounts, in a browser."""

import pytest

from tests.browser.conftest import LAPTOP
from tests.browser.world import COORDINATOR, PASSWORD

# One worker: one server and one Chromium for all of them.
pytestmark = [pytest.mark.browser, pytest.mark.xdist_group("browser")]


def test_an_invitation_link_makes_an_account(world, open_screen):
    link = world.ask("POST", "invitations", body={"role": "observer"})["link"]
    page = open_screen()
    page.goto(link)
    page.get_by_label("name, as others will see it").fill("Tamsin Quillfeather")
    page.get_by_label("password", exact=True).fill(PASSWORD)
    page.get_by_label("the same password again").fill(PASSWORD)
    page.get_by_role("button", name="join").click()
    page.wait_for_url(lambda url: "/join/" not in url)
    assert page.locator("body").get_attribute("data-person-name") == "Tamsin Quillfeather"


def test_who_needs_an_account_comes_back_to_where_they_wanted_to_go(open_screen):
    page = open_screen(size=LAPTOP)
    page.goto("/launch/")
    page.get_by_label("name").fill(COORDINATOR)
    page.get_by_label("password").fill(PASSWORD)
    page.get_by_role("button", name="sign in").click()
    page.wait_for_url("**/launch/")


def test_a_link_that_leads_nowhere_says_what_to_do_and_has_a_way_back(open_screen):
    open_screen.expected.add("status of 404")
    page = open_screen()
    page.goto("/join/nothing-like-a-real-token/")
    assert "Ask a coordinator" in page.locator("main").inner_text()
    assert page.locator("main a[href='/']").is_visible()
