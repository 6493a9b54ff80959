"""A real server on a TCP port: 200 grabs of one tile, and a report to 1,000 open screens."""

import asyncio
import contextlib
import json
import os
import re
import statistics
import subprocess
import sys
import tempfile
import time
from collections import Counter
from pathlib import Path

import httpx
import websockets

ROOT = Path(__file__).resolve().parents[2]
N_GRABBERS = 200
N_SCREENS = 1_000
N_REPORTS = 15


def bench_grabs():
    """200 observers grab the same tile at once, through HTTP."""
    with _server(N_GRABBERS) as (url, scene):
        answers, seconds = asyncio.run(_grab(url, scene))
    codes = Counter(code for code, *_ in answers)
    waits_s = sorted(wait_s for *_, wait_s in answers)
    return {
        "ours_s": seconds,
        "error": f"{sum(n for code, n in codes.items() if code >= 500)} errors",
        "answers": {str(code): n for code, n in sorted(codes.items())},
        "with_alternative": sum(has for _, has, _ in answers),
        "p50_s": round(statistics.median(waits_s), 3),
        "p99_s": round(waits_s[int(0.99 * len(waits_s))], 3),
    }


def bench_report_to_screens():
    """Reports a second apart; how long until the number has moved on every one of 1,000 screens."""
    with _server(1) as (url, scene):
        waits_s = asyncio.run(_report(url, scene))
    return {
        "ours_s": statistics.median(waits_s),
        "error": None,
        "n_screens": N_SCREENS,
        "n_reports": N_REPORTS,
        "p50_s": round(statistics.median(waits_s), 3),
        "p99_s": round(sorted(waits_s)[int(0.99 * len(waits_s))], 3),
    }


@contextlib.contextmanager
def _server(n_observers):
    with tempfile.TemporaryDirectory() as folder:
        environ = {**os.environ, "QUARTERSKY_DATA": folder, "PYTHONUNBUFFERED": "1"}
        environ |= {"DJANGO_SETTINGS_MODULE": "campaigns.project.settings", "PYTHONPATH": str(ROOT)}
        environ.pop("DATABASE_URL", None)
        stage = [sys.executable, str(Path(__file__).with_name("server_stage.py"))]
        done = subprocess.run(
            [*stage, str(n_observers)], env=environ, capture_output=True, text=True, check=True
        )
        process = subprocess.Popen(
            [sys.executable, str(ROOT / "manage.py"), "serve", "--port", "0", "--no-worker"],
            env=environ,
            stdout=subprocess.PIPE,
            text=True,
        )
        try:
            yield _read_url(process), json.loads(done.stdout)
        finally:
            process.terminate()
            process.wait(timeout=20)
            process.stdout.close()


def _read_url(process):
    for line in process.stdout:
        if found := re.search(r"http://[\d.]+:\d+", line):
            time.sleep(4)  # the doors are warm then; a cold first answer is not what is measured
            return found[0]
    raise RuntimeError("the server did not start")


async def _grab(url, scene):
    limits = httpx.Limits(max_connections=N_GRABBERS)
    async with httpx.AsyncClient(base_url=url, timeout=120, limits=limits) as client:
        address = f"/api/v1/campaigns/{scene['campaign']}/claims"

        async def grab(observer):
            started = time.perf_counter()
            answer = await client.post(
                address,
                json={"tile": scene["tile"], "instrument": observer["instrument"]},
                headers={"Authorization": f"Bearer {observer['token']}"},
            )
            has_alternative = bool(answer.json().get("alternative"))
            return answer.status_code, has_alternative, time.perf_counter() - started

        started = time.perf_counter()
        answers = await asyncio.gather(*map(grab, scene["observers"]))
        return answers, time.perf_counter() - started


async def _report(url, scene):
    address = f"{url.replace('http', 'ws')}/live/campaigns/{scene['campaign']}/"
    async with contextlib.AsyncExitStack() as stack:
        screens = [
            await stack.enter_async_context(websockets.connect(address, max_size=None))
            for _ in range(N_SCREENS)
        ]
        moments = [[] for _ in screens]
        tasks = [
            asyncio.create_task(_listen(screen, its_moments))
            for screen, its_moments in zip(screens, moments, strict=True)
        ]
        waits_s = await _send_reports(url, scene, moments)
        for task in tasks:
            task.cancel()
        return waits_s


async def _listen(screen, moments):
    async for text in screen:
        message = json.loads(text)
        if message["type"] == "coverage":
            moments.append((message["searched"], time.perf_counter()))


async def _send_reports(url, scene, moments):
    observer, waits_s = scene["observers"][0], []
    async with httpx.AsyncClient(base_url=url, timeout=60) as client:
        for number in range(N_REPORTS):
            await asyncio.sleep(1)
            answer = await client.post(
                f"/api/v1/campaigns/{scene['campaign']}/frames",
                json=_frame(scene, observer, number),
                headers={"Authorization": f"Bearer {observer['token']}"},
            )
            accepted = time.perf_counter()
            assert answer.status_code == 201, answer.text
            waits_s += await _waits_s(moments, answer.json()["searched"], accepted)
    return waits_s


async def _waits_s(all_moments, searched, accepted):
    """For each screen, from the answer until it has heard the new number (0: before the answer)."""
    waits_s = []
    for moments in all_moments:
        while not any(abs(number - searched) < 1e-12 for number, _ in moments):
            await asyncio.sleep(0.002)
        moment = next(at for number, at in moments if abs(number - searched) < 1e-12)
        waits_s.append(max(0.0, moment - accepted))
    return waits_s


def _frame(scene, observer, number):
    return {
        "instrument": observer["instrument"],
        "ra_deg": scene["ra_deg"] + 0.2 * number,
        "dec_deg": scene["dec_deg"],
        "mid_time": scene["now"],
        "duration_s": 60.0 + number,
        "band": "clear",
        "limit_mag": 16.0,
        "limit_kind": "5 sigma",
        "is_examined": True,
        "examined_way": "image by eye",
    }
