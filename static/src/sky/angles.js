/** Angles: degrees outside, radians inside, right ascension always 0..360. */

export const DEG = Math.PI / 180;

/** @param {number} ra_deg @returns {number} the same angle in 0..360 */
export function wrapRaDeg(ra_deg) {
  const wrapped = ra_deg % 360;
  return wrapped < 0 ? wrapped + 360 : wrapped + 0;
}

/** The same angle in -180..180. @param {number} angle_deg @returns {number} */
export function wrapSignedDeg(angle_deg) {
  const wrapped = wrapRaDeg(angle_deg);
  return wrapped > 180 ? wrapped - 360 : wrapped;
}

/** @param {number} value @param {number} low @param {number} high */
export function clamp(value, low, high) {
  return Math.min(high, Math.max(low, value));
}
