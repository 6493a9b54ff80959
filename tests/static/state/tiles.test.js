import assert from "node:assert/strict";
import { test } from "node:test";
import { unitVector } from "../../../static/src/sky/vectors.js";
import { statusCounts, tileLines } from "../../../static/src/state/tile_lines.js";
import { laidTiles, tilesAt } from "../../../static/src/state/tile_search.js";
import { depthLine, framesOver, tileStory, whoCould, whoLines } from "../../../static/src/state/tile_story.js";
import { aClaim, aFrame, anOffer, aState } from "./a_state.js";

test("a held claim says more than a met one, an offer more than a lapse, a release nothing", () => {
  const state = { ...aState(), offers: [anOffer(2, 8)] };
  state.claims = { 1: aClaim(1, 7, "met"), 2: aClaim(1, 8), 3: aClaim(2, 7, "lapsed"), 4: aClaim(3, 7, "released") };
  const lines = tileLines(state, null);
  assert.equal(lines.get(1).line, "held");
  assert.equal(lines.get(2).line, "offered");
  assert.equal(lines.has(3), false);
});

test("mine is what I hold or am offered, not what I have shot", () => {
  const state = { ...aState(), offers: [anOffer(2, 8)], claims: { 1: aClaim(1, 8, "met"), 2: aClaim(3, 7) } };
  const lines = tileLines(state, 8);
  assert.deepEqual([1, 2, 3].map((tile) => lines.get(tile).is_mine), [false, true, false]);
});

test("a shot tile knows whether a counted frame shows it", () => {
  const state = { ...aState(), claims: { 1: aClaim(1, 7, "met"), 2: aClaim(2, 7, "met") } };
  state.frames = { 1: aFrame(), 2: aFrame({ tile: 2, state: "withdrawn" }) };
  const lines = tileLines(state, null);
  assert.deepEqual([lines.get(1).has_frame, lines.get(2).has_frame], [true, false]);
});

test("everybody is counted once, by what they last said", () => {
  assert.deepEqual(statusCounts(aState()), { in: 1, clouded: 0, out: 0, silent: 1 });
});

test("under the pointer the tile that means something comes first, then the smallest", () => {
  const state = { ...aState(), offers: [anOffer(1, 8)] };
  const laid = laidTiles(state.tiles);
  const here = unitVector(10.1, 20.1);
  assert.deepEqual(tilesAt(laid, tileLines(state, null), here), [1, 3]);
  assert.deepEqual(tilesAt(laid, new Map(), here), [3, 1]);
  assert.deepEqual(tilesAt(laid, new Map(), unitVector(190, -20)), []);
});

test("a tile says who holds it, since when and until when", () => {
  const state = { ...aState(), claims: { 1: aClaim(1, 7) } };
  const now = Date.UTC(2027, 2, 14, 20, 15);
  assert.deepEqual(whoLines(state, 1, now), ["held by Marl Hill since 20:00, until 20:40 UTC"]);
  assert.deepEqual(whoLines(aState(), 1, now), ["open: nobody has it"]);
  const offers = [anOffer(1, 7), anOffer(1, 8), anOffer(1, 7)];
  assert.deepEqual(whoLines({ ...aState(), offers }, 1, Date.UTC(2027, 2, 13)), [
    "offered to Marl Hill for 14 Mar 21:00 UTC",
    "offered to Otter Bay for 14 Mar 21:00 UTC, and 1 offer more",
  ]);
});

test("depth is that of the deepest examined frame; others are only imaged", () => {
  assert.equal(depthLine([]), "no frame yet");
  assert.match(depthLine([aFrame({ is_examined: false, m_eff: null })]), /imaged, not searched/);
  const frames = [aFrame({ m_eff: 13.14 }), aFrame(), aFrame({ is_examined: false, m_eff: null })];
  assert.equal(depthLine(frames), "searched to r 17.3 in 2 frames; 1 frame more not examined");
});

test("frames over a tile are the counted ones whose true footprint holds its middle", () => {
  const state = { ...aState(), frames: { 1: aFrame(), 2: aFrame({ state: "withdrawn" }) } };
  assert.equal(framesOver(state, state.tiles[1]).length, 1);
  assert.equal(framesOver(state, state.tiles[2]).length, 0);
});

test("who could take a tile is in, dark and has it up", () => {
  const state = aState();
  // Local midnight at longitude 0, latitude 50: RA about 11.5 h is on the meridian in mid March.
  const midnight = Date.UTC(2027, 2, 15, 0);
  assert.equal(whoCould(state, { ...state.tiles[1], ra_deg: 172, dec_deg: 20 }, midnight).length, 1);
  assert.equal(whoCould(state, { ...state.tiles[1], ra_deg: 352, dec_deg: 20 }, midnight).length, 0);
  assert.equal(whoCould(state, { ...state.tiles[1], ra_deg: 352, dec_deg: 20 }, Date.UTC(2027, 2, 15, 12)).length, 0);
});

test("the story of a tile holds probability, people, depth, and is null for no tile", () => {
  const story = tileStory(aState(), 1, { left: 0.1, whole: 0.3 }, Date.UTC(2027, 2, 15));
  assert.equal(story.headline, "tile 1 · 2.0° × 2.0°");
  assert.equal(story.lines[0], "30.0 % of the probability, 10.0 % left");
  assert.equal(tileStory(aState(), 99, null, 0), null);
});
