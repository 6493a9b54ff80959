import assert from "node:assert/strict";
import { test } from "node:test";
import { dome, wholeSky } from "../../../static/src/sky/projections.js";
import { separationDeg, unitVector } from "../../../static/src/sky/vectors.js";

/** A repeatable scatter of directions. */
function scatter(count) {
  return Array.from({ length: count }, (_, i) => {
    const z = -1 + (2 * (i + 0.5)) / count;
    const lon = i * 2.399963;
    return [Math.sqrt(1 - z * z) * Math.cos(lon), Math.sqrt(1 - z * z) * Math.sin(lon), z];
  });
}

/** Places where formulas break: poles, antipode from both sides, the seam, the middle. */
const corners = [
  [0, 90], [0, -90], [180, 0], [179.9999, 0], [180.0001, 0], [180, 89.9], [180, -45], [0, 0], [1e-9, 1e-9], [90, 0], [270, 0],
].map(([ra, dec]) => unitVector(ra, dec));

test("the inverse undoes the whole sky, also at the poles and the antipode", () => {
  for (const v of [...scatter(500), ...corners]) {
    const [x, y] = wholeSky.forward(v);
    // on the outline itself a rounding error may fall outside: step in by one part in 1e12
    const back = wholeSky.inverse(x * (1 - 1e-12), y * (1 - 1e-12));
    assert.ok(separationDeg(v, back) < 2e-4, `${v} came back as ${back}`);
  }
});

test("inside the outline the round trip is exact to a milliarcsecond", () => {
  for (const v of scatter(500).filter((u) => u[0] > -0.99)) {
    assert.ok(separationDeg(v, wholeSky.inverse(...wholeSky.forward(v))) < 1e-3 / 3600);
  }
});

test("the antipode is the end of the ellipse", () => {
  const [x, y] = wholeSky.forward([-1, 0, 0]);
  assert.ok(Math.abs(Math.abs(x) - wholeSky.half_width) < 1e-12 && Math.abs(y) < 1e-12);
});

test("the poles are the ends of the short axis", () => {
  const [x, y] = wholeSky.forward([0, 0, 1]);
  assert.ok(Math.abs(x) < 1e-12 && Math.abs(y - wholeSky.half_height) < 1e-12);
});

test("outside the outline there is no sky", () => {
  assert.equal(wholeSky.inverse(2.83, 0.1), null);
  assert.equal(dome.inverse(1.1, 1.1), null);
});

/** Area on the plane over area on the sphere of a small patch. */
function areaRatio(projection, lon_deg, lat_deg) {
  const step_deg = 0.01;
  const [a, b, c] = [[0, 0], [step_deg, 0], [0, step_deg]].map(([dl, db]) =>
    projection.forward(unitVector(lon_deg + dl, lat_deg + db)),
  );
  const plane = Math.abs((b[0] - a[0]) * (c[1] - a[1]) - (c[0] - a[0]) * (b[1] - a[1]));
  const step = (step_deg * Math.PI) / 180;
  return plane / (step * step * Math.cos((lat_deg * Math.PI) / 180));
}

test("both maps are equal-area", () => {
  for (const [lon, lat] of [[0, 0], [60, 30], [-80, -70], [85, 5], [20, 80]]) {
    assert.ok(Math.abs(areaRatio(wholeSky, lon, lat) - 1) < 1e-3);
    assert.ok(Math.abs(areaRatio(dome, lon, lat) - 1) < 1e-3);
  }
  assert.ok(Math.abs(areaRatio(wholeSky, 170, -40) - 1) < 1e-3);
});

test("the whole ellipse holds 4 pi, the dome 2 pi", () => {
  const ellipse = Math.PI * wholeSky.half_width * wholeSky.half_height;
  assert.ok(Math.abs(ellipse - 4 * Math.PI) < 1e-12);
  assert.ok(Math.abs(Math.PI * dome.half_width * dome.half_height - 2 * Math.PI) < 1e-12);
});

test("the dome's inverse undoes it and the far half is not on it", () => {
  for (const v of scatter(300)) {
    const plane = dome.forward(v);
    if (v[0] < 0) assert.equal(plane, null);
    else assert.ok(separationDeg(v, dome.inverse(...plane)) < 1e-6);
  }
});

test("x grows to the east and y to the north", () => {
  for (const projection of [wholeSky, dome]) {
    assert.ok(projection.forward(unitVector(10, 0))[0] > 0);
    assert.ok(projection.forward(unitVector(0, 10))[1] > 0);
  }
});
