"""A real server, real sockets, and another process that writes."""

import asyncio
import base64
import socket

import httpx
import numpy as np
import orjson
import pytest
import websockets

from campaigns.events.apply import apply

pytestmark = pytest.mark.asyncio

_CLOSE = 8


async def test_a_new_screen_gets_the_state_and_what_comes_after(open_screen, shell, campaign):
    async with open_screen(campaign) as screen:
        first = await screen.hear()
        assert first["type"] == "snapshot"
        assert first["state"]["campaign"]["id"] == campaign
        seq = shell("say_status", campaign=campaign, count=5)
        await screen.hear_seq(seq)
        assert screen.seqs == list(range(first["seq"] + 1, seq + 1))


async def test_snapshot_and_events_give_the_state_of_the_database(open_screen, shell, campaign):
    async with open_screen(campaign) as screen:
        await screen.hear()
        seq = shell("say_status", campaign=campaign, count=3)
        await screen.hear_seq(seq)
    state = screen.state
    for message in screen.messages:
        if message["type"] == "event":
            state = apply(state, message["event"])
    assert {"seq": seq, "state": state} == shell("snapshot", campaign=campaign)


async def test_who_comes_back_hears_what_was_missed(open_screen, shell, campaign):
    before = shell("say_status", campaign=campaign)
    seq = shell("say_status", campaign=campaign, count=40)
    async with open_screen(campaign, since=before) as screen:
        await screen.hear_seq(seq)
    assert screen.seqs == list(range(before + 1, seq + 1))
    assert all(message["type"] != "snapshot" for message in screen.messages)


@pytest.mark.parametrize("since", ["999999", "nonsense", "-4", "1e3", ""])
async def test_a_number_that_never_was_means_from_the_start(open_screen, campaign, since):
    async with open_screen(campaign, since=since) as screen:
        assert (await screen.hear())["type"] == "snapshot"


async def test_a_heartbeat_follows_the_snapshot_with_the_newest_number(open_screen, campaign):
    async with open_screen(campaign) as screen:
        await screen.hear_until(lambda screen: screen.messages[-1:] != [] and _beats(screen))
        assert _beats(screen)[0]["seq"] == screen.seq


async def test_a_moved_clock_is_told(open_screen, shell, campaign):
    async with open_screen(campaign) as screen:
        await screen.hear()
        shell("move_clock", campaign=campaign, now="2027-03-14T06:00:00+00:00")
        await screen.hear_until(lambda screen: _of_type(screen, "clock"))
    assert _of_type(screen, "clock")[0]["now"] == "2027-03-14T06:00:00Z"


async def test_many_screens_hear_the_same(open_screen, shell, campaign):
    async def follow(started):
        async with open_screen(campaign) as screen:
            await screen.hear()
            started.release()
            await screen.hear_seq(2 + 20)
            return screen.seq, screen.seqs

    started = asyncio.Semaphore(0)
    screens = [asyncio.create_task(follow(started)) for _ in range(30)]
    for _ in screens:
        await started.acquire()
    await asyncio.to_thread(shell, "say_status", campaign=campaign, count=21)
    heard = await asyncio.gather(*screens)
    assert {seq for seq, _ in heard} == {22}
    assert all(seqs == list(range(2, 23)) for _, seqs in heard)


async def test_a_burst_drops_nobody_who_listens(open_screen, shell, campaign):
    async with open_screen(campaign) as screen:
        await screen.hear()
        seq = await asyncio.to_thread(
            shell, "say_status", campaign=campaign, count=3000, at_once=3000
        )
        await screen.hear_seq(seq, timeout_s=10)
    assert screen.seqs == list(range(2, seq + 1))


async def test_a_screen_that_does_not_listen_is_told_to_ask_again(
    server, open_screen, shell, campaign
):
    """It holds nobody up, and what it heard before has no hole."""
    slow = _raw_socket(server, campaign)
    async with open_screen(campaign) as quick:
        await quick.hear()
        # More than its queue and all buffers on the way hold: 5,000 times 2 kB.
        seq = 1 + 5000
        many = {"count": 5000, "at_once": 100, "padding": 2000}
        writing = asyncio.to_thread(shell, "say_status", campaign=campaign, **many)
        await asyncio.gather(writing, quick.hear_seq(seq, timeout_s=20))
    messages = await asyncio.to_thread(_read_all, slow)
    assert messages[-1] == {"type": "ask-again"}
    numbers = [m["event"]["seq"] for m in messages if m["type"] == "event"]
    assert numbers == list(range(2, 2 + len(numbers)))
    assert 0 < numbers[-1] < seq


