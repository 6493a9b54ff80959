"""The hub against a database of lists: every screen hears every event once, in order."""

import asyncio
import random

import orjson
import pytest

from campaigns.live import hub as hub_module
from campaigns.live.hub import CampaignHub
from campaigns.live.messages import event_text, snapshot_text
from campaigns.live.reading import Head, NumberedText


class Rows:
    """The table of events; reads take a random while, as threads do."""

    def __init__(self, seed):
        self.seq = 0
        self.first_kept = 1
        self.n_snapshots = 0
        self.clock_now = None
        self._rng = random.Random(seed)

    async def run(self, function, *args, **kwargs):
        await self._dawdle()
        answer = function(*args, **kwargs)
        await self._dawdle()
        return answer

    async def _dawdle(self):
        for _ in range(self._rng.randrange(4)):
            await asyncio.sleep(0)

    def read_heads(self, campaign_ids):
        return {key: Head(self.seq, self.clock_now) for key in campaign_ids}

    def read_events(self, campaign_id, *, after_seq, most):
        first = max(after_seq + 1, self.first_kept)
        numbers = range(first, min(self.seq, after_seq + most) + 1)
        return [NumberedText(n, event_text({"seq": n, "kind": "x"}), "x") for n in numbers]

    def read_snapshot_text(self, campaign_id):
        self.n_snapshots += 1
        text = snapshot_text(seq=self.seq, now="", state={"n": self.seq})
        return NumberedText(self.seq, text)


class NoCoverage:
    latest_text = ""

    def __init__(self, *args, **kwargs):
        pass

    def hear(self, kind):
        pass

    def start_over(self):
        pass

    def close(self):
        pass


@pytest.fixture
def make_hub(monkeypatch):
    hubs = []

    def make(rows, *, queue_length=10_000):
        for name in ("read_heads", "read_events", "read_snapshot_text"):
            monkeypatch.setattr(hub_module, name, getattr(rows, name))
        monkeypatch.setattr(hub_module, "CoverageTeller", NoCoverage)
        hub = CampaignHub("c", rows, queue_length=queue_length, coverage_every_s=0.2)
        hubs.append(hub)
        return hub

    yield make
    for hub in hubs:
        hub.close()


async def _drain(screen):
    heard = []
    while True:
        try:
            text = await asyncio.wait_for(screen.next_text(), 0.02)
        except TimeoutError:
            return heard
        if text is None:
            return heard
        heard.append(orjson.loads(text))


def _numbers(messages, *, since):
    """The numbers heard, starting from a snapshot when there is one."""
    numbers = [since]
    for message in messages:
        if message["type"] == "snapshot":
            numbers = [message["seq"]]
        elif message["type"] == "event":
            numbers.append(message["event"]["seq"])
    return numbers


@pytest.mark.asyncio
@pytest.mark.parametrize("seed", range(25))
async def test_no_hole_and_no_double_whenever_screens_join(make_hub, seed):
    rows, rng = Rows(seed), random.Random(seed)
    rows.seq = rng.randrange(30)
    hub = make_hub(rows)
    joins = []

    async def write():
        for _ in range(60):
            rows.seq += rng.randrange(3)
            if rng.random() < 0.7:
                hub.wake()
            await asyncio.sleep(0)
        hub.wake()

    async def join():
        for _ in range(rng.randrange(60)):
            await asyncio.sleep(0)
        since = rng.choice([None, 0, rows.seq, max(0, rows.seq - 5), rows.seq + 9])
        joins.append((since, await hub.join(since=since)))

    await asyncio.gather(write(), *(join() for _ in range(12)))
    for since, screen in joins:
        numbers = _numbers(await _drain(screen), since=since)
        assert numbers == list(range(numbers[0], rows.seq + 1))


@pytest.mark.asyncio
async def test_who_was_away_shortly_hears_only_what_was_missed(make_hub):
    rows = Rows(1)
    rows.seq = 100
    hub = make_hub(rows)
    heard = await _drain(await hub.join(since=97))
    assert [message["type"] for message in heard] == ["event"] * 3 + ["heartbeat"]
    assert rows.n_snapshots == 0


@pytest.mark.asyncio
async def test_who_was_away_long_gets_a_snapshot(make_hub):
    rows = Rows(1)
    rows.seq = 5000
    heard = await _drain(await make_hub(rows).join(since=3))
    assert [message["type"] for message in heard] == ["snapshot", "heartbeat"]


@pytest.mark.asyncio
async def test_screens_that_come_together_share_a_snapshot(make_hub):
    rows = Rows(1)
    rows.seq = 10
    hub = make_hub(rows)
    screens = await asyncio.gather(*(hub.join(since=None) for _ in range(50)))
    for screen in screens:
        assert (await _drain(screen))[0]["seq"] == 10
    assert rows.n_snapshots == 1


@pytest.mark.asyncio
async def test_a_hole_in_the_log_makes_all_ask_again(make_hub):
    rows = Rows(1)
    rows.seq = 10
    hub = make_hub(rows)
    screen = await hub.join(since=None)
    rows.seq, rows.first_kept = 20, 15
    await hub.catch_up()
    assert (await _drain(screen))[-1] == {"type": "ask-again"}


@pytest.mark.asyncio
async def test_a_database_that_went_back_makes_all_ask_again(make_hub):
    rows = Rows(1)
    rows.seq = 10
    hub = make_hub(rows)
    screen = await hub.join(since=None)
    rows.seq = 4
    hub.see_head(Head(4, None))
    assert (await _drain(screen))[-1] == {"type": "ask-again"}
    assert hub.seq == 4


@pytest.mark.asyncio
async def test_a_slow_screen_never_holds_up_the_others(make_hub):
    rows = Rows(1)
    hub = make_hub(rows, queue_length=20)
    slow, quick = await hub.join(since=None), await hub.join(since=None)
    n_heard = len(await _drain(quick))
    for _ in range(10):
        rows.seq += 5
        await hub.catch_up()
        n_heard += len(await _drain(quick))
    assert n_heard == 2 + 50
    assert await _drain(slow) == [{"type": "ask-again"}]


@pytest.mark.asyncio
async def test_a_failing_database_is_tried_again(make_hub, monkeypatch):
    rows = Rows(1)
    hub = make_hub(rows)
    screen = await hub.join(since=None)

    def fail(*args, **kwargs):
        raise OSError("no database")

    with monkeypatch.context() as broken:
        broken.setattr(hub_module, "read_events", fail)
        rows.seq = 1
        hub.wake()
        while not hub.n_faults:
            await asyncio.sleep(0)
    hub.wake()
    assert _numbers(await _drain(screen), since=None) == [0, 1]
