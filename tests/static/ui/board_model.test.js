import assert from "node:assert/strict";
import { test } from "node:test";
import { BoardModel } from "../../../static/src/ui/board/board_model.js";

const base64 = (array) => Buffer.from(array.buffer, array.byteOffset, array.byteLength).toString("base64");

/** A region of four pixels. @param {number} revision @param {number[]} pixels */
function region(revision, pixels) {
  const probabilities = new Float32Array(pixels.length).fill(1 / pixels.length);
  return { revision, order: 8, pixels_b64: base64(Uint32Array.from(pixels)), probabilities_b64: base64(probabilities) };
}

/** @param {number} revision @param {number[]} detected */
function coverage(revision, detected) {
  const numbers = { through_seq: 10, imaged: 0.1, searched: 0.1, residual_outside: 0.1, history: [] };
  return { revision, ...numbers, detected_b64: base64(Uint8Array.from(detected)) };
}

test("coverage of another revision is refused, even when it has as many pixels", () => {
  const model = new BoardModel(null);
  model.setRegion(region(1, [1, 2, 3, 4]));
  assert.equal(model.setCoverage(coverage(1, [255, 0, 0, 0])), true);
  model.setRegion(region(2, [5, 6, 7, 8]));
  // What was searched on the old pixels is not shown on the new ones.
  assert.deepEqual([...(model.coverage?.detected ?? [])], [0, 0, 0, 0]);
  assert.equal(model.setCoverage(coverage(1, [255, 0, 0, 0])), false);
  assert.equal(model.setCoverage(coverage(2, [0, 255, 0, 0])), true);
  assert.deepEqual([...(model.coverage?.detected ?? [])], [0, 255, 0, 0]);
});
