/** Tiles under a direction: those that mean something now come first, then the small ones. */

import { isInside, rectangleOutline } from "../sky/footprint.js";

const RANK = { held: 0, offered: 1, met: 2, lapsed: 3, open: 4 };

/**
 * @typedef {import("../sky/footprint.js").Outline} Outline
 * @typedef {{number: number, outline: Outline, area_deg2: number}} LaidTile
 */

/**
 * Outlines of all tiles, made once a state of tiles.
 * @param {Record<string, import("./shapes.js").TileShown>} tiles
 * @returns {LaidTile[]}
 */
export function laidTiles(tiles) {
  return Object.entries(tiles).map(([number, tile]) => ({
    number: Number(number),
    outline: rectangleOutline(tile),
    area_deg2: tile.width_deg * tile.height_deg,
  }));
}

/**
 * @param {LaidTile[]} tiles
 * @param {Map<number, import("./tile_lines.js").TileLine>} lines
 * @param {import("../sky/vectors.js").Vector} v
 * @returns {number[]} numbers, the one to talk about first
 */
export function tilesAt(tiles, lines, v) {
  const rank = (/** @type {number} */ number) => RANK[lines.get(number)?.line ?? "open"];
  return tiles
    .filter(({ outline }) => isInside(outline, v))
    .sort((a, b) => rank(a.number) - rank(b.number) || a.area_deg2 - b.area_deg2 || a.number - b.number)
    .map(({ number }) => number);
}
