/**
 * How brightly each pixel of the region glows, 0..255, on the atlas that raster and shader look up.
 *
 * The level is the square root of what is left over what the brightest pixels had at the start: the eye judges
 * lightness so, and the scale stays fixed, so that the map goes dark as it is searched.
 */

import { leftAt } from "../state/coverage.js";
import { atlasLength, atlasPlace } from "../sky/healpix.js";

/** Share of pixels that may be as bright as the brightest. */
const TOP_SHARE = 0.0005;

/** @typedef {import("../state/coverage.js").RegionPixels} RegionPixels */
/** @typedef {import("../state/coverage.js").Coverage} Coverage */

/** @param {Float32Array} probabilities @returns {number} the probability that glows brightest */
export function brightestProbability(probabilities) {
  if (probabilities.length === 0) return 1;
  const sorted = Float32Array.from(probabilities).sort();
  return sorted[Math.floor(sorted.length * (1 - TOP_SHARE))] || 1;
}

export class GlowLevels {
  /** @param {RegionPixels} region */
  constructor(region) {
    this.region = region;
    this.side = 2 ** region.order;
    this.levels = new Uint8Array(atlasLength(region.order));
    this.places = Uint32Array.from(region.pixels, (pixel) => atlasPlace(region.order, pixel));
    this.brightest = brightestProbability(region.probabilities);
    /** Grows with every change, so that drawers know. */
    this.version = 0;
  }

  /**
   * All pixels anew: what is left, or with no coverage the alert itself.
   * @param {Coverage | null} coverage
   */
  setAll(coverage) {
    for (let i = 0; i < this.places.length; i += 1) this.#set(i, coverage);
    this.version += 1;
  }

  /** @param {Coverage} coverage @param {Uint32Array} changed */
  setSome(coverage, changed) {
    for (const index of changed) this.#set(index, coverage);
    if (changed.length > 0) this.version += 1;
  }

  /** @param {number} index @param {Coverage | null} coverage */
  #set(index, coverage) {
    const left = coverage ? leftAt(this.region, coverage, index) : this.region.probabilities[index];
    this.levels[this.places[index]] = Math.round(255 * Math.sqrt(Math.min(1, left / this.brightest)));
  }
}
