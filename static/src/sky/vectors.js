/** Directions as unit vectors [x, y, z]: x to RA 0, y to RA 90, z to the north pole. */

import { DEG, wrapRaDeg } from "./angles.js";

/** @typedef {[number, number, number]} Vector */

/** @param {number} ra_deg @param {number} dec_deg @returns {Vector} */
export function unitVector(ra_deg, dec_deg) {
  const ra = ra_deg * DEG;
  const dec = dec_deg * DEG;
  return [Math.cos(dec) * Math.cos(ra), Math.cos(dec) * Math.sin(ra), Math.sin(dec)];
}

/** @param {Vector} v @returns {{ra_deg: number, dec_deg: number}} */
export function raDec(v) {
  const dec_deg = Math.atan2(v[2], Math.hypot(v[0], v[1])) / DEG;
  return { ra_deg: wrapRaDeg(Math.atan2(v[1], v[0]) / DEG), dec_deg };
}

/** @param {Vector} a @param {Vector} b @returns {number} */
export function dot(a, b) {
  return a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
}

/** @param {Vector} a @param {Vector} b @returns {Vector} */
export function cross(a, b) {
  return [a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0]];
}

/** @param {Vector} v @returns {Vector} */
export function normalised(v) {
  const length = Math.hypot(v[0], v[1], v[2]);
  return [v[0] / length, v[1] / length, v[2] / length];
}

/**
 * Angle between two directions, degrees; good to the last digit at 0 and 180.
 * @param {Vector} a
 * @param {Vector} b
 */
export function separationDeg(a, b) {
  const c = cross(a, b);
  return Math.atan2(Math.hypot(c[0], c[1], c[2]), dot(a, b)) / DEG;
}

/**
 * The point a fraction of the way along the chord, back on the sphere.
 * @param {Vector} a
 * @param {Vector} b
 * @param {number} fraction
 * @returns {Vector}
 */
export function between(a, b, fraction) {
  const rest = 1 - fraction;
  return normalised([
    a[0] * rest + b[0] * fraction,
    a[1] * rest + b[1] * fraction,
    a[2] * rest + b[2] * fraction,
  ]);
}

/**
 * East and north at a direction (at a pole: as if RA were 0).
 * @param {Vector} v
 * @returns {{east: Vector, north: Vector}}
 */
export function eastNorth(v) {
  const flat = Math.hypot(v[0], v[1]);
  /** @type {Vector} */
  const east = flat < 1e-12 ? [0, 1, 0] : [-v[1] / flat, v[0] / flat, 0];
  return { east, north: cross(v, east) };
}

/**
 * The direction at a distance and position angle (from north through east).
 * @param {Vector} from
 * @param {number} distance_deg
 * @param {number} position_angle_deg
 * @returns {Vector}
 */
export function offsetBy(from, distance_deg, position_angle_deg) {
  const { east, north } = eastNorth(from);
  const c = Math.cos(distance_deg * DEG);
  const n = Math.sin(distance_deg * DEG) * Math.cos(position_angle_deg * DEG);
  const e = Math.sin(distance_deg * DEG) * Math.sin(position_angle_deg * DEG);
  return [
    c * from[0] + n * north[0] + e * east[0],
    c * from[1] + n * north[1] + e * east[1],
    c * from[2] + n * north[2] + e * east[2],
  ];
}
