/** What stands over a site: zenith, altitude. Places are known to 0.1 degree here, so plain formulas do. */

import { DEG, wrapRaDeg } from "./angles.js";
import { dot, unitVector } from "./vectors.js";

const J2000_MS = Date.UTC(2000, 0, 1, 12);

/**
 * Greenwich mean sidereal time, degrees, taking UT1 = UTC.
 * Source: Meeus, Astronomical Algorithms, 2nd edition, eq. 12.4 (from memory).
 * @param {number} time_ms
 */
export function gmstDeg(time_ms) {
  const days = (time_ms - J2000_MS) / 86_400_000;
  const t = days / 36525;
  return wrapRaDeg(280.46061837 + 360.98564736629 * days + 0.000387933 * t * t);
}

/**
 * @param {{latitude_deg: number, longitude_deg: number}} site
 * @param {number} time_ms
 * @returns {{ra_deg: number, dec_deg: number}}
 */
export function zenithOf(site, time_ms) {
  return { ra_deg: wrapRaDeg(gmstDeg(time_ms) + site.longitude_deg), dec_deg: site.latitude_deg };
}

/**
 * Altitude of a direction without refraction.
 * @param {{latitude_deg: number, longitude_deg: number}} site
 * @param {{ra_deg: number, dec_deg: number}} place
 * @param {number} time_ms
 */
export function altitudeDeg(site, place, time_ms) {
  const zenith = zenithOf(site, time_ms);
  const height = dot(
    unitVector(zenith.ra_deg, zenith.dec_deg),
    unitVector(place.ra_deg, place.dec_deg),
  );
  return Math.asin(Math.max(-1, Math.min(1, height))) / DEG;
}
