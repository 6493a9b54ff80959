"""The live channel on PostgreSQL: the same promises."""

import asyncio

import psycopg
import pytest

from campaigns.events.apply import apply

pytestmark = [pytest.mark.asyncio, pytest.mark.postgresql]


@pytest.fixture
def database_url(postgresql_url):
    with psycopg.connect(postgresql_url, autocommit=True) as connection:
        connection.execute("DROP DATABASE IF EXISTS live WITH (FORCE)")
        connection.execute("CREATE DATABASE live")
    return postgresql_url.rsplit("/", 1)[0] + "/live"


async def test_snapshot_and_events_give_the_state_of_the_database(
    open_screen, start_on, database_url
):
    server, shell = await asyncio.to_thread(start_on, database_url)
    campaign = await asyncio.to_thread(shell, "make_campaign")
    await asyncio.to_thread(shell, "count_frame", campaign=campaign)
    async with open_screen(campaign, at=server) as screen:
        await screen.hear()
        seq = await asyncio.to_thread(shell, "say_status", campaign=campaign, count=50)
        await screen.hear_seq(seq)
        await asyncio.to_thread(shell, "count_frame", campaign=campaign)
        await screen.hear_seq(seq + 1)
        await screen.hear_coverage(seq + 1)
    state = screen.state
    for message in screen.messages:
        if message["type"] == "event":
            state = apply(state, message["event"])
    now = await asyncio.to_thread(shell, "snapshot", campaign=campaign)
    assert now == {"seq": seq + 1, "state": state}
