/**
 * A view of the sky: which direction is in the middle, how large, on how many screen pixels. Pure values: every
 * movement makes a new view.
 *
 * @typedef {import("./vectors.js").Vector} Vector
 * @typedef {import("./projections.js").Projection} Projection
 * @typedef {object} View
 * @property {Projection} projection
 * @property {number} ra_deg    the middle
 * @property {number} dec_deg
 * @property {number} scale_px    screen pixels per radian in the middle
 * @property {number} width_px
 * @property {number} height_px
 */

import { clamp, DEG, wrapRaDeg } from "./angles.js";

const MARGIN_PX = 14;
/** The smallest patch that can fill the screen's shorter side, degrees. */
const SMALLEST_SPAN_DEG = 0.15;

/**
 * Scale at which the whole map fits.
 * @param {Projection} projection
 * @param {number} width_px
 * @param {number} height_px
 */
export function fittingScale(projection, width_px, height_px) {
  const across = (width_px / 2 - MARGIN_PX) / projection.half_width;
  const down = (height_px / 2 - MARGIN_PX) / projection.half_height;
  return Math.max(8, Math.min(across, down));
}

/**
 * @param {Projection} projection
 * @param {{ra_deg: number, dec_deg: number}} middle
 * @param {{width_px: number, height_px: number}} size
 * @returns {View}
 */
export function wholeView(projection, middle, size) {
  return {
    projection,
    ra_deg: wrapRaDeg(middle.ra_deg),
    dec_deg: clamp(middle.dec_deg, -90, 90),
    scale_px: fittingScale(projection, size.width_px, size.height_px),
    ...size,
  };
}

/** @param {View} view @returns {boolean} whether the whole map is on the screen */
export function isWhole(view) {
  return view.scale_px <= fittingScale(view.projection, view.width_px, view.height_px) * 1.02;
}

/** Rows: the middle, east, north, as nine numbers. @param {View} view @returns {Float64Array} */
export function rotationOf(view) {
  const [sr, cr] = [Math.sin(view.ra_deg * DEG), Math.cos(view.ra_deg * DEG)];
  const [sd, cd] = [Math.sin(view.dec_deg * DEG), Math.cos(view.dec_deg * DEG)];
  return Float64Array.of(cd * cr, cd * sr, sd, -sr, cr, 0, -sd * cr, -sd * sr, cd);
}

/** Sky to view vector. @param {Float64Array} m @param {Vector} v @returns {Vector} */
export function turned(m, v) {
  return [
    m[0] * v[0] + m[1] * v[1] + m[2] * v[2],
    m[3] * v[0] + m[4] * v[1] + m[5] * v[2],
    m[6] * v[0] + m[7] * v[1] + m[8] * v[2],
  ];
}

/** View to sky vector. @param {Float64Array} m @param {Vector} u @returns {Vector} */
export function turnedBack(m, u) {
  return [
    m[0] * u[0] + m[3] * u[1] + m[6] * u[2],
    m[1] * u[0] + m[4] * u[1] + m[7] * u[2],
    m[2] * u[0] + m[5] * u[1] + m[8] * u[2],
  ];
}

/**
 * Screen position of a sky direction, or null.
 * @param {View} view
 * @param {Float64Array} rotation
 * @param {Vector} v
 * @returns {[number, number] | null}
 */
export function screenOf(view, rotation, v) {
  const plane = view.projection.forward(turned(rotation, v));
  if (!plane) return null;
  return [view.width_px / 2 - plane[0] * view.scale_px, view.height_px / 2 - plane[1] * view.scale_px];
}

/**
 * View vector under a screen position, or null.
 * @param {View} view
 * @param {number} x_px
 * @param {number} y_px
 */
function viewVectorAt(view, x_px, y_px) {
  const x = (view.width_px / 2 - x_px) / view.scale_px;
  const y = (view.height_px / 2 - y_px) / view.scale_px;
  return view.projection.inverse(x, y);
}

