"""The whole job, driven from outside: real HTTP, real WebSockets, the campaign's own clock."""

from __future__ import annotations

import asyncio
import base64
import contextlib
import json
import time
from collections.abc import AsyncIterator
from dataclasses import dataclass
from datetime import timedelta
from typing import Any

import httpx
import numpy as np

from campaigns.events.iso_time import iso_time, read_iso_time
from campaigns.rehearsal.agreement import check_agreement
from campaigns.rehearsal.board_client import BoardClient, new_http
from campaigns.rehearsal.cast import CastMember, gather_cast, invent_password, make_coordinator
from campaigns.rehearsal.demo_network import Demo, read_demo
from campaigns.rehearsal.hidden_source import Sources, draw_sources, share_found
from campaigns.rehearsal.hunt import Hunt
from campaigns.rehearsal.outcome import Outcome
from campaigns.rehearsal.screen import Screen
from campaigns.rehearsal.simulated_observer import SimulatedObserver
from campaigns.rehearsal.stage import Say, Stage
from campaigns.rehearsal.timeline import Timeline
from campaigns.rehearsal.weather import draw_weather

# Sources hidden afterwards to hold `searched` against: statistical error below 0.003.
N_MANY_SOURCES = 40_000
# Screens that keep a whole state and are compared at the end; the others count events.
N_FULL_SCREENS = 2
PLAN_TIMEOUT_S = 120.0
SAY_EVERY_S = 3.0


@dataclass(frozen=True)
class Options:
    """What the command was asked for; no speed: as fast as the server answers."""

    n_observers: int
    hours: float
    seed: int
    speed: float | None


@dataclass(frozen=True)
class Dice:
    """One generator for each purpose, so that one habit's draws never shift another's."""

    network: np.random.Generator
    keys: np.random.Generator
    source: np.random.Generator
    hunt: np.random.Generator
    many: np.random.Generator
    observers: list[np.random.Generator]


def make_dice(seed: int, n_observers: int) -> Dice:
    """All randomness of a rehearsal."""
    network, keys, source, hunt, many, people = np.random.default_rng(seed).spawn(6)
    return Dice(network, keys, source, hunt, many, people.spawn(n_observers))


async def run_rehearsal(url: str, link_token: str, options: Options, *, say: Say) -> Outcome:
    """Cast, launch, play the night, settle accounts."""
    dice = make_dice(options.seed, options.n_observers)
    demo = read_demo(options.n_observers, dice.network)
    async with new_http(url) as http:
        password = invent_password(dice.keys)
        coordinator = await make_coordinator(http, link_token, password=password, keys=dice.keys)
        cast = await gather_cast(coordinator, demo.observers, say=say)
        run = Run(http, options, dice, demo, coordinator, cast, say)
        return await run.play(password)


