/** Which pixels of the region lie in which tile, and what is left in each tile. */

import { isInside, rectangleOutline } from "../sky/footprint.js";
import { centresOf } from "../sky/healpix.js";
import { DEG } from "../sky/angles.js";
import { leftAt } from "./coverage.js";

/**
 * Neighbours in the nested order stand together: groups of pixels of this coarser order are tested at once.
 */
const GROUP_ORDER = 4;
/** No pixel of a group is farther from its middle than this. */
const GROUP_RADIUS_DEG = 4.5;

/**
 * @typedef {import("./coverage.js").RegionPixels} RegionPixels
 * @typedef {import("./coverage.js").Coverage} Coverage
 * @typedef {import("./shapes.js").TileShown} TileShown
 * @typedef {import("../sky/vectors.js").Vector} Vector
 * @typedef {{from: number, to: number, middle: Vector}} Group
 */

/**
 * Runs of the ascending pixel list with the same coarse parent.
 * @param {RegionPixels} region
 * @returns {Group[]}
 */
function groupsOf({ order, pixels }) {
  const divisor = 4 ** Math.max(0, order - GROUP_ORDER);
  const coarse = Math.min(order, GROUP_ORDER);
  /** @type {Group[]} */
  const groups = [];
  for (let from = 0; from < pixels.length; ) {
    const parent = Math.floor(pixels[from] / divisor);
    let to = from + 1;
    while (to < pixels.length && Math.floor(pixels[to] / divisor) === parent) to += 1;
    const [x, y, z] = centresOf(coarse, [parent]);
    groups.push({ from, to, middle: [x, y, z] });
    from = to;
  }
  return groups;
}

export class TilePixels {
  /** @type {Map<number, Uint32Array>} */ #known = new Map();

  /** @param {RegionPixels} region */
  constructor(region) {
    this.region = region;
    this.centres = centresOf(region.order, region.pixels);
    this.groups = groupsOf(region);
  }

  /**
   * Indices into the region's pixels whose centre is inside a tile.
   * @param {number} number
   * @param {TileShown} tile
   * @returns {Uint32Array}
   */
  inside(number, tile) {
    const known = this.#known.get(number);
    if (known) return known;
    const found = Uint32Array.from(this.#search(tile));
    this.#known.set(number, found);
    return found;
  }

  /** @param {TileShown} tile @returns {number[]} */
  #search(tile) {
    const outline = rectangleOutline(tile);
    const radius = Math.acos(Math.min(1, outline.cos_radius)) + GROUP_RADIUS_DEG * DEG;
    const nearest = Math.cos(Math.min(Math.PI, radius));
    const [cx, cy, cz] = outline.centre;
    /** @type {number[]} */
    const found = [];
    for (const { from, to, middle } of this.groups) {
      if (middle[0] * cx + middle[1] * cy + middle[2] * cz < nearest) continue;
      this.#collect(outline, from, to, found);
    }
    return found;
  }

  /**
   * @param {import("../sky/footprint.js").Outline} outline
   * @param {number} from
   * @param {number} to
   * @param {number[]} found
   */
  #collect(outline, from, to, found) {
    const { centres } = this;
    const [cx, cy, cz] = outline.centre;
    for (let i = from; i < to; i += 1) {
      const [x, y, z] = [centres[3 * i], centres[3 * i + 1], centres[3 * i + 2]];
      if (x * cx + y * cy + z * cz < outline.cos_radius) continue;
      if (isInside(outline, [x, y, z])) found.push(i);
    }
  }

  /**
   * Probability in a tile that has not been searched, and that was there at the start.
   * @param {number} number
   * @param {TileShown} tile
   * @param {Coverage} coverage
   */
  leftIn(number, tile, coverage) {
    let left = 0;
    let whole = 0;
    for (const index of this.inside(number, tile)) {
      left += leftAt(this.region, coverage, index);
      whole += this.region.probabilities[index];
    }
    return { left, whole };
  }
}

/**
 * Tiles with most left, best first.
 * @param {Record<string, TileShown>} tiles
 * @param {(number: number, tile: TileShown) => number} leftOf
 * @param {number} n
 * @returns {{number: number, tile: TileShown, left: number}[]}
 */
export function bestTiles(tiles, leftOf, n) {
  return Object.entries(tiles)
    .map(([number, tile]) => ({ number: Number(number), tile, left: leftOf(Number(number), tile) }))
    .sort((a, b) => b.left - a.left || a.number - b.number)
    .slice(0, n);
}
