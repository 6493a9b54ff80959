"""One simulated observer: answers the call, takes tiles, shoots, reports, examines, rests."""

from __future__ import annotations

import math
from collections.abc import Awaitable, Callable
from dataclasses import dataclass, field
from datetime import timedelta
from typing import Any

import numpy as np

from campaigns.rehearsal.board_client import BoardClient, Refusal
from campaigns.rehearsal.demo_network import InventedObserver, Kit
from campaigns.rehearsal.frame_report import (
    Shot,
    draw_limit_kind,
    frame_body,
    limit_shift_mag,
    seen_frame,
)
from campaigns.rehearsal.hidden_source import SeenFrame
from campaigns.rehearsal.stage import Stage
from campaigns.rehearsal.tile_choice import TileChoice, choose_tile, wake_up_s
from campaigns.rehearsal.weather import Weather

# Pauses between the exposures of a series: read-out, dither, guiding.
SERIES_FACTOR = 1.1
REPORT_DELAY_S = {"person": 90.0, "robot": 5.0}
# How long after taking a tile somebody finds out that it cannot be: a tree, a flat battery.
GIVE_BACK_DELAY_S = (120.0, 480.0)
RACE_DELAY_S = 60.0


@dataclass
class SimulatedObserver:
    """A member of the network with one thing to do at a time."""

    who: InventedObserver
    client: BoardClient
    instruments: tuple[tuple[int, Kit], ...]
    weather: Weather
    rng: np.random.Generator
    stage: Stage
    status: str = "silent"
    _turn: int = 0
    _is_shooting: bool = False
    _held: int | None = None
    _n_tiles: int = 0
    _rotations_deg: dict[int, float] = field(default_factory=dict)

    def wait_for_call(self) -> None:
        """Decide once whether and when this observer will answer."""
        scenario = self.stage.scenario
        fate = self.rng.random()
        delay_s = self._lognormal(
            scenario["answer_delay_median_s"][self.who.pace], scenario["answer_delay_factor"]
        )
        if self.who.pace == "person" and fate < scenario["chance_silent"]:
            return
        is_out = fate < scenario["chance_silent"] + scenario["chance_out"]
        if self.who.pace == "person" and is_out:
            self._after(delay_s, lambda: self._say("out"))
        else:
            self._after(delay_s, self._answer)

    async def _answer(self) -> None:
        for change_s in self.weather.changes_s:
            if change_s > self.stage.now_s:
                self.stage.timeline.at(change_s + 60.0, self._guard(self._follow_weather))
        await self._follow_weather()

    async def _follow_weather(self) -> None:
        is_clear = self.weather.is_clear(self.stage.now_s)
        await self._say("in" if is_clear else "clouded")
        if is_clear and not self._is_shooting:
            self._look_in(0.0)

    async def _say(self, status: str) -> None:
        await self.client.post(self._path("status"), {"status": status})
        self.status = status
        if status != "in":
            # The server gives back what somebody holds who cannot observe.
            self._held = None
        self.stage.tally[f"said {status}"] += 1

    # --- taking a tile ------------------------------------------------------------------

    def _look_in(self, delay_s: float) -> None:
        """Look for a tile later; a newer intention replaces an older one."""
        self._turn += 1
        turn = self._turn
        self._after(delay_s, lambda: self._look(turn))

    async def _look(self, turn: int) -> None:
        is_stale = turn != self._turn or self._is_shooting or self.status != "in"
        if is_stale or self._n_tiles >= self._kit(0).registered.get("tiles_per_night", 30):
            return
        nights = [
            (number, await self.client.get(self._path("tonight"), instrument=number))
            for number, _ in self.instruments
        ]
        choice = choose_tile(nights, self.stage)
        if choice is None:
            self._look_in(wake_up_s(nights, self.stage))
            return
        await self._claim(choice)

    async def _claim(self, choice: TileChoice) -> None:
        asked = {
            "tile": choice.tile,
            "instrument": choice.instrument,
            "starts_at": choice.starts_at,
        }
        try:
            claim = await self.client.post(self._path("claims"), asked)
        except Refusal as refusal:
            self.stage.note_refusal(self.who.name, refusal)
            is_lost_race = refusal.code == "tile-taken"
            self._look_in(RACE_DELAY_S if is_lost_race else self.stage.scenario["look_again_s"])
            return
        self._is_shooting = True
        self._held = int(claim["id"])
        self._n_tiles += 1
        self.stage.tally["claims"] += 1
        self._keep_or_not(choice, claim)

    def _keep_or_not(self, choice: TileChoice, claim: dict[str, Any]) -> None:
        scenario, fate = self.stage.scenario, self.rng.random()
        if fate < scenario["chance_give_back"]:
            self._after(self.rng.uniform(*GIVE_BACK_DELAY_S), self._change_mind)
        elif fate < scenario["chance_give_back"] + scenario["chance_let_lapse"]:
            self.stage.tally["forgotten"] += 1
            self.stage.timeline.at(
                self.stage.seconds_at(claim["until"]) + 60.0, self._guard(self._remember)
            )
        else:
            self._shoot(choice, claim)

    async def _change_mind(self) -> None:
        self._is_shooting = False
        self._look_in(self._rest_s())
        await self._give_back()

    async def _give_back(self) -> None:
        if self._held is not None:
            await self.client.post(self._path(f"claims/{self._held}/release"))
            self._held = None
            self.stage.tally["given back"] += 1

    async def _remember(self) -> None:
        self._is_shooting = False
        self._held = None
        self._look_in(0.0)

    # --- shooting and reporting ---------------------------------------------------------

    def _shoot(self, choice: TileChoice, claim: dict[str, Any]) -> None:
        gear = self._kit_of(choice.instrument).registered
        start_s = max(self.stage.now_s, self.stage.seconds_at(claim["starts_at"]))
        first_s = start_s + gear["overhead_s"]
        end_s = first_s + SERIES_FACTOR * gear["exposure_s"] * gear["n_exposures"]
        report_s = end_s + self._lognormal(REPORT_DELAY_S[self.who.pace], 1.5)
        self.stage.timeline.at(
            report_s, self._guard(lambda: self._finish(choice, claim["id"], first_s, end_s))
        )

    async def _finish(self, choice: TileChoice, claim: int, first_s: float, end_s: float) -> None:
        self._is_shooting = False
        if not self.weather.was_clear(first_s, end_s):
            self.stage.tally["clouded over"] += 1
            self._look_in(self._rest_s())
            await self._give_back()
            return
        self._look_in(self._rest_s())
        await self._report(choice, claim, first_s, end_s)

    async def _report(self, choice: TileChoice, claim: int, first_s: float, end_s: float) -> None:
        kit = self._kit_of(choice.instrument)
        shot = self._draw_shot(choice, kit, first_s, end_s)
        body = frame_body(kit, shot, instrument=choice.instrument, claim=claim)
        habit = self._draw_examination()
        if habit == "at once":
            body |= {"is_examined": True, "examined_way": kit.examined_way}
        answer = await self.client.post(self._path("frames"), body)
        self.stage.note_numbers(answer)
        self.stage.tally["frames"] += 1
        frame = seen_frame(
            kit,
            shot,
            number=int(answer["number"]),
            instrument=choice.instrument,
            footprint=answer["frame"]["footprint"],
            mid_s=(first_s + end_s) / 2.0,
        )
        if habit == "at once":
            self.stage.examine(frame)
        elif habit == "later":
            delay_s = self._lognormal(self.stage.scenario["examine_delay_median_s"], 2.0)
            self._after(delay_s, lambda: self._examine(frame, kit))

    async def _examine(self, frame: SeenFrame, kit: Kit) -> None:
        answer = await self.client.post(
            self._path(f"frames/{frame.number}/examine"),
            {"is_examined": True, "examined_way": kit.examined_way},
        )
        self.stage.note_numbers(answer)
        self.stage.tally["examined later"] += 1
        self.stage.examine(frame)

    def _draw_shot(self, choice: TileChoice, kit: Kit, first_s: float, end_s: float) -> Shot:
        scenario = self.stage.scenario
        north_deg, east_deg = self.rng.normal(scale=scenario["pointing_spread_deg"], size=2)
        kind = draw_limit_kind(self.rng, kit)
        forecast_mag = choice.limit_mag or kit.typical_limit_mag
        depth_mag = forecast_mag + self.rng.normal(scale=scenario["limit_spread_mag"])
        # A camera's forecast is its 50 % depth; an eye's is the faintest star.
        shift_mag = limit_shift_mag(kind, 0.2) if kit.registered["kind"] == "camera" else 0.0
        cos_dec = max(0.05, math.cos(math.radians(choice.dec_deg)))
        return Shot(
            ra_deg=round(float(choice.ra_deg + east_deg / cos_dec) % 360.0, 5),
            dec_deg=round(float(np.clip(choice.dec_deg + north_deg, -90.0, 90.0)), 5),
            rotation_deg=self._rotation_deg(choice.instrument, kit),
            mid_at=self.stage.launched_at + timedelta(seconds=round((first_s + end_s) / 2.0)),
            duration_s=float(kit.registered["exposure_s"] * kit.registered["n_exposures"]),
            limit_mag=round(float(depth_mag - shift_mag), 1),
            limit_kind=kind,
        )

    def _draw_examination(self) -> str:
        scenario, fate = self.stage.scenario, self.rng.random()
        if fate < scenario["chance_never_examined"]:
            return "never"
        is_later = self.rng.random() < scenario["chance_examined_later"][self.who.pace]
        return "later" if is_later else "at once"

    def _rotation_deg(self, instrument: int, kit: Kit) -> float:
        """A camera sits in its focuser as it was screwed in that evening."""
        known = kit.registered.get("rotation_deg")
        if known is not None:
            return float(known)
        if instrument not in self._rotations_deg:
            self._rotations_deg[instrument] = round(float(self.rng.uniform(0.0, 180.0)), 1)
        return self._rotations_deg[instrument]

    # --- small things -------------------------------------------------------------------

    def _kit(self, index: int) -> Kit:
        return self.instruments[index][1]

    def _kit_of(self, instrument: int) -> Kit:
        return dict(self.instruments)[instrument]

    def _path(self, rest: str) -> str:
        return f"campaigns/{self.stage.campaign}/{rest}"

    def _rest_s(self) -> float:
        scenario = self.stage.scenario
        return self._lognormal(scenario["rest_median_s"][self.who.pace], scenario["rest_factor"])

    def _lognormal(self, median: float, factor: float) -> float:
        return median * math.exp(math.log(factor) * float(self.rng.standard_normal()))

    def _after(self, delay_s: float, happening: Callable[[], Awaitable[None]]) -> None:
        self.stage.timeline.after(delay_s, self._guard(happening))

    def _guard(self, happening: Callable[[], Awaitable[None]]) -> Callable[[], Awaitable[None]]:
        """A refusal ends what was being done and is counted; the observer tries again later."""

        async def guarded() -> None:
            try:
                await happening()
            except Refusal as refusal:
                self.stage.note_refusal(self.who.name, refusal)
                self._look_in(self.stage.scenario["look_again_s"])

        return guarded
