/** Lines on the sky become paths on the screen. */

import { between, dot } from "../sky/vectors.js";
import { turned } from "../sky/view.js";

/**
 * @typedef {import("../sky/vectors.js").Vector} Vector
 * @typedef {import("../sky/view.js").View} View
 * @typedef {object} Pen    a view ready to draw
 * @property {View} view
 * @property {Float64Array} rotation
 * @property {CanvasRenderingContext2D} context
 */

/** Longest straight piece, as the cosine of 2.5 degrees. */
const COS_LONGEST = 0.999;

/**
 * A closed outline with enough points to bend as great circles do.
 * @param {Vector[]} corners
 * @returns {Float64Array} x, y, z, x, ...
 */
export function closedLine(corners) {
  /** @type {number[]} */
  const flat = [];
  corners.forEach((corner, i) => {
    const next = corners[(i + 1) % corners.length];
    const angle_share = Math.acos(Math.min(1, dot(corner, next))) / Math.acos(COS_LONGEST);
    const pieces = Math.max(1, Math.ceil(angle_share));
    for (let k = 0; k < pieces; k += 1) flat.push(...between(corner, next, k / pieces));
  });
  flat.push(...corners[0]);
  return Float64Array.from(flat);
}

/** @param {Vector[]} points @returns {Float64Array} */
export function openLine(points) {
  return Float64Array.from(points.flat());
}

/**
 * Whether a step between two view vectors crosses the cut of the whole-sky map, which runs behind the viewer.
 * @param {Vector} a
 * @param {Vector} b
 */
export function crossesSeam(a, b) {
  if (a[1] * b[1] >= 0) return false;
  return a[0] * Math.abs(b[1]) + b[0] * Math.abs(a[1]) < 0;
}

/**
 * Adds a line to the present path; it is cut where the map is.
 * @param {Pen} pen @param {Float64Array} line
 */
export function traceLine({ view, rotation, context }, line) {
  const { projection, scale_px } = view;
  const [middle_x, middle_y] = [view.width_px / 2, view.height_px / 2];
  /** @type {Vector | null} */
  let last = null;
  for (let i = 0; i < line.length; i += 3) {
    const u = turned(rotation, [line[i], line[i + 1], line[i + 2]]);
    const plane = projection.forward(u);
    if (!plane) {
      last = null;
      continue;
    }
    const isCut = !last || (projection.has_seam && crossesSeam(last, u));
    const [x, y] = [middle_x - plane[0] * scale_px, middle_y - plane[1] * scale_px];
    if (isCut) context.moveTo(x, y);
    else context.lineTo(x, y);
    last = u;
  }
}

/**
 * Whether something of a circle on the sky can be on the screen.
 * @param {Pen} pen
 * @param {Vector} centre
 * @param {number} cos_radius
 */
export function maybeShown({ view, rotation: m }, centre, cos_radius) {
  const reach = Math.hypot(view.width_px, view.height_px) / 2 / view.scale_px;
  if (reach > 1) return true;
  const towards = m[0] * centre[0] + m[1] * centre[1] + m[2] * centre[2];
  return Math.acos(Math.min(1, towards)) < reach * 1.3 + Math.acos(Math.min(1, cos_radius));
}
