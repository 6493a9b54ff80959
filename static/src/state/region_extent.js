/** Where the region is and how far it reaches, for the first view of the map. */

import { separationDeg, normalised, raDec } from "../sky/vectors.js";

/** Share of the probability that the first view should hold. */
const WITHIN = 0.95;

/** @typedef {import("../sky/vectors.js").Vector} Vector */

/**
 * The middle of the probability and the radius around it that holds most of it; a ring's middle means little and its
 * radius is large.
 * @param {Float32Array} centres    x, y, z, x, ... of the pixels
 * @param {Float32Array} probabilities
 * @returns {{ra_deg: number, dec_deg: number, radius_deg: number}}
 */
export function regionExtent(centres, probabilities) {
  /** @type {Vector} */
  const sum = [0, 0, 0];
  let total = 0;
  probabilities.forEach((p, i) => {
    for (let axis = 0; axis < 3; axis += 1) sum[axis] += p * centres[3 * i + axis];
    total += p;
  });
  const isBalanced = Math.hypot(...sum) < 1e-3 * total || total === 0;
  const middle = isBalanced ? /** @type {Vector} */ ([1, 0, 0]) : normalised(sum);
  return { ...raDec(middle), radius_deg: isBalanced ? 180 : radiusAround(middle, centres, probabilities, total) };
}

/**
 * @param {Vector} middle
 * @param {Float32Array} centres
 * @param {Float32Array} probabilities
 * @param {number} total
 */
function radiusAround(middle, centres, probabilities, total) {
  const byDegree = new Float64Array(181);
  probabilities.forEach((p, i) => {
    const apart_deg = separationDeg(middle, [centres[3 * i], centres[3 * i + 1], centres[3 * i + 2]]);
    byDegree[Math.min(180, Math.ceil(apart_deg))] += p;
  });
  let held = 0;
  return byDegree.findIndex((p) => (held += p) >= WITHIN * total);
}
