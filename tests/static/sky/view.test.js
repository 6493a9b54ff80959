import assert from "node:assert/strict";
import { test } from "node:test";
import { wholeSky } from "../../../static/src/sky/projections.js";
import { raDec, separationDeg, unitVector } from "../../../static/src/sky/vectors.js";
import {
  closeTo,
  holdUnder,
  isWhole,
  resized,
  rotationOf,
  screenOf,
  skyAt,
  wholeView,
  zoomedAt,
} from "../../../static/src/sky/view.js";

const size = { width_px: 960, height_px: 720 };
const view = wholeView(wholeSky, { ra_deg: 210, dec_deg: 12 }, size);

test("the middle of the screen is the middle of the view", () => {
  const { ra_deg, dec_deg } = raDec(skyAt(view, 480, 360));
  assert.ok(Math.abs(ra_deg - 210) < 1e-9 && Math.abs(dec_deg - 12) < 1e-9);
});

test("screen and sky undo each other", () => {
  for (const [ra, dec] of [[200, 10], [5, -80], [300, 60], [210, 90], [100, 0]]) {
    const v = unitVector(ra, dec);
    const at = screenOf(view, rotationOf(view), v);
    assert.ok(separationDeg(v, skyAt(view, ...at)) < 1e-6);
  }
});

test("east is to the left", () => {
  assert.ok(screenOf(view, rotationOf(view), unitVector(220, 12))[0] < 480);
});

test("dragging keeps the held direction under the pointer", () => {
  const held = skyAt(view, 500, 300);
  for (const [x, y] of [[400, 320], [520, 250], [560, 330]]) {
    const moved = holdUnder(view, held, x, y);
    assert.ok(separationDeg(held, skyAt(moved, x, y)) < 1e-6, `at ${x}, ${y}`);
  }
});

test("the middle never passes a pole", () => {
  const held = skyAt(view, 480, 200);
  const moved = holdUnder(view, held, 480, 700);
  assert.ok(Math.abs(moved.dec_deg) <= 90);
});

test("a drag over RA 0 does not jump", () => {
  const near = wholeView(wholeSky, { ra_deg: 0.5, dec_deg: 0 }, size);
  const moved = holdUnder(near, skyAt(near, 480, 360), 470, 360);
  const apart = ((moved.ra_deg - near.ra_deg + 540) % 360) - 180;
  assert.ok(Math.abs(apart) < 5);
});

test("zoom holds the direction under the pointer, down to a tile and back", () => {
  const at = { x_px: 610, y_px: 300 };
  const held = skyAt(view, at.x_px, at.y_px);
  let zoomed = view;
  for (let i = 0; i < 60; i += 1) zoomed = zoomedAt(zoomed, 1.25, at);
  assert.ok(separationDeg(held, skyAt(zoomed, at.x_px, at.y_px)) < 1e-6);
  assert.ok(zoomed.scale_px * (Math.PI / 180) * 0.3 > 700, "a third of a degree fills the screen");
  for (let i = 0; i < 80; i += 1) zoomed = zoomedAt(zoomed, 0.8, at);
  assert.ok(isWhole(zoomed));
});

test("a resized window shows the whole map if it did before", () => {
  const small = resized(view, { width_px: 390, height_px: 420 });
  assert.ok(isWhole(small) && small.width_px === 390);
  assert.equal(small.ra_deg, view.ra_deg);
});

test("going close to a tile makes it a third of the screen", () => {
  const close = closeTo(view, { ra_deg: 10, dec_deg: -89 }, 2);
  const top = screenOf(close, rotationOf(close), unitVector(10, -88));
  assert.ok(Math.abs(360 - top[1] - 120) < 2);
});
