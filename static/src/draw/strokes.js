/** State is carried by line: which dashes and widths mean what, on the map and in its key. */

/**
 * @typedef {object} Stroke
 * @property {number[]} dash
 * @property {number} width
 * @property {"text" | "accent" | "edge" | "quiet" | "line"} colour
 * @property {number} [alpha]    1 unless stated
 */

/** @type {Record<string, Stroke>} */
export const STROKES = {
  offered: { dash: [3, 3], width: 1, colour: "edge" },
  later: { dash: [3, 3], width: 1, colour: "line", alpha: 0.6 },
  held: { dash: [9, 5], width: 1.8, colour: "text" },
  met: { dash: [], width: 1, colour: "edge" },
  lapsed: { dash: [1, 3], width: 1.4, colour: "text" },
  frame: { dash: [], width: 1, colour: "edge" },
  grid: { dash: [], width: 1, colour: "line" },
  outline: { dash: [], width: 1, colour: "edge" },
  galactic: { dash: [10, 4, 1, 4], width: 1, colour: "quiet" },
  avoid: { dash: [1, 4], width: 1.4, colour: "quiet" },
  chosen: { dash: [], width: 2.5, colour: "accent" },
};

/** What the key says, in its order. */
export const KEY = [
  { stroke: "offered", is_double: false, text: "offered" },
  { stroke: "later", is_double: false, text: "offered, in over an hour" },
  { stroke: "held", is_double: false, text: "held" },
  { stroke: "met", is_double: false, text: "shot" },
  { stroke: "lapsed", is_double: false, text: "lapsed" },
  { stroke: "held", is_double: true, text: "mine: double" },
  { stroke: "galactic", is_double: false, text: "Galactic plane" },
];

/**
 * @param {CanvasRenderingContext2D} context
 * @param {import("./palette.js").Palette} palette
 * @param {string} name
 */
export function useStroke(context, palette, name) {
  const { dash, width, colour, alpha = 1 } = STROKES[name];
  context.globalAlpha = alpha;
  context.setLineDash(dash);
  context.lineWidth = width;
  context.strokeStyle = palette[colour];
}

/** How strongly the channel hides the glow under a line. */
const CHANNEL_ALPHA = 0.6;

/**
 * The present path in a channel of the ground's colour, so that it shows on bright glow as on dark sky.
 * @param {CanvasRenderingContext2D} context
 * @param {import("./palette.js").Palette} palette
 * @param {string} name
 * @param {number} channel_px
 */
export function strokeInChannel(context, palette, name, channel_px) {
  if (channel_px > 0) {
    useStroke(context, palette, name);
    context.setLineDash([]);
    context.lineWidth += channel_px;
    context.strokeStyle = palette.ground;
    context.globalAlpha = CHANNEL_ALPHA;
    context.stroke();
  }
  useStroke(context, palette, name);
  context.stroke();
  context.globalAlpha = 1;
}
