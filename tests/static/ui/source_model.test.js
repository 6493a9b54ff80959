import assert from "node:assert/strict";
import { test } from "node:test";
import { countsAs } from "../../../static/src/state/log_rows.js";
import { frameLines } from "../../../static/src/state/tile_story.js";
import { changedNumbers, fieldName, groupsOf, shortLabel, valueText } from "../../../static/src/ui/launch/source_values.js";
import { chartScales, curveLine, curvePath, delayText } from "../../../static/src/ui/shell/light_chart.js";

const assumption = (/** @type {string} */ name, /** @type {string} */ label, /** @type {number} */ value) => ({ name, label, value, unit: "", source: "assumption" });
const preset = /** @type {any} */ ({ assumptions: [assumption("rsg_weight", "red supergiant: share", 0.61), assumption("spread_mag", "spread", 1.2), assumption("dust_scale_kpc", "scale length of the dust", 2.9)] });

test("only the numbers that somebody changed are sent", () => {
  const typed = { [fieldName("rsg_weight")]: "0,5", [fieldName("spread_mag")]: "1.2" };
  assert.deepEqual(changedNumbers(preset, typed), { parameters: { rsg_weight: 0.5 }, unread: [] });
});

test("a field without a number is named, not guessed", () => {
  const { parameters, unread } = changedNumbers(preset, { [fieldName("spread_mag")]: "wide" });
  assert.deepEqual([parameters, unread], [{}, ["source.spread_mag"]]);
});

test("numbers stand by what they belong to", () => {
  assert.deepEqual(groupsOf(preset.assumptions).map(([group, members]) => [group, members.length]), [["red supergiant", 1], ["", 1], ["the Galaxy: stars and dust", 1]]);
  assert.equal(shortLabel(preset.assumptions[0]), "share");
  assert.equal(valueText(5 / 60), "0.0833333");
});

const curve = { label: "nova", weight: 0.25, first_light_d: [0.1, 0.2], ts_d: [0.01, 0.1, 1], magnitudes: [null, 10, 4] };

test("a curve begins at its first light and bright is up", () => {
  const scale = chartScales([curve]);
  assert.ok(scale.y(4) < scale.y(10));
  assert.match(curvePath(curve, scale), /^M[\d.]+ [\d.]+L[\d.]+ [\d.]+$/);
});

test("a curve in words says share, delay and peak", () => {
  assert.equal(curveLine(curve), "nova: 25 %, light after 2.4 h to 4.8 h, 4.0 at its brightest");
  assert.match(curveLine({ ...curve, first_light_d: null }), /always shone/);
  assert.match(curveLine({ ...curve, first_light_d: [0, 0] }), /light at once/);
  assert.deepEqual([delayText(0.002), delayText(3)], ["2.9 min", "3 d"]);
});

const early = /** @type {any} */ ({ state: "counted", mid_time: "2027-03-14T05:07:00Z", is_examined: true, m_eff: 14, band: "V" });
const later = { ...early, mid_time: "2027-03-14T06:00:00Z" };
const source = { preset: "core collapse", label: "", first_light_at: "2027-03-14T05:08:00Z" };

test("a frame from before any light is said to add nothing", () => {
  assert.equal(countsAs(early, source), "imaged: before any light could have arrived");
  assert.equal(countsAs(later, source), "searched to 14.0");
  assert.equal(countsAs(early, { ...source, first_light_at: null }), "searched to 14.0");
});

test("a tile names frames from before any light apart", () => {
  assert.deepEqual(frameLines([early, later], source), ["searched to V 14.0 in 1 frame", "1 frame from before any light could have arrived: nothing searched by that"]);
  assert.deepEqual(frameLines([later], source), ["searched to V 14.0 in 1 frame"]);
});