@dataclass
class Run:
    """One rehearsal under way."""

    http: httpx.AsyncClient
    options: Options
    dice: Dice
    demo: Demo
    coordinator: BoardClient
    cast: list[CastMember]
    say: Say
    _clock_s: float = -1.0

    async def play(self, password: str) -> Outcome:
        """From the alert file to the last number."""
        started = time.monotonic()
        launch = await self._launch()
        campaign = launch["campaign"]
        async with self._open_screens(campaign) as screens:
            plan_s = await self._first_plan(campaign, screens, started)
            stage = await self._set_stage(campaign, screens[0])
            await self._play_night(stage, screens)
            snapshot, coverage = await check_agreement(self.coordinator, campaign, screens)
            self.say(
                f"{len(screens)} open screens are at event {snapshot['seq']}; "
                f"{N_FULL_SCREENS} of them rebuilt the same state from their own events "
                "as the server's snapshot holds"
            )
            return await self._settle(stage, snapshot, coverage, plan_s, password)

    async def _launch(self) -> dict[str, Any]:
        alert = json.loads(self.demo.alert)
        event_at = read_iso_time(alert["event_time"])
        scenario = self.demo.scenario
        self._launched_at = event_at + timedelta(seconds=scenario["alert_delay_s"])
        upload = await self.coordinator.post_file("region", "alert.json", self.demo.alert)
        areas = upload["region"]["area_deg2"]
        self.say(f"the alert's region: 50 % in {areas['50']:.0f} deg2, 90 % in {areas['90']:.0f}")
        launch: dict[str, Any] = await self.coordinator.post(
            "campaigns",
            {
                "upload": upload["upload"],
                "title": scenario["title"],
                "source": scenario["source"],
                "draft": False,
                "is_public": True,
                "is_rehearsal": True,
                "clock_now": iso_time(self._launched_at),
            },
        )
        self.say(f"live with {launch['n_tiles']} tiles: {self.http.base_url}{launch['url']}")
        return launch

    @contextlib.asynccontextmanager
    async def _open_screens(self, campaign: str) -> AsyncIterator[list[Screen]]:
        """One socket for the coordinator and one for every observer, open until the end."""
        base = str(self.http.base_url).replace("http", "ws", 1).rstrip("/")
        address = f"{base}/live/campaigns/{campaign}/"
        viewers = [("coordinator", self.coordinator)]
        viewers += [(member.who.name, member.client) for member in self.cast]
        screens = [
            Screen(name, address, client.token, keeps_state=index < N_FULL_SCREENS)
            for index, (name, client) in enumerate(viewers)
        ]
        following = [asyncio.create_task(screen.follow()) for screen in screens]
        try:
            yield screens
        finally:
            for task in following:
                task.cancel()
            await asyncio.gather(*following, return_exceptions=True)

    async def _first_plan(self, campaign: str, screens: list[Screen], started: float) -> float:
        """Seconds from the alert file to offered tiles on every open screen."""
        for screen in screens:
            await screen.wait_until(lambda one: one.seq >= 0, timeout_s=PLAN_TIMEOUT_S)
        await self._plan(campaign, screens)
        seconds = time.monotonic() - started
        self.say(f"first tiles on {len(screens)} open screens after {seconds:.1f} s")
        return seconds

    async def _plan(self, campaign: str, screens: list[Screen]) -> None:
        due = await self.coordinator.post(f"campaigns/{campaign}/plan")
        for screen in screens:
            await screen.wait_until(
                lambda one: one.last_plan_seq > due["due_seq"], timeout_s=PLAN_TIMEOUT_S
            )

    async def _set_stage(self, campaign: str, screen: Screen) -> Stage:
        scenario = self.demo.scenario
        event_s = -float(scenario["alert_delay_s"])
        hunt = Hunt(await self._hide(campaign, 1, self.dice.source), self.dice.hunt, event_s)
        assert screen.state is not None
        stage = Stage(
            campaign=campaign,
            launched_at=self._launched_at,
            scenario=scenario,
            timeline=Timeline(),
            hunt=hunt,
            say=self.say,
            tiles=screen.state["tiles"],
        )
        for member, rng in zip(self.cast, self.dice.observers, strict=True):
            self._cast_observer(member, rng, stage).wait_for_call()
        return stage

    def _cast_observer(
        self, member: CastMember, rng: np.random.Generator, stage: Stage
    ) -> SimulatedObserver:
        weather = draw_weather(
            rng,
            clear_chance=member.who.site["clear_chance"],
            clear_spell_mean_h=stage.scenario["clear_spell_mean_h"],
            hours=self.options.hours,
        )
        return SimulatedObserver(member.who, member.client, member.instruments, weather, rng, stage)

    async def _hide(self, campaign: str, n: int, rng: np.random.Generator) -> Sources:
        region = await self.coordinator.get(f"campaigns/{campaign}/region")
        return draw_sources(
            rng,
            n,
            order=region["order"],
            pixels=_decode(region["pixels_b64"], "<u4"),
            probabilities=_decode(region["probabilities_b64"], "<f4").astype(float),
            magnitude=self.demo.scenario["source_magnitude"],
            sigma_mag=self.demo.scenario["source_sigma_mag"],
        )

    async def _play_night(self, stage: Stage, screens: list[Screen]) -> None:
        end_s = 3600.0 * self.options.hours
        self._enter_replans(stage, screens, end_s)
        started, said = time.monotonic(), time.monotonic()
        while happening := stage.timeline.take_next(end_s):
            await self._pace(stage.now_s, started)
            await self._move_clock(stage, stage.now_s)
            await happening()
            if time.monotonic() - said > SAY_EVERY_S:
                said = time.monotonic()
                self._say_progress(stage)
        await self._move_clock(stage, end_s)
        self._say_progress(stage)

    def _enter_replans(self, stage: Stage, screens: list[Screen], end_s: float) -> None:
        every_s = stage.scenario["replan_every_s"]
        for number in range(1, int(end_s // every_s) + 1):
            stage.timeline.at(number * every_s, lambda: self._plan(stage.campaign, screens))

    async def _pace(self, now_s: float, started: float) -> None:
        """A served run is played at a speed that people can follow."""
        if self.options.speed is not None:
            ahead_s = now_s / self.options.speed - (time.monotonic() - started)
            await asyncio.sleep(max(0.0, ahead_s))

    async def _move_clock(self, stage: Stage, time_s: float) -> None:
        if time_s > self._clock_s:
            self._clock_s = time_s
            now = {"now": stage.iso_at(time_s)}
            await self.coordinator.post(f"campaigns/{stage.campaign}/clock", now)

    def _say_progress(self, stage: Stage) -> None:
        self.say(
            f"{stage.time_at(stage.now_s):%H:%M} UTC: {stage.tally['frames']} frames, "
            f"imaged {stage.imaged:.1%}, searched {stage.searched:.1%}"
        )

    async def _settle(
        self,
        stage: Stage,
        snapshot: dict[str, Any],
        coverage: dict[str, Any],
        plan_s: float,
        password: str,
    ) -> Outcome:
        many = await self._hide(stage.campaign, N_MANY_SOURCES, self.dice.many)
        plan = snapshot["state"]["plan"] or {}
        return Outcome(
            campaign=stage.campaign,
            imaged=coverage["imaged"],
            searched=coverage["searched"],
            n_frames=_count_frames(snapshot["state"]["frames"]),
            found=stage.hunt.caught,
            seconds_to_first_tile=plan_s,
            certificate=plan.get("certificate"),
            n_observers=len(self.cast),
            n_claims=stage.tally["claims"],
            n_events=snapshot["seq"],
            many_sources_found=share_found(self.dice.many, many, stage.examined),
            tally=dict(stage.tally),
            refusals=dict(stage.refusals),
            password=password,
        )


def _count_frames(frames: dict[str, Any]) -> int:
    return sum(frame["state"] == "counted" for frame in frames.values())


def _decode(text: str, kind: str) -> np.ndarray:
    return np.frombuffer(base64.b64decode(text), dtype=kind)
