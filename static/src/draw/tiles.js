/** Tiles by state, through the style of their line. */

import { shrunk } from "../sky/footprint.js";
import { screenOf } from "../sky/view.js";
import { closedLine, maybeShown, traceLine } from "./lines.js";
import { strokeInChannel } from "./strokes.js";

/**
 * @typedef {import("./lines.js").Pen} Pen
 * @typedef {import("../sky/footprint.js").Outline} Outline
 * @typedef {object} DrawnTile
 * @property {number} number
 * @property {Outline} outline
 * @property {string | null} shown    name of its stroke, null when it is open and has no line
 * @property {boolean} is_mine
 */

/** @type {WeakMap<Outline, {outer: Float64Array, inner: Float64Array | null}>} */
const kept = new WeakMap();

/**
 * No channel while tiles are small: it would hide the glow between them.
 * @param {import("../sky/view.js").View} view
 */
function channelPx(view) {
  return view.scale_px < 400 ? 0 : Math.min(3, view.scale_px / 400);
}

/** Lines of an outline, made once. @param {Outline} outline */
function linesOf(outline) {
  let lines = kept.get(outline);
  if (!lines) {
    lines = { outer: closedLine(outline.corners), inner: null };
    kept.set(outline, lines);
  }
  return lines;
}

/** @param {Outline} outline @returns {Float64Array} */
function innerLine(outline) {
  const lines = linesOf(outline);
  lines.inner ??= closedLine(shrunk(outline, 0.82).corners);
  return lines.inner;
}

/** @param {Pen} pen @param {import("./palette.js").Palette} palette @param {DrawnTile[]} tiles */
export function drawTiles(pen, palette, tiles) {
  for (const stroke of ["later", "met", "lapsed", "offered", "held"]) {
    const wanted = tiles.filter((tile) => tile.shown === stroke && maybeShown(pen, tile.outline.centre, tile.outline.cos_radius));
    if (wanted.length === 0) continue;
    pen.context.beginPath();
    for (const { outline, is_mine } of wanted) {
      traceLine(pen, linesOf(outline).outer);
      if (is_mine) traceLine(pen, innerLine(outline));
    }
    strokeInChannel(pen.context, palette, stroke, stroke === "later" ? 0 : channelPx(pen.view));
  }
}

/**
 * Corner brackets around a tile, at least so large that a finger sees them.
 * @param {Pen} pen
 * @param {import("./palette.js").Palette} palette
 * @param {DrawnTile[]} tiles
 */
export function drawBrackets(pen, palette, tiles) {
  const { view, rotation, context } = pen;
  for (const { outline } of tiles) {
    const at = screenOf(view, rotation, outline.centre);
    if (!at) continue;
    const reach = Math.max(10, Math.acos(Math.min(1, outline.cos_radius)) * view.scale_px * 0.85 + 6);
    bracket(context, at, reach);
    strokeInChannel(context, palette, "chosen", channelPx(view));
  }
}

/** @param {CanvasRenderingContext2D} context @param {[number, number]} at @param {number} reach */
function bracket(context, [x, y], reach) {
  const arm = reach * 0.45;
  context.beginPath();
  for (const [sx, sy] of [[1, 1], [1, -1], [-1, -1], [-1, 1]]) {
    context.moveTo(x + sx * (reach - arm), y + sy * reach);
    context.lineTo(x + sx * reach, y + sy * reach);
    context.lineTo(x + sx * reach, y + sy * (reach - arm));
  }
}
