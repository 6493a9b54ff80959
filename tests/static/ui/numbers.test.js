import assert from "node:assert/strict";
import { test } from "node:test";
import { countdown, readUtc, utcTyped } from "../../../static/src/ui/shell/clock.js";
import { decText, raText } from "../../../static/src/sky/sexagesimal.js";
import { perCent, readAngle, readNumber } from "../../../static/src/ui/shell/numbers.js";

test("typed angles are read in every usual way, and the shown text reads back", () => {
  for (const text of ["18 12 40", "18:12:40.0", "18h12m40s", "18h 12m 40.0s", raText(273.1666667)]) {
    assert.ok(Math.abs(/** @type {number} */ (readAngle(text, { isHours: true })) - 273.1666667) < 1e-4, text);
  }
  for (const text of ["-21 04 10", "−21:04:10", "-21d04m10s", decText(-21.0694444)]) {
    assert.ok(Math.abs(/** @type {number} */ (readAngle(text, { isHours: false })) + 21.0694444) < 1e-4, text);
  }
  assert.equal(readAngle("83,633", { isHours: true }), 83.633);
  assert.equal(readAngle("-00 30", { isHours: false }), -0.5);
  assert.equal(readAngle("18 72 10", { isHours: true }), null);
  assert.equal(readAngle("somewhere", { isHours: true }), null);
});

test("numbers with a comma or a true minus are read, others are refused", () => {
  assert.equal(readNumber("16,9"), 16.9);
  assert.equal(readNumber("−1.5"), -1.5);
  assert.equal(readNumber(""), null);
  assert.equal(readNumber("12 mag"), null);
});

test("shares never round to a false zero", () => {
  assert.equal(perCent(0.418), "41.8 %");
  assert.equal(perCent(0.0001), "< 0.1 %");
  assert.equal(perCent(0), "0.0 %");
});

test("times typed in UTC read back, and impossible ones are refused", () => {
  const date = new Date("2027-03-14T05:06:07Z");
  assert.equal(readUtc(utcTyped(date))?.getTime(), date.getTime());
  assert.equal(readUtc("2027-03-14 5:06 UTC")?.toISOString(), "2027-03-14T05:06:00.000Z");
  assert.equal(readUtc("2027-13-14 05:06"), null);
  assert.equal(readUtc("yesterday"), null);
});

test("the countdown shows minutes and seconds, hours only when there are any", () => {
  assert.equal(countdown(400_000), "06:40");
  assert.equal(countdown(3_730_000), "1:02:10");
  assert.equal(countdown(-5), "now");
});
