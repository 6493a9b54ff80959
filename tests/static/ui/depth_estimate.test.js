import assert from "node:assert/strict";
import { test } from "node:test";
import { estimateQuestion, estimateWords } from "../../../static/src/ui/tonight/depth_estimate.js";

test("an estimate is asked for in degrees, UTC and seconds", () => {
  const typed = { ra_deg: "18 00 00", dec_deg: "−21 30 00", mid_time: "2027-03-14 22:17:30", duration_s: "300" };
  assert.deepEqual(estimateQuestion(typed), { ra_deg: 270, dec_deg: -21.5, mid_time: "2027-03-14T22:17:30.000Z", duration_s: 300 });
});

test("what is missing is not made up", () => {
  assert.deepEqual(estimateQuestion({ duration_s: "long" }), { ra_deg: null, dec_deg: null, mid_time: null, duration_s: null });
});

test("an estimate is called one and shows how sure it is", () => {
  const words = estimateWords({ limit_mag: 17.94, uncertainty_mag: 0.42, saturation_mag: 9.1, assumptions: ["clear sky"] });
  assert.match(words, /estimate: 17\.9 ± 0\.4/);
  assert.match(words, /9\.1 are saturated/);
  assert.match(words, /clear sky/);
});
