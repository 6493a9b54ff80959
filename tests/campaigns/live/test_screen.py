import asyncio

import orjson
import pytest

from campaigns.live.screen import Screen


async def _heard(screen):
    heard = []
    async with asyncio.timeout(2):
        while (text := await screen.next_text()) is not None:
            heard.append(text)
    return heard


@pytest.mark.asyncio
async def test_messages_come_out_in_order():
    screen = Screen(queue_length=3)
    for text in "abc":
        screen.give(text)
    assert [await screen.next_text() for _ in range(3)] == ["a", "b", "c"]


@pytest.mark.asyncio
async def test_a_full_queue_becomes_one_request_to_ask_again():
    screen = Screen(queue_length=3)
    for text in "abcdefgh":
        screen.give(text)
    heard = await _heard(screen)
    assert [orjson.loads(text) for text in heard] == [{"type": "ask-again"}]


@pytest.mark.asyncio
async def test_a_long_start_is_no_reason_to_ask_again():
    screen = Screen(queue_length=3)
    screen.start_with(["start"] * 50)
    assert [await screen.next_text() for _ in range(50)] == ["start"] * 50
    screen.give("then")
    assert await screen.next_text() == "then"


@pytest.mark.asyncio
async def test_who_waits_is_woken():
    screen = Screen(queue_length=3)
    waiting = asyncio.create_task(screen.next_text())
    await asyncio.sleep(0)
    screen.give("news")
    assert await asyncio.wait_for(waiting, 1) == "news"


@pytest.mark.asyncio
async def test_after_the_last_message_nothing_is_added():
    screen = Screen(queue_length=3)
    screen.end_with("last")
    screen.give("too late")
    assert await _heard(screen) == ["last"]
