import assert from "node:assert/strict";
import { existsSync, readFileSync } from "node:fs";
import { test } from "node:test";
import { apply, KINDS, UnknownEvent } from "../../../static/src/state/apply.js";
import { aClaim, aFrame, anEvent, anOffer, aState } from "./a_state.js";

const law = new URL("../../events/law-cases.json", import.meta.url);
const cases = existsSync(law) ? JSON.parse(readFileSync(law, "utf8")) : [];

for (const { name, before, events, after } of cases) {
  test(`law: ${name}`, () => {
    assert.deepEqual(events.reduce(apply, before), after);
  });
}

test("the law cases hold every kind of event", () => {
  const seen = new Set(cases.flatMap(({ events }) => events.map(({ kind }) => kind)));
  assert.deepEqual([...KINDS].filter((kind) => !seen.has(kind)), []);
});

test("an event of an unknown kind is refused, not skipped", () => {
  assert.throws(() => apply(aState(), anEvent(1, "candidate.raised", {})), UnknownEvent);
});

test("a held claim uses up the offer of the same observer and tile, and no other", () => {
  const before = { ...aState(), offers: [anOffer(1, 7), anOffer(1, 8), anOffer(2, 7)] };
  const after = apply(before, anEvent(1, "claim.held", { id: 5, claim: aClaim(1, 7) }));
  assert.deepEqual(after.offers, [anOffer(1, 8), anOffer(2, 7)]);
  assert.deepEqual(after.claims, { 5: aClaim(1, 7) });
});

test("the state before is left as it was", () => {
  const before = aState();
  const copy = structuredClone(before);
  apply(before, anEvent(1, "frame.counted", { number: 1, frame: aFrame() }));
  apply(before, anEvent(1, "observer.status", { observer: 7, status: "clouded" }));
  assert.deepEqual(before, copy);
});

test("recent keeps the last forty, oldest first", () => {
  let state = aState();
  for (let seq = 1; seq <= 45; seq += 1) {
    state = apply(state, anEvent(seq, "observer.status", { observer: 7, status: "in" }));
  }
  assert.equal(state.recent.length, 40);
  assert.deepEqual([state.recent[0].seq, state.recent[39].seq], [6, 45]);
});

test("an examination changes three fields and keeps the rest", () => {
  const before = { ...aState(), frames: { 1: aFrame({ is_examined: false, m_eff: null, examined_way: "" }) } };
  const payload = { number: 1, is_examined: true, examined_way: "image by eye", m_eff: 17.3 };
  assert.deepEqual(apply(before, anEvent(1, "frame.examined", payload)).frames[1], aFrame());
});
