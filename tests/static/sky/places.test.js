import assert from "node:assert/strict";
import { readFileSync } from "node:fs";
import { test } from "node:test";
import { decText, decimalText, raText } from "../../../static/src/sky/sexagesimal.js";
import { altitudeDeg, gmstDeg, zenithOf } from "../../../static/src/sky/site_sky.js";
import {
  GALACTIC_POLE,
  galacticPlane,
  moonAt,
  moonEcliptic,
  sunLongitudeDeg,
  sunRaDec,
} from "../../../static/src/sky/sun_moon.js";
import { eastNorth, offsetBy, raDec, separationDeg, unitVector } from "../../../static/src/sky/vectors.js";

/** @param {number} a @param {number} b @param {number} tolerance */
function near(a, b, tolerance) {
  assert.ok(Math.abs(a - b) <= tolerance, `${a} is not within ${tolerance} of ${b}`);
}

test("the Sun of 1992 October 13 is Meeus's to 0.01 degree", () => {
  // Meeus, Astronomical Algorithms, example 25.a: geometric longitude 199.90988, 0h TD (58 s before UT matter not).
  near(sunLongitudeDeg(Date.UTC(1992, 9, 13)), 199.90988, 0.01);
});

test("the Moon of 1992 April 12 is Meeus's to 0.3 degree", () => {
  // Meeus, Astronomical Algorithms, example 47.a: 133.162655, -3.229126, 0h TD.
  const { longitude_deg, latitude_deg } = moonEcliptic(Date.UTC(1992, 3, 12));
  near(longitude_deg, 133.162655, 0.3);
  near(latitude_deg, -3.229126, 0.2);
});

test("the Moon of 1992 April 12 is lit as Meeus says", () => {
  // Meeus, example 48.a: illuminated fraction 0.6786; first quarter was on April 10, so it waxes.
  const { lit, is_waxing } = moonAt(Date.UTC(1992, 3, 12));
  near(lit, 0.6786, 0.005);
  assert.equal(is_waxing, true);
});

test("at the March equinox the Sun crosses the equator of date", () => {
  // Equinox of 2027 March 20, 20:25 UT (Meeus, table 27.a to C, from memory); J2000 lies 0.38 deg behind.
  const { ra_deg } = sunRaDec(Date.UTC(2027, 2, 20, 20, 25));
  near(((ra_deg + 180) % 360) - 180, -0.35, 0.05);
});

test("sidereal time at Greenwich on 1987 April 10, 0h and 19h21m UT", () => {
  // Meeus, examples 12.a and 12.b: 13h10m46.3668s; 128.7378734 deg.
  near(gmstDeg(Date.UTC(1987, 3, 10)), (13 + 10 / 60 + 46.3668 / 3600) * 15, 1e-4);
  near(gmstDeg(Date.UTC(1987, 3, 10, 19, 21)), 128.7378734, 1e-4);
});

test("the zenith stands at 90 degrees and the pole at the latitude", () => {
  const site = { latitude_deg: 52.1, longitude_deg: 21.0 };
  const now = Date.UTC(2027, 2, 14, 1);
  near(altitudeDeg(site, zenithOf(site, now), now), 90, 1e-5);
  near(altitudeDeg(site, { ra_deg: 77, dec_deg: 90 }, now), 52.1, 1e-9);
});

test("the Galactic plane passes Sagittarius A* and stands square on its pole", () => {
  // Sgr A*: 17h45m40.04s -29d00m28.1s (Reid & Brunthaler 2004, ApJ 616, 872); b = -0.046 deg.
  const pole = unitVector(GALACTIC_POLE.ra_deg, GALACTIC_POLE.dec_deg);
  const centre = unitVector(266.41683, -29.00781);
  near(separationDeg(pole, centre), 90.046, 0.001);
  for (const point of galacticPlane(36)) near(separationDeg(pole, point), 90, 1e-9);
});

test("an offset by distance and angle arrives there", () => {
  const from = unitVector(350, 70);
  near(separationDeg(from, offsetBy(from, 25, 40)), 25, 1e-9);
  near(raDec(offsetBy(from, 5, 0)).dec_deg, 75, 1e-9);
  assert.deepEqual(eastNorth([0, 0, 1]).east, [0, 1, 0]);
});

test("sexagesimal text carries rounding upwards", () => {
  assert.equal(raText(359.99999), "00h 00m 00s");
  assert.equal(raText(266.41683), "17h 45m 40s");
  assert.equal(decText(-29.00781), "−29° 00′ 28″");
  assert.equal(decText(59.99999), "+60° 00′ 00″");
  assert.equal(decText(-0.5, "minute"), "−00° 30′");
  assert.equal(raText(15.25, "minute"), "01h 01m");
  assert.equal(decimalText({ ra_deg: 1.5, dec_deg: -2 }), "1.5000° −2.0000°");
});

test("Sun and Moon are where astropy sees them from the Earth's centre, 2010 to 2040", () => {
  const { cases } = JSON.parse(readFileSync(new URL("sun-moon-cases.json", import.meta.url), "utf8"));
  for (const { time_ms, sun, moon } of cases) {
    const ours = sunRaDec(time_ms);
    const luna = moonAt(time_ms);
    // The errors that the Almanac states for these formulae.
    near(separationDeg(unitVector(ours.ra_deg, ours.dec_deg), unitVector(...sun)), 0, 0.01);
    near(separationDeg(unitVector(luna.ra_deg, luna.dec_deg), unitVector(...moon)), 0, 0.3);
  }
});
