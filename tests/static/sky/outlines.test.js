import assert from "node:assert/strict";
import { test } from "node:test";
import { circleOutline, footprintOutline, footprintOutlines, isInside, isUnderFrame, rectangleOutline, shrunk } from "../../../static/src/sky/footprint.js";
import { clipped, gridLabels, gridLines, gridSteps, gridText } from "../../../static/src/sky/graticule.js";
import { overlaps, placeLabels } from "../../../static/src/sky/labels.js";
import { wholeSky } from "../../../static/src/sky/projections.js";
import { offsetBy, separationDeg, unitVector } from "../../../static/src/sky/vectors.js";
import { closeTo, wholeView } from "../../../static/src/sky/view.js";

test("a rectangle reaches half its sides along north and east, also at the pole", () => {
  for (const dec_deg of [0, -60, 90]) {
    const outline = rectangleOutline({ ra_deg: 10, dec_deg, width_deg: 3, height_deg: 2 });
    for (const [angle, reach] of [[0, 1], [90, 1.5], [180, 1], [270, 1.5]]) {
      if (dec_deg === 90) break;
      assert.ok(isInside(outline, offsetBy(outline.centre, reach - 0.001, angle)));
      assert.ok(!isInside(outline, offsetBy(outline.centre, reach + 0.001, angle)));
    }
    assert.ok(isInside(outline, outline.centre));
    assert.ok(!isInside(outline, unitVector(190, -dec_deg)));
  }
});

test("a circle's corners lie on it", () => {
  const outline = circleOutline({ ra_deg: 0, dec_deg: 88 }, 5);
  for (const corner of outline.corners) {
    assert.ok(Math.abs(separationDeg(corner, outline.centre) - 5) < 1e-9);
  }
  assert.ok(isInside(outline, unitVector(180, 89)));
});

test("both footprint shapes of a frame are understood, whichever way their corners run", () => {
  const corners_deg = [[359, -1], [1, -1], [1, 1], [359, 1]];
  for (const corners of [corners_deg, [...corners_deg].reverse()]) {
    const outline = footprintOutline({ shape: "polygon", corners_deg: corners });
    assert.ok(isInside(outline, unitVector(0, 0)));
    assert.ok(isInside(outline, unitVector(359.2, 0.9)));
    assert.ok(!isInside(outline, unitVector(358.8, 0)));
  }
  const circle = footprintOutline({ shape: "circle", ra_deg: 5, dec_deg: 5, diameter_deg: 2 });
  assert.ok(isInside(circle, unitVector(5, 5.9)) && !isInside(circle, unitVector(5, 6.1)));
});

test("a shrunk outline lies inside", () => {
  const outline = rectangleOutline({ ra_deg: 0, dec_deg: 0, width_deg: 4, height_deg: 4 });
  for (const corner of shrunk(outline, 0.8).corners) assert.ok(isInside(outline, corner));
});

test("the grid becomes finer when the view does", () => {
  const whole = wholeView(wholeSky, { ra_deg: 0, dec_deg: 0 }, { width_px: 900, height_px: 700 });
  const close = closeTo(whole, { ra_deg: 80, dec_deg: 20 }, 1);
  assert.ok(gridSteps(whole).ra_deg >= 15);
  assert.ok(gridSteps(close).ra_deg < 2.6);
  assert.ok(gridLines(close).length < 40);
});

test("no grid line stands twice", () => {
  const whole = wholeView(wholeSky, { ra_deg: 37, dec_deg: 0 }, { width_px: 900, height_px: 700 });
  const names = gridLines(whole).map(({ kind, value_deg }) => `${kind} ${value_deg.toFixed(3)}`);
  assert.equal(new Set(names).size, names.length);
});

test("grid labels say hours, minutes, degrees", () => {
  assert.equal(gridText("ra", 270, 30), "18h");
  assert.equal(gridText("ra", 277.5, 7.5), "18h 30m");
  assert.equal(gridText("ra", 0.125, 0.125), "0h 00m 30s");
  assert.equal(gridText("dec", -30, 30), "−30°");
  assert.equal(gridText("dec", -0.25, 0.25), "−0° 15′");
});

test("labels never overlap and the first keeps its place", () => {
  const size = { width_px: 300, height_px: 200 };
  const labels = Array.from({ length: 40 }, (_, i) => ({
    text: `${i}`,
    kind: "ra",
    width_px: 50,
    height_px: 14,
    places: [[(i * 17) % 260, 20 + ((i * 31) % 170)], [(i * 17) % 260, 40]],
  }));
  const placed = placeLabels(labels, size);
  assert.equal(placed[0].label.text, "0");
  for (const a of placed) for (const b of placed) assert.ok(a === b || !overlaps(a.box, b.box));
});

test("grid labels of a close view stand on the screen", () => {
  const whole = wholeView(wholeSky, { ra_deg: 0, dec_deg: 0 }, { width_px: 900, height_px: 700 });
  const close = closeTo(whole, { ra_deg: 80, dec_deg: 60 }, 3);
  const labels = gridLabels(close, gridLines(close));
  assert.ok(labels.length >= 4);
  for (const { x_px, y_px } of labels) assert.ok(x_px > 0 && x_px < 900 && y_px > 0 && y_px < 700);
});

test("a piece of line is cut at the edge of the screen, or is not there", () => {
  const size = { width_px: 162, height_px: 140 };
  assert.deepEqual(clipped([50, 60], [50, 500], size), [[50, 60], [50, 118]]);
  assert.deepEqual(clipped([-92, 60], [208, 60], size), [[8, 60], [100, 60]]);
  assert.equal(clipped([-50, 60], [-10, 60], size), null);
});

test("a mosaic is under each of its pictures, not between them", () => {
  const square = (/** @type {number} */ ra_deg) => ({ shape: /** @type {const} */ ("polygon"), corners_deg: [[ra_deg, -1], [ra_deg + 1, -1], [ra_deg + 1, 1], [ra_deg, 1]] });
  const mosaic = /** @type {any} */ ({ shape: "mosaic", ra_deg: 1.5, dec_deg: 0, parts: [square(0), square(2)] });
  assert.equal(footprintOutlines(mosaic).length, 2);
  assert.deepEqual([0.5, 1.5, 2.5].map((ra_deg) => isUnderFrame(mosaic, unitVector(ra_deg, 0))), [true, false, true]);
});

test("an outline that bends inwards ends where it bends", () => {
  const corners_deg = [[-1, -1], [0, -0.5], [1, -1], [0.5, 0], [1, 1], [0, 0.5], [-1, 1], [-0.5, 0]];
  for (const corners of [corners_deg, [...corners_deg].reverse()]) {
    const frame = /** @type {any} */ ({ shape: "polygon", corners_deg: corners });
    assert.ok(isUnderFrame(frame, unitVector(0, 0.45)) && isUnderFrame(frame, unitVector(0.9, 0.9)));
    assert.ok(!isUnderFrame(frame, unitVector(0, 0.55)) && !isUnderFrame(frame, unitVector(0.55, 0)));
  }
});
