/**
 * Outlines on the sky as corner vectors joined by great circles.
 *
 * @typedef {import("./vectors.js").Vector} Vector
 * @typedef {{shape: "polygon", corners_deg: [number, number][]}} PolygonJson
 * @typedef {{shape: "circle", ra_deg: number, dec_deg: number, diameter_deg: number}} CircleJson
 * @typedef {{shape: "mosaic", ra_deg: number, dec_deg: number, parts: (PolygonJson | CircleJson)[]}} MosaicJson
 * @typedef {PolygonJson | CircleJson | MosaicJson} FootprintJson
 * @typedef {object} Outline
 * @property {Vector[]} corners    counter-clockwise as seen from outside the sphere, or the other way round
 * @property {Vector} centre
 * @property {number} cos_radius    cosine of the radius of a circle around the centre that holds all corners
 */

import { DEG } from "./angles.js";
import { cross, dot, normalised, offsetBy, unitVector } from "./vectors.js";

const CIRCLE_CORNERS = 48;

/** @param {Vector[]} corners @param {Vector} centre @returns {Outline} */
function outlineOf(corners, centre) {
  return { corners, centre, cos_radius: Math.min(...corners.map((corner) => dot(corner, centre))) };
}

/**
 * A rectangle on the tangent plane of its centre, sides along north and east.
 * @param {{ra_deg: number, dec_deg: number, width_deg: number, height_deg: number}} tile
 * @returns {Outline}
 */
export function rectangleOutline({ ra_deg, dec_deg, width_deg, height_deg }) {
  const centre = unitVector(ra_deg, dec_deg);
  const ra = ra_deg * DEG;
  /** @type {Vector} */
  const east = [-Math.sin(ra), Math.cos(ra), 0];
  const north = cross(centre, east);
  const w = Math.tan((width_deg / 2) * DEG);
  const h = Math.tan((height_deg / 2) * DEG);
  const corners = [[-w, -h], [w, -h], [w, h], [-w, h]].map(([e, n]) =>
    normalised([
      centre[0] + e * east[0] + n * north[0],
      centre[1] + e * east[1] + n * north[1],
      centre[2] + e * east[2] + n * north[2],
    ]),
  );
  return outlineOf(corners, centre);
}

/** @param {{ra_deg: number, dec_deg: number}} middle @param {number} radius_deg @returns {Outline} */
export function circleOutline(middle, radius_deg) {
  const centre = unitVector(middle.ra_deg, middle.dec_deg);
  const corners = Array.from({ length: CIRCLE_CORNERS }, (_, i) =>
    offsetBy(centre, radius_deg, (-i * 360) / CIRCLE_CORNERS),
  );
  return outlineOf(corners, centre);
}

/** @param {[number, number][]} corners_deg @returns {Outline} */
export function polygonOutline(corners_deg) {
  const corners = corners_deg.map(([ra_deg, dec_deg]) => unitVector(ra_deg, dec_deg));
  /** @type {Vector} */
  const sum = [0, 0, 0];
  for (const corner of corners) for (let i = 0; i < 3; i += 1) sum[i] += corner[i];
  return outlineOf(corners, normalised(sum));
}

/** @param {PolygonJson | CircleJson} footprint @returns {Outline} */
export function footprintOutline(footprint) {
  if (footprint.shape === "circle") return circleOutline(footprint, footprint.diameter_deg / 2);
  return polygonOutline(footprint.corners_deg);
}

/** One outline for each picture of a frame. @param {FootprintJson} footprint @returns {Outline[]} */
export function footprintOutlines(footprint) {
  return footprint.shape === "mosaic" ? footprint.parts.map(footprintOutline) : [footprintOutline(footprint)];
}

/**
 * Whether a frame covers a direction. An outline may bend inwards: it is the fan of triangles from
 * its middle to its sides.
 * @param {FootprintJson} footprint @param {Vector} v
 */
export function isUnderFrame(footprint, v) {
  return footprintOutlines(footprint).some((outline) => isInFan(outline, v));
}

/** @param {Outline} outline @param {Vector} v */
function isInFan({ corners, centre, cos_radius }, v) {
  if (dot(v, centre) < cos_radius - 1e-12) return false;
  const side = Math.sign(dot(cross(corners[0], corners[1]), centre));
  return corners.some((corner, i) => {
    const next = corners[(i + 1) % corners.length];
    const edges = [cross(centre, corner), cross(corner, next), cross(next, centre)];
    return edges.every((edge) => side * dot(edge, v) >= -1e-12);
  });
}

/**
 * Whether a direction is inside a convex outline.
 * @param {Outline} outline
 * @param {Vector} v
 * @returns {boolean}
 */
export function isInside(outline, v) {
  if (dot(v, outline.centre) < outline.cos_radius - 1e-12) return false;
  const { corners } = outline;
  const side = Math.sign(dot(cross(corners[0], corners[1]), outline.centre));
  return corners.every((corner, i) => {
    const next = corners[(i + 1) % corners.length];
    return side * dot(cross(corner, next), v) >= -1e-12;
  });
}

/**
 * A similar outline a little smaller, for the second line of a double one.
 * @param {Outline} outline
 * @param {number} share
 * @returns {Outline}
 */
export function shrunk(outline, share) {
  const { centre } = outline;
  const corners = outline.corners.map((corner) =>
    normalised([
      centre[0] + (corner[0] - centre[0]) * share,
      centre[1] + (corner[1] - centre[1]) * share,
      centre[2] + (corner[2] - centre[2]) * share,
    ]),
  );
  return outlineOf(corners, centre);
}

