import assert from "node:assert/strict";
import { test } from "node:test";
import { coverageFromAnswer, leftAt, patched, regionFromAnswer } from "../../../static/src/state/coverage.js";
import { TilePixels, bestTiles } from "../../../static/src/state/tile_pixels.js";
import { pixelOfFace, faceOfDirection } from "../../../static/src/sky/healpix.js";
import { unitVector } from "../../../static/src/sky/vectors.js";
import { aState } from "./a_state.js";

const base64 = (array) => Buffer.from(array.buffer, array.byteOffset, array.byteLength).toString("base64");

/** Pixels of order 8 around a place, ascending, all equally probable. */
function patch(ra_deg, dec_deg, half_deg) {
  const found = new Set();
  for (let dra = -half_deg; dra <= half_deg; dra += 0.1) {
    for (let ddec = -half_deg; ddec <= half_deg; ddec += 0.1) {
      found.add(pixelOfFace(8, faceOfDirection(8, ...unitVector(ra_deg + dra, dec_deg + ddec))));
    }
  }
  const pixels = Uint32Array.from([...found].sort((a, b) => a - b));
  const probabilities = new Float32Array(pixels.length).fill(1 / pixels.length);
  return regionFromAnswer({ revision: 1, order: 8, pixels_b64: base64(pixels), probabilities_b64: base64(probabilities) });
}

/** @param {number} n */
function blank(n) {
  return coverageFromAnswer({
    through_seq: 10, imaged: 0, searched: 0, residual_outside: 0.1, detected_b64: base64(new Uint8Array(n)), history: [],
  });
}

/** @param {number} since_seq @param {number} through_seq @param {number[]} indices @param {number[]} values */
function message(since_seq, through_seq, indices, values) {
  return {
    since_seq, through_seq, imaged: 0.2, searched: 0.1, residual_outside: 0.1, at: "2027-03-14T20:30:00Z",
    changed: { indices_b64: base64(Uint32Array.from(indices)), detected_b64: base64(Uint8Array.from(values)) },
  };
}

test("a patch changes the named pixels and both numbers", () => {
  const { coverage, changed, is_gap } = patched(blank(4), message(10, 12, [1, 3], [255, 51]));
  assert.deepEqual([...coverage.detected], [0, 255, 0, 51]);
  assert.deepEqual([...changed], [1, 3]);
  assert.deepEqual([coverage.searched, coverage.imaged, coverage.through_seq], [0.1, 0.2, 12]);
  assert.equal(coverage.history.length, 1);
  assert.equal(is_gap, false);
});

test("a patch that builds on more than is held asks for all", () => {
  assert.equal(patched(blank(4), message(11, 12, [1], [9])).is_gap, true);
  assert.equal(patched(blank(4), message(10, 12, [4], [9])).is_gap, true);
});

test("old news is no news", () => {
  const held = blank(4);
  assert.equal(patched(held, message(8, 9, [1], [255])).coverage, held);
  assert.equal(held.detected[1], 0);
});

test("what is left is p (1 - D)", () => {
  const region = patch(10, 20, 1);
  const { coverage } = patched(blank(region.pixels.length), message(10, 11, [0], [51]));
  assert.ok(Math.abs(leftAt(region, coverage, 0) - region.probabilities[0] * 0.8) < 1e-9);
});

test("a tile holds about its area in pixels, at the equator, over RA 0 and at the pole", () => {
  for (const [ra_deg, dec_deg] of [[10, 20], [0, 0], [120, 89.5]]) {
    const region = dec_deg > 80 ? patch(0, 90, 4) : patch(ra_deg, dec_deg, 3);
    const full = dec_deg > 80 ? fullCap() : region;
    const n = new TilePixels(full).inside(1, { ra_deg, dec_deg, width_deg: 2, height_deg: 2, probability: 0, seats: 1, is_dropped: false }).length;
    const expected = 4 / (41252.96125 / (12 * 4 ** 8));
    assert.ok(Math.abs(n - expected) < 0.08 * expected, `${n} pixels at ${ra_deg}, ${dec_deg}, not ${expected}`);
  }
});

/** Every pixel within five degrees of the pole. */
function fullCap() {
  const found = new Set();
  for (let ra = 0; ra < 360; ra += 0.5) for (let dec = 85; dec < 90; dec += 0.05) {
    found.add(pixelOfFace(8, faceOfDirection(8, ...unitVector(ra, dec))));
  }
  const pixels = Uint32Array.from([...found].sort((a, b) => a - b));
  return { revision: 1, order: 8, pixels, probabilities: new Float32Array(pixels.length).fill(1) };
}

test("searching a tile leaves less in it and puts it lower among the best", () => {
  const region = patch(11, 20, 3);
  const pixels = new TilePixels(region);
  const { tiles } = aState();
  const coverage = blank(region.pixels.length);
  for (const index of pixels.inside(1, tiles[1])) coverage.detected[index] = 255;
  const left = (number, tile) => pixels.leftIn(number, tile, coverage).left;
  assert.equal(left(1, tiles[1]), 0);
  assert.ok(pixels.leftIn(1, tiles[1], coverage).whole > 0.05);
  assert.deepEqual(bestTiles(tiles, left, 3).map(({ number }) => number), [2, 1, 3]);
});
