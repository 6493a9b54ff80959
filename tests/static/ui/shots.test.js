import assert from "node:assert/strict";
import { test } from "node:test";
import { keepForecasts, nightOf, otherTiles, restOfNight, shotForCard } from "../../../static/src/ui/tonight/shots.js";

const gear = { width_deg: 3, height_deg: 2, exposure_s: 60, n_exposures: 4 };
const tile = (/** @type {number} */ ra_deg) => ({ ra_deg, dec_deg: -21, width_deg: 2.8, height_deg: 1.9, probability: 0.01 });
const tiles = { 1: tile(10), 2: tile(20), 3: tile(30), 4: tile(40) };
const at = (/** @type {number} */ minute) => `2027-03-14T22:${String(minute).padStart(2, "0")}:00Z`;

const answer = {
  claims: [{ id: 91, tile: 2, starts_at: at(40), until: at(59) }, { id: 90, tile: 1, starts_at: at(10), until: at(30) }],
  offers: [{ tile: 1, starts_at: at(10), ends_at: at(15), gain: 0.004 }, { tile: 3, starts_at: at(5), ends_at: at(9), gain: 0.003 }],
  best: { tile: 4, starts_at: at(0), ends_at: at(4), gain: 0.009, exposure_s: 30, n_exposures: 8, limit_forecast_mag: 16.9, reason: "high" },
  alternatives: [{ tile: 3, starts_at: at(0), ends_at: at(4), gain: 0.002, limit_forecast_mag: 15.5, reason: "low" }],
  why_not: null,
  curves: {},
  night: null,
};

const numbers = (/** @type {{tile: number}[]} */ shots) => shots.map(({ tile: number }) => number);
const night = nightOf(answer, tiles, gear);

test("held and offered tiles stand in order of their start, suggestions best first and without what is held", () => {
  assert.deepEqual(numbers(night.held), [1, 2]);
  assert.deepEqual(numbers(night.offered), [3, 1]);
  assert.deepEqual(numbers(night.suggested), [4, 3]);
  assert.deepEqual(numbers(nightOf({ ...answer, best: { ...answer.best, tile: 2 } }, tiles, gear).suggested), [3]);
});

test("series and size come from the suggestion, else from the gear and the tile", () => {
  const [best] = night.suggested;
  assert.deepEqual([best.exposure_s, best.n_exposures], [30, 8]);
  assert.deepEqual([night.held[0].exposure_s, night.held[0].width_deg], [60, 2.8]);
});

test("the forecast of a tile is kept when it is held and no longer suggested", () => {
  const forecasts = new Map();
  keepForecasts(answer, forecasts);
  const later = { ...answer, claims: [{ id: 5, tile: 4, starts_at: at(0), until: at(30) }], best: null, alternatives: [] };
  const [held] = nightOf(later, tiles, gear, forecasts).held;
  assert.deepEqual([held.tile, held.limit_forecast_mag, held.gain], [4, 16.9, 0.009]);
});

test("the card shows the chosen tile, else what is held, else the best now", () => {
  assert.equal(shotForCard(night, night.offered[0])?.tile, 3);
  assert.equal(shotForCard(night, { ...night.offered[0], tile: 77 })?.tile, 1);
  assert.equal(shotForCard(nightOf({ ...answer, claims: [] }, tiles, gear), null)?.tile, 4);
  assert.equal(shotForCard({ held: [], offered: [], suggested: [] }, null), null);
});

test("a chosen offer that was taken shows as held, and one whose start moved is still shown", () => {
  const chosen = { ...night.suggested[0], tile: 1, starts_at: new Date(at(3)) };
  assert.deepEqual([shotForCard(night, chosen)?.tile, shotForCard(night, chosen)?.standing], [1, "held"]);
  assert.equal(shotForCard(night, { ...night.offered[0], starts_at: new Date(at(50)) })?.tile, 3);
});

test("the rest of the night leaves out the card's own tile, what is held already, and the next night", () => {
  assert.deepEqual(numbers(restOfNight(night, night.held[0], null)), [3, 2]);
  assert.deepEqual(numbers(restOfNight(night, night.held[0], Date.parse(at(20)))), [3]);
  assert.deepEqual(numbers(restOfNight(night, night.offered[0], null)), [1, 2]);
});

test("a tile that comes back for another visit stays on the list", () => {
  const twice = { ...answer, claims: [], offers: [...answer.offers, { tile: 3, starts_at: at(50), ends_at: at(54), gain: 0.001 }] };
  const again = nightOf(twice, tiles, gear);
  assert.deepEqual(numbers(restOfNight(again, again.offered[0], null)), [1, 3]);
});

test("another tile is one of the suggestions, not the card's own", () => {
  assert.deepEqual(numbers(otherTiles(night, night.suggested[0])), [3]);
});

test("a tile that the page does not know yet is left out, not shown wrongly", () => {
  const unknown = { ...answer, claims: [{ id: 1, tile: 999, starts_at: at(0), until: at(1) }] };
  assert.deepEqual(nightOf(unknown, tiles, gear).held, []);
});
