"""Coverage messages: at once, then at most five a second, with the changed pixels only."""

import asyncio
import base64
import itertools
import time
from datetime import UTC, datetime

import numpy as np
import orjson
import pytest
import pytest_asyncio

from campaigns.ledger_replica import Coverage
from campaigns.live import coverage as coverage_module
from campaigns.live.coverage import CoverageTeller

EVERY_S = 0.2


class Ledger:
    """What the replica answers, and when it was asked."""

    def __init__(self):
        self.detected = np.zeros(50)
        self.through_seq = 0
        self.is_broken = False
        self.n_asked = 0

    async def run(self, function, *args):
        await asyncio.sleep(0)
        return function(*args)

    def get_coverage(self, campaign_id):
        self.n_asked += 1
        if self.is_broken:
            raise OSError("no database")
        return Coverage(
            revision=1,
            through_seq=self.through_seq,
            imaged=float(np.count_nonzero(self.detected)) / 50,
            searched=float(self.detected.mean()),
            residual_outside=0.001,
            at=datetime(2027, 3, 14, 5, 6, 7, tzinfo=UTC),
            detected=self.detected.copy(),
            history=(),
        )

    def count_frame(self, *pixels, detected=0.5):
        self.through_seq += 1
        self.detected[list(pixels)] = detected


class Heard(list):
    """Messages with the time at which they came."""

    def __call__(self, text):
        self.append((time.monotonic(), orjson.loads(text)))

    async def wait(self, count):
        async with asyncio.timeout(5):
            while len(self) < count:
                await asyncio.sleep(0.005)
        return [message for _, message in self]


@pytest_asyncio.fixture
async def stage(monkeypatch):
    ledger, heard = Ledger(), Heard()
    monkeypatch.setattr(coverage_module, "get_coverage", ledger.get_coverage)
    teller = CoverageTeller("c", ledger, heard, every_s=EVERY_S)
    yield ledger, heard, teller
    teller.close()


def _changed(message):
    changed = message["changed"]
    indices = np.frombuffer(base64.b64decode(changed["indices_b64"]), "<u4")
    steps = np.frombuffer(base64.b64decode(changed["detected_b64"]), "u1")
    return dict(zip(indices.tolist(), steps.tolist(), strict=True))


pytestmark = pytest.mark.asyncio


async def _started(ledger, heard, teller):
    """The screens know the numbers, and the first interval is over."""
    teller.start_over()
    await heard.wait(1)
    await asyncio.sleep(1.5 * EVERY_S)
    heard.clear()


async def test_at_first_the_numbers_come_without_pixels(stage):
    ledger, heard, teller = stage
    ledger.count_frame(1, 2)
    teller.start_over()
    (message,) = await heard.wait(1)
    assert (message["since_seq"], message["through_seq"]) == (1, 1)
    assert message["imaged"] == 0.04
    assert _changed(message) == {}


async def test_a_frame_moves_the_numbers_at_once_with_its_pixels_only(stage):
    ledger, heard, teller = stage
    await _started(*stage)
    ledger.count_frame(3, 7)
    started = time.monotonic()
    teller.hear("frame.counted")
    (message,) = await heard.wait(1)
    assert heard[0][0] - started < EVERY_S / 2
    assert _changed(message) == {3: 128, 7: 128}
    assert (message["since_seq"], message["through_seq"]) == (0, 1)


async def test_a_burst_becomes_few_messages_and_none_is_lost(stage):
    ledger, heard, teller = stage
    await _started(*stage)
    started = time.monotonic()
    for pixel in range(50):
        ledger.count_frame(pixel)
        teller.hear("frame.counted")
        await asyncio.sleep(0.01)
    duration_s = time.monotonic() - started
    await asyncio.sleep(1.5 * EVERY_S)
    messages = [message for _, message in heard]
    assert len(messages) <= duration_s / EVERY_S + 2
    pixels = {}
    for before, after in itertools.pairwise(messages):
        assert after["since_seq"] == before["through_seq"]
    for message in messages:
        pixels |= _changed(message)
    assert pixels == dict.fromkeys(range(50), 128)
    assert messages[-1]["through_seq"] == 50


async def test_events_that_move_nothing_are_not_even_counted(stage):
    ledger, heard, teller = stage
    await _started(*stage)
    n_asked = ledger.n_asked
    for kind in ("claim.held", "plan.made", "observer.status", "tiles.laid"):
        teller.hear(kind)
    await asyncio.sleep(2 * EVERY_S)
    assert (ledger.n_asked, heard) == (n_asked, [])


async def test_the_same_numbers_are_not_told_twice(stage):
    ledger, heard, teller = stage
    await _started(*stage)
    ledger.through_seq += 1
    teller.hear("frame.counted")
    await asyncio.sleep(2 * EVERY_S)
    assert heard == []
    ledger.count_frame(5)
    teller.hear("frame.counted")
    (message,) = await heard.wait(1)
    assert (message["since_seq"], message["through_seq"]) == (0, 2)


async def test_a_new_region_makes_every_screen_read_anew(stage):
    ledger, heard, teller = stage
    await _started(*stage)
    ledger.through_seq, ledger.detected = 9, np.zeros(70)
    teller.hear("region.revised")
    (message,) = await heard.wait(1)
    assert message["since_seq"] == message["through_seq"] == 9


async def test_a_broken_database_is_asked_again_at_the_next_event(stage):
    ledger, heard, teller = stage
    await _started(*stage)
    ledger.is_broken = True
    teller.hear("frame.counted")
    await asyncio.sleep(1.5 * EVERY_S)
    assert teller.n_faults == 1
    ledger.is_broken = False
    ledger.count_frame(4)
    teller.hear("frame.counted")
    assert _changed((await heard.wait(1))[0]) == {4: 128}
