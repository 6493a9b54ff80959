import assert from "node:assert/strict";
import { test } from "node:test";
import { limitFromStar, midTimeMs, prefilled, reportBody } from "../../../static/src/ui/tonight/report_values.js";
import { answerWords } from "../../../static/src/ui/tonight/report_view.js";

const MINUTE = 60_000;
const NOW = Date.parse("2027-03-14T22:30:00Z");
const gear = { exposure_s: 60, n_exposures: 4, band: "clear", kind: "camera", rotation_deg: null };
const shot = /** @type {any} */ ({
  tile: 148, ra_deg: 273.1666667, dec_deg: -21.0694444, standing: "held", claim: 9,
  starts_at: new Date("2027-03-14T22:17:00Z"), exposure_s: 60, n_exposures: 8, limit_forecast_mag: 16.94,
});

test("the mid-time is the start plus half the series, and never lies ahead", () => {
  assert.equal(midTimeMs({ starts_ms: NOW - 20 * MINUTE, series_s: 480, now_ms: NOW }), NOW - 16 * MINUTE);
  assert.equal(midTimeMs({ starts_ms: NOW - MINUTE, series_s: 480, now_ms: NOW }), NOW - 4 * MINUTE);
  assert.equal(midTimeMs({ starts_ms: null, series_s: 120, now_ms: NOW }), NOW - MINUTE);
});

test("a report begins with what the claim says", () => {
  const values = prefilled(shot, gear, NOW);
  assert.equal(values.mid_time, "2027-03-14 22:21:00");
  assert.deepEqual([values.duration_s, values.limit_mag, values.limit_kind], ["480", "16.9", "estimate"]);
});

test("the prefilled fields are sent as the numbers they show", () => {
  const { body, unread } = reportBody(prefilled(shot, gear, NOW), { instrument: 3, claim: 9, header: null });
  assert.deepEqual(unread, []);
  assert.ok(Math.abs(/** @type {any} */ (body).ra_deg - shot.ra_deg) < 0.003);
  assert.ok(Math.abs(/** @type {any} */ (body).dec_deg - shot.dec_deg) < 2e-4);
  assert.equal(/** @type {any} */ (body).mid_time, "2027-03-14T22:21:00.000Z");
  assert.deepEqual([body.instrument, body.claim, body.is_examined], [3, 9, false]);
  assert.ok(!("rotation_deg" in body) && !("reference_mag" in body));
});

test("with a header no typed position, time or band goes along", () => {
  const header = { CRVAL1: 83.6, CRVAL2: -5.4 };
  const typed = { ...prefilled(shot, gear, NOW), examined_way: "image by eye", reference_mag: "17,5" };
  const { body } = reportBody(typed, { instrument: 3, claim: null, header });
  assert.deepEqual(Object.keys(body).sort(), ["examined_way", "header", "instrument", "is_examined", "limit_kind", "limit_mag", "reference_mag"]);
  assert.equal(/** @type {any} */ (body).reference_mag, 17.5);
});

test("what cannot be read is named", () => {
  const typed = { ...prefilled(shot, gear, NOW), ra_deg: "over there", duration_s: "", limit_mag: "deep", band: "" };
  assert.deepEqual(reportBody(typed, { instrument: 3, claim: 9, header: null }).unread.sort(), ["band", "duration_s", "limit_mag", "ra_deg"]);
});

test("a limit follows from one star: ten times the needed signal is 2.5 magnitudes", () => {
  assert.equal(limitFromStar(14, 50), 16.5);
  assert.equal(limitFromStar(14, 5), 14);
});

test("the answer says why a frame does not count as searched", () => {
  const answer = { number: 7, imaged: 0.5, searched: 0.42, searched_before: 0.418, frame: { is_examined: true, m_eff: 16.4 } };
  assert.match(answerWords(answer), /41\.8 % before, 42\.0 % now/);
  assert.match(answerWords({ ...answer, frame: { is_examined: false, m_eff: null } }), /once somebody has looked/);
  assert.match(answerWords({ ...answer, frame: { is_examined: true, m_eff: null } }), /Without a limit/);
});
