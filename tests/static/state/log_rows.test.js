import assert from "node:assert/strict";
import { test } from "node:test";
import { KINDS } from "../../../static/src/state/apply.js";
import { countsAs, eventsOf, framesNewestFirst, GROUPS } from "../../../static/src/state/log_rows.js";
import { aFrame, anEvent, aState } from "./a_state.js";

test("every kind of event belongs to a group", () => {
  const stems = new Set(Object.values(GROUPS).flat());
  assert.deepEqual(KINDS.filter((kind) => !stems.has(kind.split(".")[0])), []);
});

test("events of a group come newest first", () => {
  const events = [anEvent(1, "claim.held", {}), anEvent(2, "frame.counted", {}), anEvent(3, "claim.met", {})];
  assert.deepEqual(eventsOf(events, "claims").map(({ seq }) => seq), [3, 1]);
  assert.deepEqual(eventsOf(events, "all").map(({ seq }) => seq), [3, 2, 1]);
});

test("a frame says how it counts", () => {
  assert.equal(countsAs(aFrame()), "searched to 17.3");
  assert.match(countsAs(aFrame({ is_examined: false, m_eff: null })), /nobody has examined/);
  assert.match(countsAs(aFrame({ m_eff: null })), /no limit/);
  assert.equal(countsAs(aFrame({ state: "withdrawn" })), "withdrawn");
});

test("frames are in the order of their numbers, not of their text", () => {
  const state = { ...aState(), frames: { 2: aFrame(), 10: aFrame() } };
  assert.deepEqual(framesNewestFirst(state).map(({ number }) => number), [10, 2]);
});