async def test_frames_move_the_coverage_of_every_screen(open_screen, shell, campaign):
    """The pixels that screens add up are those of a ledger rebuilt from the rows."""
    async with open_screen(campaign) as screen:
        await screen.hear_until(lambda screen: screen.coverage)
        for dec_deg in (8.0, 10.0):
            seq = await asyncio.to_thread(shell, "count_frame", campaign=campaign, dec_deg=dec_deg)
            await screen.hear_coverage(seq)
    expected = await asyncio.to_thread(shell, "coverage", campaign=campaign)
    last = screen.coverage[-1]
    assert 0 < last["searched"] == pytest.approx(expected["searched"], abs=1e-9)
    assert last["imaged"] == pytest.approx(expected["imaged"], abs=1e-9)
    steps = [0] * len(expected["steps"])
    for message in screen.coverage:
        for index, step in _changed(message):
            steps[index] = step
    assert steps == expected["steps"]


# --- who may watch ------------------------------------------------------------------------


async def test_a_private_campaign_asks_for_an_account(open_screen, shell):
    private = shell("make_campaign", is_public=False)
    async with open_screen(private) as screen:
        message = await screen.hear()
        assert message["type"] == "problem"
        assert message["problem"]["code"] == "not-found"
        assert message["problem"]["advice"]
        with pytest.raises(websockets.ConnectionClosed) as closed:
            await screen.hear()
        assert closed.value.rcvd.code == 4404


async def test_a_program_watches_with_its_token(open_screen, shell):
    private = shell("make_campaign", is_public=False)
    token = shell("make_person")["token"]
    async with open_screen(private, token=token) as screen:
        assert (await screen.hear())["type"] == "snapshot"


async def test_an_unknown_token_opens_nothing(open_screen, shell, campaign):
    async with open_screen(campaign, token="guessed") as screen:
        assert (await screen.hear())["problem"]["code"] == "not-signed-in"


async def test_a_token_in_the_address_opens_nothing(server, shell):
    private = shell("make_campaign", is_public=False)
    token = shell("make_person")["token"]
    address = server.socket_address(private, f"?token={token}&access_token={token}")
    async with websockets.connect(address, proxy=None) as opened:
        assert orjson.loads(await opened.recv())["type"] == "problem"


async def test_a_browser_watches_with_its_session(open_screen, server, shell):
    private = shell("make_campaign", is_public=False)
    person = shell("make_person")
    with httpx.Client(base_url=server.url, trust_env=False) as browser:
        body = {"name": person["name"], "password": "a dark clear night"}
        assert browser.post("/api/v1/session", json=body).status_code == 200
        cookie = f"quartersky_session={browser.cookies['quartersky_session']}"
    headers = {"Cookie": cookie, "Origin": server.url}
    async with open_screen(private, headers=headers) as screen:
        assert (await screen.hear())["type"] == "snapshot"


@pytest.mark.parametrize("origin", ["https://elsewhere.example", "null", "http://127.0.0.1:1"])
async def test_a_page_of_another_site_opens_no_socket(open_screen, campaign, origin):
    with pytest.raises(websockets.InvalidStatus) as refused:
        async with open_screen(campaign, headers={"Origin": origin}):
            pass
    assert refused.value.response.status_code == 403


async def test_an_address_that_does_not_exist_is_refused(server):
    address = server.url.replace("http", "ws") + "/live/nothing/"
    with pytest.raises(websockets.InvalidStatus):
        async with websockets.connect(address, proxy=None):
            pass


