"""The coordinator chooses what the light could do, changes a number, and all can read it."""

import pytest

from tests.browser.conftest import LAPTOP
from tests.browser.world import COORDINATOR, midnight_alert

pytestmark = [pytest.mark.browser, pytest.mark.xdist_group("browser")]


@pytest.fixture
def review(world, open_screen):
    """The Launch page with an alert read and the source models there."""
    page = open_screen(COORDINATOR, size=LAPTOP)
    page.goto("/launch/")
    alert = {"name": "alert.json", "mimeType": "application/json"}
    page.set_input_files("input[type=file]", {**alert, "buffer": midnight_alert(world.ra_deg)})
    page.get_by_label("name of the campaign").fill("A collapse, perhaps")
    page.get_by_label("core collapse").check()
    return page


def test_every_number_of_a_core_collapse_can_be_changed_and_read_again(world, review):
    review.locator("svg.light-chart path.chart-curve").nth(3).wait_for()
    review.get_by_text("red supergiant (II-P, II-L, IIn)", exact=True).click()
    delay = review.get_by_label("delay of the light, median").first
    delay.fill("many")
    review.get_by_role("button", name="go live", exact=True).click()
    review.get_by_text("A number is needed here.").wait_for()
    delay.fill("30")
    review.get_by_role("button", name="draw with these numbers").click()
    review.get_by_role("button", name="go live", exact=True).click()
    review.get_by_role("button", name="yes, go live").click()
    review.wait_for_url("**/c/**")
    campaign = review.url.rstrip("/").rsplit("/", 1)[-1]
    board = review.locator("[data-place=source]")
    board.get_by_text("every assumption").click()
    changed = board.locator("tr", has_text="changed at launch")
    assert "30 h" in changed.inner_text()
    assert board.locator("tr").count() > 40
    review.locator("dd", has_text="core collapse in the Galaxy").wait_for()
    world.ask("POST", f"campaigns/{campaign}/close", body={})
