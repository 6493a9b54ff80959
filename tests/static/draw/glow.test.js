import assert from "node:assert/strict";
import { test } from "node:test";
import { GlowLevels, brightestProbability } from "../../../static/src/draw/glow_levels.js";
import { closedLine, crossesSeam } from "../../../static/src/draw/lines.js";
import { rampColour, rgbOf } from "../../../static/src/draw/palette.js";
import { atlasPlace, atlasPlaceAt, centresOf, nPixels } from "../../../static/src/sky/healpix.js";
import { rectangleOutline } from "../../../static/src/sky/footprint.js";
import { unitVector } from "../../../static/src/sky/vectors.js";
import { emptyCoverage } from "../../../static/src/state/coverage.js";

const region = {
  revision: 1,
  order: 2,
  pixels: Uint32Array.of(0, 7, 100, 191),
  probabilities: Float32Array.of(0.4, 0.3, 0.2, 0.1),
};

test("every pixel's centre looks up its own place on the atlas", () => {
  const pixels = Uint32Array.from({ length: nPixels(3) }, (_, i) => i);
  const centres = centresOf(3, pixels);
  for (const pixel of pixels) {
    const [x, y, z] = centres.slice(3 * pixel, 3 * pixel + 3);
    assert.equal(atlasPlaceAt(8, x, y, z), atlasPlace(3, pixel));
  }
});

test("the map goes dark as it is searched, and only where it was", () => {
  const glow = new GlowLevels(region);
  const coverage = emptyCoverage(4);
  glow.setAll(coverage);
  const before = glow.places.map((place) => glow.levels[place]);
  assert.equal(before[0], 255);
  assert.ok(before[0] > before[1] && before[1] > before[2] && before[2] > before[3] && before[3] > 0);
  coverage.detected[1] = 255;
  glow.setSome(coverage, Uint32Array.of(1));
  assert.deepEqual([...glow.places.map((place) => glow.levels[place])], [before[0], 0, before[2], before[3]]);
});

test("the alert as it came is the map before any search", () => {
  const glow = new GlowLevels(region);
  glow.setAll(emptyCoverage(4));
  const empty = glow.levels.slice();
  const searched = emptyCoverage(4);
  searched.detected.fill(200);
  glow.setAll(searched);
  assert.notDeepEqual(glow.levels, empty);
  glow.setAll(null);
  assert.deepEqual(glow.levels, empty);
});

test("the brightest is one of many, and there is one even in an empty region", () => {
  assert.equal(brightestProbability(Float32Array.of(0.1, 0.3, 0.2)), Math.fround(0.3));
  assert.equal(brightestProbability(new Float32Array(0)), 1);
});

test("the ramp runs from ground to brightest and stays red where its steps are red", () => {
  const night = ["#000000", "#2a0000", "#5c0000", "#a00000", "#ec0000"].map(rgbOf);
  assert.deepEqual(rampColour(night, 0), [0, 0, 0]);
  assert.deepEqual(rampColour(night, 255), [236, 0, 0]);
  for (let level = 0; level < 256; level += 1) assert.deepEqual(rampColour(night, level).slice(1), [0, 0]);
  assert.deepEqual(rgbOf("#fff"), [255, 255, 255]);
});

test("a line is cut behind the viewer and nowhere else", () => {
  const at = (ra) => unitVector(ra, 30);
  assert.equal(crossesSeam(at(179), at(181)), true);
  assert.equal(crossesSeam(at(1), at(359)), false);
  assert.equal(crossesSeam(at(10), at(20)), false);
  // Over the pole: from one side to the other, but in front.
  assert.equal(crossesSeam(unitVector(80, 85), unitVector(280, 85)), false);
});

test("a large outline gets points between its corners and is closed", () => {
  const { corners } = rectangleOutline({ ra_deg: 0, dec_deg: 0, width_deg: 12, height_deg: 12 });
  const line = closedLine(corners);
  assert.ok(line.length / 3 > 16);
  assert.deepEqual([...line.slice(0, 3)], [...line.slice(-3)]);
});
