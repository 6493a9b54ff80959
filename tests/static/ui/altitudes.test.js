import assert from "node:assert/strict";
import { test } from "node:test";
import { altitudeAt, curveOver, fallsBelow, trend, usableUntil } from "../../../static/src/ui/tonight/altitudes.js";
import { placedMarks } from "../../../static/src/ui/tonight/altitude_chart.js";

const MINUTE = 60_000;
/** A tent: up from 0 to 60 degrees in an hour, and down again. */
const tent = Array.from({ length: 13 }, (_, i) => ({ at_ms: i * 10 * MINUTE, altitude_deg: 60 - Math.abs(i - 6) * 10 }));

test("altitudes between known times lie on the line between them", () => {
  assert.equal(altitudeAt(tent, 25 * MINUTE), 25);
  assert.equal(altitudeAt(tent, 60 * MINUTE), 60);
  assert.equal(altitudeAt(tent, -1), null);
  assert.equal(altitudeAt(tent, 121 * MINUTE), null);
});

test("the fall through an altitude is found after now, a rise through it is not", () => {
  assert.equal(fallsBelow(tent, 0, 20), 100 * MINUTE);
  assert.equal(fallsBelow(tent, 101 * MINUTE, 20), null);
  assert.equal(fallsBelow(tent, 0, -5), null);
});

test("what ends a tile is the earlier of setting and light", () => {
  const limits = { now_ms: 0, least_deg: 20 };
  assert.deepEqual(usableUntil(tent, { ...limits, dawn_ms: 110 * MINUTE }), { until_ms: 100 * MINUTE, why: "it sets" });
  assert.deepEqual(usableUntil(tent, { ...limits, dawn_ms: 50 * MINUTE }), { until_ms: 50 * MINUTE, why: "the light comes" });
  assert.equal(usableUntil(tent, { now_ms: 115 * MINUTE, least_deg: 20, dawn_ms: null }), null);
});

test("a tile rises, stands highest, sinks", () => {
  assert.equal(trend(tent, 20 * MINUTE), "rising");
  assert.equal(trend(tent, 60 * MINUTE), "highest");
  assert.equal(trend(tent, 90 * MINUTE), "sinking");
});

test("the celestial pole stands as high as the site is north, all night", () => {
  const site = { latitude_deg: 48, longitude_deg: 11, min_altitude_deg: 20 };
  const curve = curveOver(site, () => ({ ra_deg: 0, dec_deg: 90 }), { from_ms: 0, to_ms: 6e7 });
  assert.ok(curve.every(({ altitude_deg }) => Math.abs(altitude_deg - 48) < 1e-6));
});

test("words under the chart never collide and stay inside", () => {
  const placed = placedMarks([{ x: 100, text: "now" }, { x: 110, text: "02:40" }, { x: 340, text: "light 05:00" }, { x: -3, text: "dark" }]);
  assert.deepEqual(placed.map(({ text }) => text), ["now", "light 05:00", "dark"]);
  assert.ok(placed.every(({ x }) => x >= 28 && x <= 312));
});
