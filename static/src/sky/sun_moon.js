/**
 * Sun and Moon to a fraction of a degree: enough to draw them, never to judge safety (the server does).
 * Source: Astronomical Almanac, low-precision formulae, pages C5 and D22 (from memory). Error: Sun 0.01 deg,
 * Moon 0.3 deg, seen from the Earth's centre (parallax moves the Moon by up to 1 deg more).
 */

import { DEG, wrapRaDeg } from "./angles.js";
import { offsetBy, raDec, separationDeg, unitVector } from "./vectors.js";

const J2000_MS = Date.UTC(2000, 0, 1, 12);
const OBLIQUITY_DEG = 23.4393;
/** General precession in longitude, degrees a century. Source: IAU 2006, 5028.8 arcsec. */
const PRECESSION_DEG = 1.39689;

/** North Galactic pole, ICRS. Source: ESA 1997, The Hipparcos Catalogue, volume 1, section 1.5.3. */
export const GALACTIC_POLE = { ra_deg: 192.85948, dec_deg: 27.12825 };

/** @param {number} time_ms @returns {number} days since J2000 */
function daysSince2000(time_ms) {
  return (time_ms - J2000_MS) / 86_400_000;
}

/** @param {number} angle_deg */
function sine(angle_deg) {
  return Math.sin(angle_deg * DEG);
}

/** Ecliptic longitude of the Sun, mean equinox of date. @param {number} time_ms @returns {number} */
export function sunLongitudeDeg(time_ms) {
  const n = daysSince2000(time_ms);
  const anomaly = 357.528 + 0.9856003 * n;
  return wrapRaDeg(280.46 + 0.9856474 * n + 1.915 * sine(anomaly) + 0.02 * sine(2 * anomaly));
}

/**
 * Ecliptic place of the Moon, equinox of date.
 * @param {number} time_ms
 * @returns {{longitude_deg: number, latitude_deg: number}}
 */
export function moonEcliptic(time_ms) {
  const t = daysSince2000(time_ms) / 36525;
  const longitude_deg =
    218.32 +
    481267.881 * t +
    6.29 * sine(135.0 + 477198.87 * t) -
    1.27 * sine(259.3 - 413335.36 * t) +
    0.66 * sine(235.7 + 890534.22 * t) +
    0.21 * sine(269.9 + 954397.74 * t) -
    0.19 * sine(357.5 + 35999.05 * t) -
    0.11 * sine(186.5 + 966404.03 * t);
  const latitude_deg =
    5.13 * sine(93.3 + 483202.02 * t) +
    0.28 * sine(228.2 + 960400.89 * t) -
    0.28 * sine(318.3 + 6003.15 * t) -
    0.17 * sine(217.6 - 407332.21 * t);
  return { longitude_deg: wrapRaDeg(longitude_deg), latitude_deg };
}

/**
 * Ecliptic of date to equatorial J2000.
 * @param {number} longitude_deg
 * @param {number} latitude_deg
 * @param {number} time_ms
 */
function equatorial(longitude_deg, latitude_deg, time_ms) {
  const t = daysSince2000(time_ms) / 36525;
  const [x, y, z] = unitVector(longitude_deg - PRECESSION_DEG * t, latitude_deg);
  const [s, c] = [sine(OBLIQUITY_DEG), Math.cos(OBLIQUITY_DEG * DEG)];
  return raDec([x, c * y - s * z, s * y + c * z]);
}

/** @param {number} time_ms @returns {{ra_deg: number, dec_deg: number}} */
export function sunRaDec(time_ms) {
  return equatorial(sunLongitudeDeg(time_ms), 0, time_ms);
}

/**
 * The Moon with the lit share of its disc.
 * @param {number} time_ms
 * @returns {{ra_deg: number, dec_deg: number, lit: number, is_waxing: boolean}}
 */
export function moonAt(time_ms) {
  const { longitude_deg, latitude_deg } = moonEcliptic(time_ms);
  const moon = equatorial(longitude_deg, latitude_deg, time_ms);
  const sun = sunRaDec(time_ms);
  const apart_deg = separationDeg(
    unitVector(moon.ra_deg, moon.dec_deg),
    unitVector(sun.ra_deg, sun.dec_deg),
  );
  const ahead_deg = wrapRaDeg(longitude_deg - sunLongitudeDeg(time_ms));
  return { ...moon, lit: (1 - Math.cos(apart_deg * DEG)) / 2, is_waxing: ahead_deg < 180 };
}

/** The Galactic plane as a closed line of directions. @param {number} n_points */
export function galacticPlane(n_points) {
  const pole = unitVector(GALACTIC_POLE.ra_deg, GALACTIC_POLE.dec_deg);
  return Array.from({ length: n_points + 1 }, (_, i) => offsetBy(pole, 90, (i * 360) / n_points));
}
