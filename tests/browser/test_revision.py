"""A better position arrives: the coordinator adds the file, and every screen says what changed."""

import json
from datetime import UTC, datetime, timedelta

import pytest

from tests.browser.conftest import LAPTOP, PHONE
from tests.browser.test_main_job import is_marked, launch_on_the_page, mark
from tests.browser.world import COORDINATOR, OBSERVER, midnight_alert

pytestmark = [pytest.mark.browser, pytest.mark.xdist_group("browser")]


def later_alert(world, campaign, *, seconds):
    """The launch alert again, narrower, from a message so many seconds later."""
    alert = json.loads(midnight_alert(world.ra_deg))
    launched = world.ask("GET", f"campaigns/{campaign}")["state"]["campaign"]["event_time"]
    event_time = datetime.fromisoformat(launched) + timedelta(seconds=seconds)
    alert["event_time"] = event_time.astimezone(UTC).isoformat()
    alert["id"] = "later"
    alert["constraints"][0]["radius_deg"] /= 2.0
    return json.dumps(alert).encode()


@pytest.fixture
def job(world, open_screen):
    board = open_screen(COORDINATOR, size=LAPTOP)
    campaign = launch_on_the_page(board, world, "A better position")
    yield board, campaign
    world.ask("POST", f"campaigns/{campaign}/close", body={})


def add_from_a_file(board, data):
    with board.expect_file_chooser() as chooser:
        board.get_by_role("button", name="add a constraint from a file").click()
    file = {"name": "later.json", "mimeType": "application/json", "buffer": data}
    chooser.value.set_files(file)


def pixels_held(board):
    return board.evaluate(
        "() => { const { region, coverage } = quarterskyBoard.model;"
        " return [region?.revision, region?.pixels.length, coverage?.detected.length]; }"
    )


def test_a_constraint_from_a_file_reaches_every_screen(world, open_screen, job):
    board, campaign = job
    phone = open_screen(OBSERVER, size=PHONE)
    phone.goto(f"/c/{campaign}/")
    phone.locator("[data-region=change]", has_text="As the alert came").wait_for()
    mark(phone)
    before = pixels_held(board)
    # Too far apart in time: only with the coordinator's word.
    add_from_a_file(board, later_alert(world, campaign, seconds=-60))
    board.get_by_role("button", name="they belong together: combine them").click()
    for screen in (board, phone):
        screen.locator("[data-region=change]", has_text="Revision 2: Added").wait_for()
        screen.wait_for_function(
            "() => quarterskyBoard.model.region?.revision === 2"
            " && quarterskyBoard.model.coverage?.detected.length"
            " === quarterskyBoard.model.region.pixels.length"
        )
    assert is_marked(phone)
    assert pixels_held(board)[1] < before[1]
    # Onlookers and observers read; only coordinators change.
    assert phone.get_by_role("button", name="add a constraint from a file").count() == 0
    phone.get_by_role("button", name="constraints").click()
    phone.get_by_text("2: cone of later, in use").wait_for()
    assert phone.get_by_role("button", name="switch off").count() == 0


def test_a_constraint_is_switched_off_and_retracted_by_hand(world, job):
    board, campaign = job
    add_from_a_file(board, later_alert(world, campaign, seconds=0))
    board.locator("[data-region=change]", has_text="Revision 2").wait_for()
    board.get_by_role("button", name="constraints", exact=True).click()
    first = board.locator("[data-constraint='1']")
    first.get_by_role("button", name="switch off").click()
    board.get_by_text("1: cone of", exact=False).filter(has_text="switched off").wait_for()
    first.get_by_role("button", name="switch on").click()
    board.locator("[data-region=change]", has_text="Revision 4").wait_for()
    board.locator("[data-constraint='2']").get_by_role("button", name="retract").click()
    board.get_by_role("button", name="retract constraint 2").click()
    board.get_by_text("2: cone of later, retracted").wait_for()
    state = world.ask("GET", f"campaigns/{campaign}")["state"]
    assert state["region"]["revision"] == 5
    assert "retracted" in state["region"]["change"]["said"]