/**
 * Sky direction under a screen position, or null outside the outline.
 * @param {View} view
 * @param {number} x_px
 * @param {number} y_px
 * @returns {Vector | null}
 */
export function skyAt(view, x_px, y_px) {
  const u = viewVectorAt(view, x_px, y_px);
  return u && turnedBack(rotationOf(view), u);
}

/** Declinations of the middle that bring u to the height z of v. @param {Vector} u @param {number} z */
function middleDecsDeg(u, z) {
  const reach = Math.hypot(u[0], u[2]);
  const phase = Math.atan2(u[2], u[0]);
  const height = Math.asin(clamp(z / Math.max(reach, 1e-12), -1, 1));
  // u[0] sin(dec) + u[2] cos(dec) = reach sin(dec + phase)
  return [height - phase, Math.PI - height - phase].map((dec) => {
    const turns = Math.round(dec / (2 * Math.PI));
    return (dec - turns * 2 * Math.PI) / DEG;
  });
}

/**
 * Turns the sphere, north kept up, so that sky direction v lies under a screen position.
 * @param {View} view
 * @param {Vector} v
 * @param {number} x_px
 * @param {number} y_px
 * @returns {View}
 */
export function holdUnder(view, v, x_px, y_px) {
  const u = viewVectorAt(view, x_px, y_px);
  if (!u) return view;
  const [dec_deg] = middleDecsDeg(u, v[2])
    .map((dec) => clamp(dec, -90, 90))
    .sort((a, b) => Math.abs(a - view.dec_deg) - Math.abs(b - view.dec_deg));
  const flat = u[0] * Math.cos(dec_deg * DEG) - u[2] * Math.sin(dec_deg * DEG);
  const turn = Math.atan2(v[1], v[0]) - Math.atan2(u[1], flat);
  return { ...view, dec_deg, ra_deg: wrapRaDeg(turn / DEG) };
}

/** @param {View} view @returns {{least: number, most: number}} */
function scaleLimits(view) {
  const least = fittingScale(view.projection, view.width_px, view.height_px);
  const shorter = Math.min(view.width_px, view.height_px);
  return { least, most: Math.max(least, shorter / (SMALLEST_SPAN_DEG * DEG)) };
}

/**
 * Zooms by a factor with the direction under the pointer held where it is.
 * @param {View} view
 * @param {number} factor
 * @param {{x_px: number, y_px: number}} at
 * @returns {View}
 */
export function zoomedAt(view, factor, at) {
  const { least, most } = scaleLimits(view);
  const scale_px = clamp(view.scale_px * factor, least, most);
  const held = skyAt(view, at.x_px, at.y_px);
  const next = { ...view, scale_px };
  return held ? holdUnder(next, held, at.x_px, at.y_px) : next;
}

/**
 * @param {View} view
 * @param {{width_px: number, height_px: number}} size
 * @returns {View} the same piece of sky in a window of another size
 */
export function resized(view, size) {
  if (isWhole(view)) return wholeView(view.projection, view, size);
  const next = { ...view, ...size };
  const { least, most } = scaleLimits(next);
  return { ...next, scale_px: clamp(view.scale_px, least, most) };
}

/**
 * A view with a direction in the middle and a patch of the given span filling a third of the shorter side.
 * @param {View} view
 * @param {{ra_deg: number, dec_deg: number}} middle
 * @param {number} span_deg
 * @returns {View}
 */
export function closeTo(view, middle, span_deg) {
  const { least, most } = scaleLimits(view);
  const wanted = Math.min(view.width_px, view.height_px) / 3 / (span_deg * DEG);
  return {
    ...view,
    ra_deg: wrapRaDeg(middle.ra_deg),
    dec_deg: clamp(middle.dec_deg, -90, 90),
    scale_px: clamp(wanted, least, most),
  };
}
