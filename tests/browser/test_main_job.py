"""From an alert file to moving coverage on two screens, by the hands of the people who do it."""

from datetime import UTC, datetime, timedelta

import pytest

from tests.browser.conftest import LAPTOP, PHONE
from tests.browser.world import COORDINATOR, OBSERVER, fits_frame, midnight_alert

# One worker: one server and one Chromium for all of them.
pytestmark = [pytest.mark.browser, pytest.mark.xdist_group("browser")]


def launch_on_the_page(page, world, title):
    page.goto("/launch/")
    alert = {"name": "alert.json", "mimeType": "application/json"}
    page.set_input_files("input[type=file]", {**alert, "buffer": midnight_alert(world.ra_deg)})
    page.locator("dl.facts", has_text="hold 90 %").wait_for()
    page.get_by_label("name of the campaign").fill(title)
    page.get_by_role("button", name="go live", exact=True).click()
    page.get_by_role("button", name="yes, go live").click()
    page.wait_for_url("**/c/**")
    return page.url.rstrip("/").rsplit("/", 1)[-1]


def take_the_best_tile(page, campaign):
    """One tap; two when the page must first be opened from the Board."""
    page.goto(f"/c/{campaign}/tonight/")
    page.get_by_role("button", name="take it").click()
    page.get_by_role("button", name="give it back").wait_for()


def held_claim(world, campaign):
    claims = world.ask("GET", f"campaigns/{campaign}")["state"]["claims"].values()
    return next(claim for claim in claims if claim["state"] == "held")


def tile_of(world, campaign, number):
    return world.ask("GET", f"campaigns/{campaign}")["state"]["tiles"][str(number)]


def examine_by_eye(page):
    page.get_by_label("limiting magnitude").fill("13.5")
    page.locator("input[data-choice=limit_kind][value='5 sigma']").check()
    page.locator("input[data-choice=examined_way][value='image by eye']").check()
    page.get_by_label("shows stars to").fill("16")


def share_on(board, name):
    return float(board.locator(f"[data-share={name}]").inner_text())


def wait_for_share(board, name, least):
    board.wait_for_function(
        "([name, least]) => parseFloat(document.querySelector(`[data-share=${name}]`)"
        ".textContent) > least",
        arg=[name, least],
    )
    return share_on(board, name)


def mark(page):
    """A page that was loaded again has lost this."""
    page.evaluate("globalThis.notLoadedAgain = true")


def is_marked(page):
    return page.evaluate("globalThis.notLoadedAgain === true")


@pytest.fixture
def job(world, open_screen):
    """(board page of the coordinator, campaign) just after a launch by hand."""
    board = open_screen(COORDINATOR, size=LAPTOP)
    campaign = launch_on_the_page(board, world, "An overhead trial")
    board.locator("[data-share=searched]").wait_for()
    yield board, campaign
    # What is still held is given back: the lens is free for the next test.
    world.ask("POST", f"campaigns/{campaign}/close", body={})


def test_a_fits_frame_on_the_phone_moves_the_board_without_a_reload(world, open_screen, job):
    board, campaign = job
    mark(board)
    phone = open_screen(OBSERVER, size=PHONE)
    take_the_best_tile(phone, campaign)
    tile = tile_of(world, campaign, held_claim(world, campaign)["tile"])
    phone.get_by_role("button", name="I shot it").click()
    picture = fits_frame(
        ra_deg=tile["ra_deg"],
        dec_deg=tile["dec_deg"],
        mid_at=datetime.now(UTC) - timedelta(minutes=3),
    )
    frame = {"name": "frame.fits", "mimeType": "application/octet-stream", "buffer": picture}
    phone.set_input_files("input[type=file]", frame)
    shown = phone.locator(".header-table").inner_text()
    assert "CRVAL1" in shown
    assert "secret" not in shown
    examine_by_eye(phone)
    phone.locator("[data-send]").click()
    phone.get_by_text("counts: searched").wait_for()
    assert wait_for_share(board, "imaged", 0.5) > wait_for_share(board, "searched", 0.1)
    assert is_marked(board)
    (sent,) = world.ask("GET", f"campaigns/{campaign}")["state"]["frames"].values()
    assert sent["is_examined"]
    assert sent["limit_mag"] == 13.5


def test_a_typed_frame_counts_and_its_withdrawal_takes_it_back(world, open_screen, job):
    board, campaign = job
    phone = open_screen(OBSERVER, size=PHONE)
    take_the_best_tile(phone, campaign)
    phone.get_by_role("button", name="I shot it").click()
    # Everything but the depth stands there already, from the claim.
    for name in ("ra_deg", "dec_deg", "mid_time", "duration_s", "band"):
        assert phone.locator(f"input[name={name}]").input_value()
    examine_by_eye(phone)
    phone.locator("[data-send]").click()
    phone.get_by_text("counts: searched").wait_for()
    wait_for_share(board, "searched", 0.1)
    phone.get_by_role("button", name="undo").click()
    board.wait_for_function(
        "() => parseFloat(document.querySelector('[data-share=searched]').textContent) === 0"
    )


def test_a_tile_given_back_is_free_for_the_next(world, open_screen, job):
    _, campaign = job
    phone = open_screen(OBSERVER, size=PHONE)
    take_the_best_tile(phone, campaign)
    number = held_claim(world, campaign)["tile"]
    phone.get_by_role("button", name="give it back").click()
    phone.get_by_text("is free again").wait_for()
    states = {
        claim["state"]
        for claim in world.ask("GET", f"campaigns/{campaign}")["state"]["claims"].values()
        if claim["tile"] == number
    }
    assert states == {"released"}


def test_the_board_hears_of_a_claim_by_its_socket(open_screen, job):
    board, campaign = job
    mark(board)
    phone = open_screen(OBSERVER, size=PHONE)
    take_the_best_tile(phone, campaign)
    board.locator("[data-place=recent]", has_text=OBSERVER).wait_for()
    assert board.locator("[data-place=way]").inner_text() == "live"
    assert is_marked(board)


def test_the_plan_appears_on_the_board(job):
    board, _ = job
    board.get_by_role("button", name="plan now").click()
    board.get_by_text("of the best possible").wait_for(timeout=30_000)
