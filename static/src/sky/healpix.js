/**
 * HEALPix, NESTED, as far as a picture needs it. Source: Gorski et al. 2005, ApJ 622, 759, sections 4 and 5.
 *
 * A pixel is (face 0..11, ix, iy): each of the twelve faces is a square of 2^order pixels a side, ix and iy are the
 * even and odd bits of the nested number inside the face.
 */

const HALF_PI = Math.PI / 2;
const JR = [2, 2, 2, 2, 3, 3, 3, 3, 4, 4, 4, 4];
const JP = [1, 3, 5, 7, 0, 2, 4, 6, 1, 3, 5, 7];

/** Every second bit of a 32-bit number, packed. @param {number} bits */
function evenBits(bits) {
  let v = bits & 0x55555555;
  v = (v | (v >>> 1)) & 0x33333333;
  v = (v | (v >>> 2)) & 0x0f0f0f0f;
  v = (v | (v >>> 4)) & 0x00ff00ff;
  return (v | (v >>> 8)) & 0x0000ffff;
}

/** A 16-bit number spread over every second bit. @param {number} value */
function spreadBits(value) {
  let v = value & 0x0000ffff;
  v = (v | (v << 8)) & 0x00ff00ff;
  v = (v | (v << 4)) & 0x0f0f0f0f;
  v = (v | (v << 2)) & 0x33333333;
  return (v | (v << 1)) & 0x55555555;
}

/** @param {number} order @returns {number} */
export function nPixels(order) {
  return 12 * 4 ** order;
}

/** @param {number} order @param {number} pixel @returns {{face: number, ix: number, iy: number}} */
export function faceOfPixel(order, pixel) {
  const inFace = 4 ** order;
  const face = Math.floor(pixel / inFace);
  const rest = pixel - face * inFace;
  return { face, ix: evenBits(rest), iy: evenBits(rest >>> 1) };
}

/** @param {number} order @param {{face: number, ix: number, iy: number}} place @returns {number} */
export function pixelOfFace(order, { face, ix, iy }) {
  return face * 4 ** order + ((spreadBits(ix) | (spreadBits(iy) << 1)) >>> 0);
}

/**
 * Place on the atlas of a direction in the belt |z| <= 2/3.
 * @param {number} side
 * @param {number} z
 * @param {number} tt longitude in quarter turns, 0..4
 */
function beltPlace(side, z, tt) {
  const up = side * (0.5 + tt);
  const slope = side * z * 0.75;
  const jp = Math.floor(up - slope);
  const jm = Math.floor(up + slope);
  const ifp = Math.floor(jp / side);
  const ifm = Math.floor(jm / side);
  const face = ifp === ifm ? (ifp & 3) | 4 : ifp < ifm ? ifp & 3 : (ifm & 3) + 8;
  return { face, ix: jm & (side - 1), iy: side - 1 - (jp & (side - 1)) };
}

/**
 * Place on the atlas of a direction in a polar cap.
 * @param {number} side
 * @param {number} z
 * @param {number} flat
 * @param {number} tt
 */
function capPlace(side, z, flat, tt) {
  const quarter = Math.min(3, Math.floor(tt));
  const tp = tt - quarter;
  // sqrt(3 (1 - |z|)) without cancellation at the pole
  const reach = side * flat * Math.sqrt(3 / (1 + Math.abs(z)));
  const jp = Math.min(side - 1, Math.floor(tp * reach));
  const jm = Math.min(side - 1, Math.floor((1 - tp) * reach));
  if (z >= 0) return { face: quarter, ix: side - 1 - jm, iy: side - 1 - jp };
  return { face: quarter + 8, ix: jp, iy: jm };
}

/**
 * The pixel that holds a direction (a unit vector).
 * @param {number} order
 * @param {number} x
 * @param {number} y
 * @param {number} z
 * @returns {{face: number, ix: number, iy: number}}
 */
export function faceOfDirection(order, x, y, z) {
  const side = 2 ** order;
  let tt = Math.atan2(y, x) / HALF_PI;
  if (tt < 0) tt += 4;
  if (tt >= 4) tt -= 4;
  if (Math.abs(z) <= 2 / 3) return beltPlace(side, z, tt);
  return capPlace(side, z, Math.hypot(x, y), tt);
}

/**
 * Unit vector to a place on a face, ix and iy not necessarily whole (a centre is + 0.5).
 * @param {number} order
 * @param {number} face
 * @param {number} fx
 * @param {number} fy
 * @returns {import("./vectors.js").Vector}
 */
export function directionOnFace(order, face, fx, fy) {
  const side = 2 ** order;
  const ring = JR[face] - (fx + fy) / side;
  const nr = ring < 1 ? ring : ring > 3 ? 4 - ring : 1;
  const z = ring < 1 ? 1 - (nr * nr) / 3 : ring > 3 ? (nr * nr) / 3 - 1 : ((2 - ring) * 2) / 3;
  const flat = ring < 1 || ring > 3 ? nr * Math.sqrt((2 - (nr * nr) / 3) / 3) : Math.sqrt(1 - z * z);
  const along = (JP[face] * nr + (fx - fy) / side) * (nr > 0 ? 1 / nr : 0);
  const phi = (along * Math.PI) / 4;
  return [flat * Math.cos(phi), flat * Math.sin(phi), z];
}

/**
 * Centres of pixels as one flat array x, y, z, x, ...
 * @param {number} order
 * @param {ArrayLike<number>} pixels
 * @returns {Float32Array}
 */
export function centresOf(order, pixels) {
  const centres = new Float32Array(3 * pixels.length);
  for (let i = 0; i < pixels.length; i += 1) {
    const { face, ix, iy } = faceOfPixel(order, pixels[i]);
    centres.set(directionOnFace(order, face, ix + 0.5, iy + 0.5), 3 * i);
  }
  return centres;
}

/** Length of an atlas: twelve faces one after the other, row iy, column ix. @param {number} order */
export function atlasLength(order) {
  return nPixels(order);
}

/** Place of a pixel on the atlas. @param {number} order @param {number} pixel */
export function atlasPlace(order, pixel) {
  const { face, ix, iy } = faceOfPixel(order, pixel);
  const side = 2 ** order;
  return (face * side + iy) * side + ix;
}

/**
 * Place on the atlas of the pixel that holds a direction: faceOfDirection without making objects, for inner
 * loops.
 * @param {number} side
 * @param {number} x
 * @param {number} y
 * @param {number} z
 */
export function atlasPlaceAt(side, x, y, z) {
  let tt = Math.atan2(y, x) / HALF_PI;
  if (tt < 0) tt += 4;
  if (tt >= 4) tt -= 4;
  const mask = side - 1;
  const height = Math.abs(z);
  if (height <= 2 / 3) {
    const jp = Math.floor(side * (0.5 + tt - z * 0.75));
    const jm = Math.floor(side * (0.5 + tt + z * 0.75));
    const ifp = Math.floor(jp / side);
    const ifm = Math.floor(jm / side);
    const face = ifp === ifm ? (ifp & 3) | 4 : ifp < ifm ? ifp & 3 : (ifm & 3) + 8;
    return (face * side + mask - (jp & mask)) * side + (jm & mask);
  }
  const quarter = Math.min(3, Math.floor(tt));
  const reach = side * Math.sqrt((3 * (x * x + y * y)) / (1 + height));
  const jp = Math.min(mask, Math.floor((tt - quarter) * reach));
  const jm = Math.min(mask, Math.floor((1 - tt + quarter) * reach));
  if (z >= 0) return (quarter * side + mask - jp) * side + mask - jm;
  return ((quarter + 8) * side + jm) * side + jp;
}
