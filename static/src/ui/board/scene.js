/** From what the Board knows to what the map draws. */

import { closedLine } from "../../draw/lines.js";
import { footprintOutlines } from "../../sky/footprint.js";

/**
 * @typedef {import("./board_model.js").BoardModel} BoardModel
 * @typedef {import("../../draw/tiles.js").DrawnTile} DrawnTile
 * @typedef {import("../../state/shapes.js").FrameShown} FrameShown
 */

/** @type {WeakMap<FrameShown, Float64Array[]>} */
const frameLines = new WeakMap();

/** @param {FrameShown} frame */
function linesOf(frame) {
  let lines = frameLines.get(frame);
  if (!lines) {
    lines = footprintOutlines(frame.footprint).map(({ corners }) => closedLine(corners));
    frameLines.set(frame, lines);
  }
  return lines;
}

/** True footprints of counted frames. @param {BoardModel} model */
export function drawnFrames({ state }) {
  return Object.values(state?.frames ?? {}).filter((frame) => frame.state === "counted").flatMap(linesOf);
}

/** Offers that begin later than this are drawn faintly. */
const SOON_MS = 3_600_000;

/**
 * @param {import("../../state/tile_lines.js").TileLine | undefined} known
 * @param {number} now_ms
 * @returns {string | null}
 */
function strokeOf(known, now_ms) {
  if (!known || known.line === "open") return null;
  // A tile that was shot shows its frame's footprint instead of its own.
  if (known.line === "met" && known.has_frame) return null;
  if (known.line === "offered" && known.starts_ms > now_ms + SOON_MS && !known.is_mine) return "later";
  return known.line;
}

/** @param {BoardModel} model @returns {DrawnTile[]} */
export function drawnTiles({ laid, lines, now_ms }) {
  return laid.map(({ number, outline }) => {
    const known = lines.get(number);
    return { number, outline, shown: strokeOf(known, now_ms), is_mine: known?.is_mine ?? false };
  });
}
