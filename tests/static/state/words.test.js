import assert from "node:assert/strict";
import { test } from "node:test";
import { darkRows, hourTicks } from "../../../static/src/state/dark_rows.js";
import { historyShape, timeTicks } from "../../../static/src/state/history_shape.js";
import { percentText, promiseText, sizeText, smallPercentText, spanText } from "../../../static/src/state/words.js";
import { anOffer, aState } from "./a_state.js";

test("shares are never rounded up to all or down to nothing", () => {
  assert.deepEqual([0, 0.0002, 0.418, 0.99996, 1].map(percentText), ["0.0", "< 0.1", "41.8", "99.9", "100.0"]);
  assert.deepEqual([0, 0.00001, 0.0084, 0.123].map(smallPercentText), ["0 %", "< 0.01 %", "0.84 %", "12.3 %"]);
});

test("a promise is rounded down", () => {
  assert.deepEqual([0.9599, 0.96, 1].map(promiseText), ["95 %", "96 %", "100 %"]);
});

test("spans and sizes read well", () => {
  assert.equal(spanText(3 * 3_600_000 + 41 * 60_000), "03:41");
  assert.equal(spanText(50 * 3_600_000), "2 d 02:00");
  assert.equal(sizeText(3.2, 2.1), "3.2° × 2.1°");
  assert.equal(sizeText(0.5, 0.25), "30′ × 15′");
});

test("dark rows: those in darkness first, then who is next, never last; clouded ones known", () => {
  const from = Date.UTC(2027, 2, 14, 12);
  const at = (hours) => new Date(from + hours * 3_600_000).toISOString();
  const state = aState();
  state.observers[7].status = "clouded";
  const rows = darkRows(
    [
      { site: "never", observer: 8, intervals: [] },
      { site: "later", observer: 8, intervals: [[at(10), at(18)]] },
      { site: "now", observer: 7, intervals: [[at(-3), at(5)]] },
    ],
    state,
    from,
    from,
  );
  assert.deepEqual(rows.map(({ site }) => site), ["now", "later", "never"]);
  assert.deepEqual(rows[0].bars, [[0, 5 / 24]]);
  assert.deepEqual([rows[0].is_dark, rows[0].is_clouded, rows[1].is_dark], [true, true, false]);
});

test("hour ticks stand on whole hours of UTC", () => {
  assert.deepEqual(hourTicks(Date.UTC(2027, 2, 14, 16, 30), 6).map(({ text }) => text), ["18", "00", "06", "12"]);
});

test("the curve ends at the present numbers and the forecast at the plan's", () => {
  const now = Date.UTC(2027, 2, 14, 20);
  const state = { ...aState(), offers: [anOffer(1, 7)] };
  state.plan = { searched_expected: 0.6 };
  const coverage = {
    searched: 0.2, imaged: 0.3, through_seq: 1, residual_outside: 0, detected: new Uint8Array(0),
    history: [{ at: "2027-03-14T12:00:00Z", imaged: 0.1, searched: 0.05 }],
  };
  const shape = historyShape(coverage, state, now);
  assert.equal(shape.top, 0.6);
  assert.deepEqual(shape.searched.at(-1), [shape.now_x, 0.2 / 0.6]);
  assert.deepEqual(shape.expected, [[shape.now_x, 0.2 / 0.6], [1, 1]]);
  assert.deepEqual(historyShape(coverage, { ...state, plan: null }, now).expected, []);
});

test("ticks under the curve stand on whole steps of the day and are few", () => {
  const from = Date.UTC(2027, 2, 14, 15, 10);
  assert.deepEqual(timeTicks(from, from + 24 * 3_600_000).map(({ text }) => text), ["18:00", "00:00", "06:00", "12:00"]);
  assert.deepEqual(timeTicks(from, from + 3_600_000).map(({ text }) => text), ["15:15", "15:30", "15:45", "16:00"]);
});
