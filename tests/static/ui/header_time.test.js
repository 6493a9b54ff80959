import assert from "node:assert/strict";
import { test } from "node:test";
import { headerMidTime, offeredShifts, typedFromHeader } from "../../../static/src/ui/tonight/header_time.js";

const at = (/** @type {string} */ iso) => Date.parse(iso);

test("the middle is stated, or the start plus half of the exposure", () => {
  assert.equal(headerMidTime({ "DATE-OBS": "2027-03-14T05:06:00", EXPTIME: 60 }), at("2027-03-14T05:06:30Z"));
  assert.equal(headerMidTime({ "DATE-AVG": "2027-03-14T05:07:00Z", "DATE-OBS": "2027-03-14T05:06:00", EXPTIME: 60 }), at("2027-03-14T05:07:00Z"));
  // MJD 51544.5 is 2000 January 1, 12h: the definition of J2000.0.
  assert.equal(headerMidTime({ "MJD-OBS": 51544.5, EXPOSURE: 20 }), at("2000-01-01T12:00:10Z"));
  assert.equal(headerMidTime({ "DATE-OBS": "2027-03-14" }), null);
});

test("a header that is left out still fills the fields", () => {
  const typed = typedFromHeader({ "DATE-OBS": "2027-03-14T05:06:00", EXPTIME: 60, FILTER: "R", CRVAL1: 273.1666667, CRVAL2: -21.0694444 });
  assert.deepEqual(typed, { mid_time: "2027-03-14 05:06:30", duration_s: "60", band: "R", ra_deg: "18h 12m 40s", dec_deg: "−21° 04′ 10″" });
  assert.deepEqual(typedFromHeader({}), {});
});

test("the device's own difference from UTC is offered first, then the smallest shifts", () => {
  assert.deepEqual(offeredShifts([-14, -11, -8, 4, 5, 6], 11), [-11, 4, 5, 6]);
  assert.deepEqual(offeredShifts([-3, 2], 9), [2, -3]);
});
