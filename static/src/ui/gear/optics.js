/** From what is printed on the gear to what the sky sees of it. Pure. */

const RADIAN_ARCSEC = 206264.806;

/**
 * Side of the field of a sensor behind a focal length: 2 atan(side / 2f).
 * @param {number} side_mm @param {number} focal_length_mm @returns {number} degrees
 */
export function fieldDeg(side_mm, focal_length_mm) {
  return (2 * Math.atan(side_mm / (2 * focal_length_mm)) * 180) / Math.PI;
}

/** @param {number} pixel_um @param {number} focal_length_mm @returns {number} arcsec per pixel */
export function pixelArcsec(pixel_um, focal_length_mm) {
  return (pixel_um / 1000 / focal_length_mm) * RADIAN_ARCSEC;
}

/**
 * True field of an eyepiece from its apparent field, by the magnification.
 * @param {{apparent_deg: number, eyepiece_mm: number, focal_length_mm: number}} optics
 * @returns {number} degrees
 */
export function eyepieceFieldDeg({ apparent_deg, eyepiece_mm, focal_length_mm }) {
  return (apparent_deg * eyepiece_mm) / focal_length_mm;
}

/** Three figures are all that a field needs. @param {number} value */
export function rounded(value) {
  return Number(value.toPrecision(3));
}
