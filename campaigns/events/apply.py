"""The law of events: apply(state before, event) is the state after. Pure; the twin is apply.js."""

from collections.abc import Callable
from functools import reduce
from typing import Any, cast

from campaigns.events.state import N_RECENT, State

Payload = dict[str, Any]


def apply(state: State, event: Payload) -> State:
    """Return the state after one event, given as sent: seq, kind, at, said, payload."""
    after = _CHANGES[event["kind"]](state, event["payload"])
    line = {"seq": event["seq"], "at": event["at"], "said": event["said"]}
    return cast(State, {**after, "recent": [*state["recent"], line][-N_RECENT:]})


def apply_all(state: State, events: list[Payload]) -> State:
    """Return the state after several events in order of their numbers."""
    return reduce(apply, events, state)


def _set(state: Any, part: str, key: str, value: Any) -> Any:
    return {**state, part: {**state[part], key: value}}


def _amend(state: Any, part: str, key: str, /, **changes: Any) -> Any:
    return _set(state, part, key, {**state[part][key], **changes})


def _opened(state: Any, payload: Payload) -> Any:
    campaign = {**state["campaign"], "status": "live", "opened_at": payload["opened_at"]}
    return {**state, "campaign": campaign}


def _closed(state: Any, payload: Payload) -> Any:
    campaign = {**state["campaign"], "status": "closed", "closed_at": payload["closed_at"]}
    return {**state, "campaign": campaign}


def _region(state: Any, payload: Payload) -> Any:
    moved = {
        number: {**state["tiles"][number], **change} for number, change in payload["tiles"].items()
    }
    return {**state, "region": payload["region"], "tiles": {**state["tiles"], **moved}}


def _tiles(state: Any, payload: Payload) -> Any:
    return {**state, "tiles": {**state["tiles"], **payload["tiles"]}}


def _joined(state: Any, payload: Payload) -> Any:
    return _set(state, "observers", str(payload["id"]), payload["observer"])


def _status(state: Any, payload: Payload) -> Any:
    return _amend(state, "observers", str(payload["observer"]), status=payload["status"])


def _plan(state: Any, payload: Payload) -> Any:
    return {**state, "plan": payload["plan"], "offers": payload["offers"]}


def _held(state: Any, payload: Payload) -> Any:
    claim = payload["claim"]
    used = (claim["observer"], claim["tile"])
    offers = [o for o in state["offers"] if (o["observer"], o["tile"]) != used]
    return {**_set(state, "claims", str(payload["id"]), claim), "offers": offers}


def _extended(state: Any, payload: Payload) -> Any:
    return _amend(state, "claims", str(payload["id"]), until=payload["until"])


def _ended(ending: str) -> Callable[[Any, Payload], Any]:
    def end(state: Any, payload: Payload) -> Any:
        ended_at = payload["ended_at"]
        return _amend(state, "claims", str(payload["id"]), state=ending, ended_at=ended_at)

    return end


def _frame(state: Any, payload: Payload) -> Any:
    return _set(state, "frames", str(payload["number"]), payload["frame"])


def _examined(state: Any, payload: Payload) -> Any:
    changes = {key: value for key, value in payload.items() if key != "number"}
    return _amend(state, "frames", str(payload["number"]), **changes)


def _withdrawn(state: Any, payload: Payload) -> Any:
    return _amend(state, "frames", str(payload["number"]), state="withdrawn")


_CHANGES: dict[str, Callable[[Any, Payload], Any]] = {
    "campaign.opened": _opened,
    "campaign.closed": _closed,
    "region.revised": _region,
    "tiles.laid": _tiles,
    "observer.joined": _joined,
    "observer.status": _status,
    "plan.made": _plan,
    "claim.held": _held,
    "claim.extended": _extended,
    "claim.met": _ended("met"),
    "claim.released": _ended("released"),
    "claim.lapsed": _ended("lapsed"),
    "frame.counted": _frame,
    "frame.examined": _examined,
    "frame.corrected": _frame,
    "frame.withdrawn": _withdrawn,
}
