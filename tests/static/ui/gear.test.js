import assert from "node:assert/strict";
import { test } from "node:test";
import { instrumentValues } from "../../../static/src/ui/gear/instrument_values.js";
import { horizonText, readHorizon } from "../../../static/src/ui/gear/horizon_words.js";
import { eyepieceFieldDeg, fieldDeg, pixelArcsec } from "../../../static/src/ui/gear/optics.js";
import { PRESETS, presetOf, presetValues } from "../../../static/src/ui/gear/presets.js";
import { withField } from "../../../static/src/ui/gear/field_section.js";

test("a sensor as wide as twice the focal length sees 90 degrees", () => {
  assert.ok(Math.abs(fieldDeg(100, 50) - 90) < 1e-12);
});

test("a pixel of 1 mm at 206264.806 mm is one arcsecond", () => {
  assert.ok(Math.abs(pixelArcsec(1000, 206264.806) - 1) < 1e-12);
});

test("forty times magnification shows a fortieth of the apparent field", () => {
  assert.equal(eyepieceFieldDeg({ apparent_deg: 60, eyepiece_mm: 30, focal_length_mm: 1200 }), 1.5);
});

/** The words of a form filled with a preset. @param {typeof PRESETS[number]} preset */
function typed(preset) {
  const values = withField(presetValues(preset), preset);
  return { ...Object.fromEntries(Object.entries(values).map(([name, value]) => [name, typeof value === "boolean" ? value : String(value ?? "")])), name: "mine", site: "4" };
}

for (const preset of PRESETS) {
  test(`${preset.label}: its numbers are complete, and only a camera is ever declared for daylight`, () => {
    const { values, unread } = instrumentValues(typed(preset), preset);
    assert.deepEqual(unread, []);
    const all = /** @type {any} */ (values);
    assert.ok(all.width_deg > 0 && all.height_deg > 0 && all.aperture_mm > 0);
    assert.equal(all.shape === "circle" ? all.width_deg : 0, all.shape === "circle" ? all.height_deg : 0);
    assert.notEqual(all.is_daytime_rated, true);
    assert.equal("is_eye_free" in all, preset.values.kind === "camera");
    assert.equal(presetOf({ ...all }).id, preset.id);
  });
}

test("words that are no numbers are named", () => {
  const lens = PRESETS[0];
  const { unread } = instrumentValues({ ...typed(lens), aperture_mm: "f/2.8", rotation_deg: "north" }, lens);
  assert.deepEqual(unread, ["aperture_mm", "rotation_deg"]);
});

test("a skyline is read from pairs of azimuth and altitude, in any order", () => {
  assert.deepEqual(readHorizon("180 12, 90 35; 270.5 −2"), [[90, 35], [180, 12], [270.5, -2]]);
  assert.deepEqual(readHorizon(""), []);
  assert.deepEqual(readHorizon(horizonText([[0, 5], [355, 20.5]])), [[0, 5], [355, 20.5]]);
});

test("a skyline that cannot be read is not sent", () => {
  for (const text of ["90", "90 35 12", "north 10", "361 10", "90 91"]) assert.equal(readHorizon(text), null, text);
});

test("an empty limit of the mount limits nothing, and a tick turns the mount over", () => {
  const camera = PRESETS.find(({ id }) => id === "telescope");
  const typed = { name: "n", site: "1", band: "V", ...presetValues(camera), max_hour_angle_h: "−0.5", min_dec_deg: "", turns_at_meridian: true };
  const words = Object.fromEntries(Object.entries(typed).map(([name, value]) => [name, typeof value === "number" ? String(value) : value]));
  const { values, unread } = instrumentValues(words, camera);
  assert.deepEqual(unread, []);
  assert.equal(values.max_hour_angle_h, -0.5);
  assert.equal(values.min_dec_deg, null);
  assert.equal(values.crosses_meridian, false);
});
