import assert from "node:assert/strict";
import { readFileSync } from "node:fs";
import { test } from "node:test";
import {
  centresOf,
  directionOnFace,
  faceOfDirection,
  faceOfPixel,
  nPixels,
  pixelOfFace,
} from "../../../static/src/sky/healpix.js";

const { cases } = JSON.parse(readFileSync(new URL("healpix-cases.json", import.meta.url), "utf8"));

for (const { order, directions, pixels_at, pixels, centres } of cases) {
  test(`the pixel that holds a direction is healpy's, order ${order}`, () => {
    const ours = directions.map(([x, y, z]) => pixelOfFace(order, faceOfDirection(order, x, y, z)));
    assert.deepEqual(ours, pixels_at);
  });

  test(`centres are healpy's to 1e-12, order ${order}`, () => {
    pixels.forEach((pixel, i) => {
      const { face, ix, iy } = faceOfPixel(order, pixel);
      const v = directionOnFace(order, face, ix + 0.5, iy + 0.5);
      v.forEach((part, axis) => assert.ok(Math.abs(part - centres[i][axis]) < 1e-12));
    });
  });
}

test("every pixel of order 3 holds its own centre", () => {
  for (let pixel = 0; pixel < nPixels(3); pixel += 1) {
    const { face, ix, iy } = faceOfPixel(3, pixel);
    const v = directionOnFace(3, face, ix + 0.5, iy + 0.5);
    assert.deepEqual(faceOfDirection(3, ...v), { face, ix, iy });
  }
});

test("the last pixel of order 10 survives the bit arithmetic", () => {
  const last = nPixels(10) - 1;
  assert.equal(pixelOfFace(10, faceOfPixel(10, last)), last);
});

test("centres of a list stand in its order", () => {
  const both = centresOf(4, [7, 3000]);
  assert.deepEqual([...both.slice(3)], [...centresOf(4, [3000])]);
});
