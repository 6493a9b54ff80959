import assert from "node:assert/strict";
import { test } from "node:test";
import { circleOutline } from "../../../static/src/sky/footprint.js";
import { regionExtent } from "../../../static/src/state/region_extent.js";

/** @param {import("../../../static/src/sky/vectors.js").Vector[]} vectors */
function extentOf(vectors) {
  return regionExtent(Float32Array.from(vectors.flat()), new Float32Array(vectors.length).fill(1 / vectors.length));
}

test("a blob has its middle and its radius", () => {
  const { ra_deg, dec_deg, radius_deg } = extentOf(circleOutline({ ra_deg: 359, dec_deg: 40 }, 8.5).corners);
  assert.ok(Math.abs(ra_deg - 359) < 0.01 && Math.abs(dec_deg - 40) < 0.01);
  assert.equal(radius_deg, 9);
});

test("a wide ring reaches far, a great circle everywhere", () => {
  assert.equal(extentOf(circleOutline({ ra_deg: 30, dec_deg: 10 }, 69.5).corners).radius_deg, 70);
  assert.ok(extentOf(circleOutline({ ra_deg: 30, dec_deg: 10 }, 90).corners).radius_deg >= 90);
});