@pytest.mark.slow
async def test_who_may_no_longer_watch_is_shown_out_at_the_next_heartbeat(open_screen, shell):
    private = shell("make_campaign", is_public=False)
    gone, other = shell("make_person"), shell("make_person")
    async with (
        open_screen(private, token=gone["token"]) as shut_out,
        open_screen(private, token=other["token"]) as stays,
    ):
        await shut_out.hear()
        await stays.hear()
        shell("revoke_tokens", person=gone["id"])
        await shut_out.hear_until(lambda screen: _of_type(screen, "problem"), timeout_s=30)
        assert shut_out.messages[-1]["problem"]["code"] == "not-signed-in"
        await stays.hear_until(lambda screen: len(_beats(screen)) >= 2, timeout_s=30)
        seq = shell("say_status", campaign=private)
        await stays.hear_seq(seq)


# --- several processes --------------------------------------------------------------------


async def test_two_servers_on_one_database_converge(open_screen, start_server, shell, campaign):
    second = await asyncio.to_thread(start_server)
    async with open_screen(campaign) as here, open_screen(campaign, at=second) as there:
        await here.hear()
        await there.hear()
        seq = await asyncio.to_thread(shell, "say_status", campaign=campaign, count=10)
        await asyncio.gather(here.hear_seq(seq), there.hear_seq(seq))
        assert here.seqs == there.seqs == list(range(2, seq + 1))


async def test_after_a_kill_the_screens_of_another_server_lose_nothing(
    open_screen, start_server, shell, campaign
):
    doomed = await asyncio.to_thread(start_server)
    async with open_screen(campaign, at=doomed) as screen:
        await screen.hear()
        seq = await asyncio.to_thread(shell, "say_status", campaign=campaign, count=3)
        await screen.hear_seq(seq)
        doomed.kill()
        newest = await asyncio.to_thread(shell, "say_status", campaign=campaign, count=7)
    async with open_screen(campaign, since=seq) as again:
        await again.hear_seq(newest)
    assert again.seqs == list(range(seq + 1, newest + 1))


# --- help for these tests -----------------------------------------------------------------


def _of_type(screen, kind):
    return [message for message in screen.messages if message["type"] == kind]


def _changed(message):
    changed = message["changed"]
    indices = np.frombuffer(base64.b64decode(changed["indices_b64"]), "<u4")
    steps = np.frombuffer(base64.b64decode(changed["detected_b64"]), "u1")
    return zip(indices.tolist(), steps.tolist(), strict=True)


def _beats(screen):
    return _of_type(screen, "heartbeat")


def _raw_socket(server, campaign):
    """A socket that shakes hands and then does not read, with a small buffer."""
    host, port = server.url.removeprefix("http://").split(":")
    raw = socket.socket()
    raw.setsockopt(socket.SOL_SOCKET, socket.SO_RCVBUF, 4096)
    raw.connect((host, int(port)))
    raw.sendall(
        f"GET /live/campaigns/{campaign}/ HTTP/1.1\r\nHost: {host}:{port}\r\n"
        "Connection: Upgrade\r\nUpgrade: websocket\r\nSec-WebSocket-Version: 13\r\n"
        "Sec-WebSocket-Key: AAAAAAAAAAAAAAAAAAAAAA==\r\n\r\n".encode()
    )
    return raw


def _read_all(raw):
    """Everything up to the close frame."""
    raw.settimeout(10)
    data = bytearray()
    while b"\r\n\r\n" not in data:
        data += raw.recv(65536)
    frames = bytes(data).partition(b"\r\n\r\n")[2]
    messages = []
    while True:
        for opcode, payload, rest in _frames(frames):
            frames = rest
            if opcode == _CLOSE:
                raw.close()
                return messages
            messages.append(orjson.loads(payload))
        frames += raw.recv(1 << 20)


def _frames(data):
    """(opcode, payload, rest) of whole frames: unmasked, in one piece (RFC 6455, 5.2)."""
    while len(data) >= 2:
        opcode, length, start = data[0] & 15, data[1], 2
        if length >= 126:
            n_bytes = 2 if length == 126 else 8
            length, start = int.from_bytes(data[2 : 2 + n_bytes], "big"), 2 + n_bytes
        if len(data) < start + length:
            return
        payload, data = data[start : start + length], data[start + length :]
        yield opcode, payload, data
