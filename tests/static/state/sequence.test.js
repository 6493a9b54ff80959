import assert from "node:assert/strict";
import { test } from "node:test";
import { advanced, inOrder } from "../../../static/src/state/sequence.js";
import { anEvent, aState } from "./a_state.js";

const event = (seq) => anEvent(seq, "observer.status", { observer: 7, status: "in" });
const seqs = ({ next }) => next.map(({ seq }) => seq);

test("events are taken in order, each once", () => {
  const got = inOrder(3, [event(5), event(4), event(4), event(2), event(6)]);
  assert.deepEqual(seqs(got), [4, 5, 6]);
  assert.equal(got.is_gap, false);
});

test("a missing event stops before the gap", () => {
  const got = inOrder(3, [event(4), event(6)]);
  assert.deepEqual(seqs(got), [4]);
  assert.equal(got.is_gap, true);
});

test("what is old is no gap", () => {
  assert.deepEqual(inOrder(9, [event(4), event(9)]), { next: [], is_gap: false });
});

test("advancing moves number and state together", () => {
  const { held, applied } = advanced({ seq: 3, state: aState() }, [event(4), event(5)]);
  assert.equal(held.seq, 5);
  assert.equal(applied.length, 2);
  assert.deepEqual(held.state.recent.map(({ seq }) => seq), [4, 5]);
});
