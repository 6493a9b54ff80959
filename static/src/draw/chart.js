/** Everything on the map but the glow: grid, plane, Sun and Moon, tiles, frames, labels. */

import { circleOutline } from "../sky/footprint.js";
import { gridLabels, gridLines } from "../sky/graticule.js";
import { placeLabels } from "../sky/labels.js";
import { galacticPlane, moonAt, sunRaDec } from "../sky/sun_moon.js";
import { unitVector } from "../sky/vectors.js";
import { isWhole, rotationOf, screenOf } from "../sky/view.js";
import { horizonMarks } from "./dome_marks.js";
import { closedLine, openLine, traceLine } from "./lines.js";
import { useStroke } from "./strokes.js";
import { drawBrackets, drawTiles } from "./tiles.js";

/**
 * @typedef {import("../sky/view.js").View} View
 * @typedef {import("./lines.js").Pen} Pen
 * @typedef {import("./palette.js").Palette} Palette
 * @typedef {object} Scene
 * @property {import("./tiles.js").DrawnTile[]} tiles
 * @property {Float64Array[]} frames
 * @property {number[]} chosen    tiles with brackets: the one under the pointer, the one chosen
 * @property {number} now_ms
 */

/** The server keeps every instrument at least this far from the Sun in daylight. */
const SUN_CIRCLE_DEG = 20;
/** Inside this, moonlight costs a magnitude and more. */
const MOON_CIRCLE_DEG = 10;
const LABEL_PX = 12;
const PLANE = openLine(galacticPlane(120));

/** @param {Pen} pen @param {Palette} palette @param {string} stroke @param {Iterable<Float64Array>} lines */
function strokeLines(pen, palette, stroke, lines) {
  useStroke(pen.context, palette, stroke);
  pen.context.beginPath();
  for (const line of lines) traceLine(pen, line);
  pen.context.stroke();
}

/** @param {Pen} pen @param {Palette} palette */
function drawOutline({ view, context }, palette) {
  const { projection, scale_px } = view;
  useStroke(context, palette, "outline");
  context.beginPath();
  const [rx, ry] = [projection.half_width * scale_px, projection.half_height * scale_px];
  context.ellipse(view.width_px / 2, view.height_px / 2, rx, ry, 0, 0, 2 * Math.PI);
  context.stroke();
}

/** A dot in a ring. @param {Pen} pen @param {Palette} palette @param {[number, number]} at */
function drawSunSign({ context }, palette, [x, y]) {
  context.setLineDash([]);
  context.lineWidth = 1.5;
  context.strokeStyle = palette.text;
  context.fillStyle = palette.text;
  context.beginPath();
  context.arc(x, y, 6, 0, 2 * Math.PI);
  context.stroke();
  context.beginPath();
  context.arc(x, y, 1.6, 0, 2 * Math.PI);
  context.fill();
}

/**
 * A disc lit as it is now.
 * @param {Pen} pen
 * @param {Palette} palette
 * @param {[number, number]} at
 * @param {{lit: number, is_waxing: boolean}} moon
 */
function drawMoonSign({ context }, palette, [x, y], { lit, is_waxing }) {
  const radius = 6;
  const bulge = radius * (1 - 2 * lit);
  context.setLineDash([]);
  context.lineWidth = 1;
  context.strokeStyle = palette.text;
  context.fillStyle = palette.text;
  context.beginPath();
  context.arc(x, y, radius, 0, 2 * Math.PI);
  context.stroke();
  context.beginPath();
  // East is to the left: seen with north up, the waxing Moon is lit on its western, right side.
  const side = is_waxing ? 1 : -1;
  context.ellipse(x, y, radius, radius, 0, -Math.PI / 2, Math.PI / 2, side < 0);
  context.ellipse(x, y, Math.abs(bulge), radius, 0, Math.PI / 2, -Math.PI / 2, side > 0 ? bulge > 0 : bulge <= 0);
  context.fill();
}

/**
 * Sun and Moon, and the labels they want.
 * @param {Pen} pen
 * @param {Palette} palette
 * @param {number} now_ms
 */
function drawSunMoon(pen, palette, now_ms) {
  const sun = sunRaDec(now_ms);
  const moon = moonAt(now_ms);
  const rings = [circleOutline(sun, SUN_CIRCLE_DEG), circleOutline(moon, MOON_CIRCLE_DEG)];
  strokeLines(pen, palette, "avoid", rings.map(({ corners }) => closedLine(corners)));
  const at_sun = screenOf(pen.view, pen.rotation, unitVector(sun.ra_deg, sun.dec_deg));
  const at_moon = screenOf(pen.view, pen.rotation, unitVector(moon.ra_deg, moon.dec_deg));
  if (at_sun) drawSunSign(pen, palette, at_sun);
  if (at_moon) drawMoonSign(pen, palette, at_moon, moon);
  return [
    ...(at_sun ? [besides("Sun", at_sun)] : []),
    ...(at_moon ? [besides(`Moon ${(moon.lit * 100).toFixed(0)} %`, at_moon)] : []),
  ];
}

/**
 * A label to the right of a mark, or left, below, above it.
 * @param {string} text
 * @param {[number, number]} at
 */
function besides(text, [x, y]) {
  return { text, kind: "mark", anchor: /** @type {[number, number]} */ ([x, y]) };
}

/**
 * @param {CanvasRenderingContext2D} context
 * @param {{text: string, kind: string, anchor: [number, number]}} mark
 */
function markLabel(context, { text, kind, anchor: [x, y] }) {
  const width_px = context.measureText(text).width + 4;
  /** @type {[number, number][]} */
  const places = [[x + 11, y + 6], [x - 11 - width_px, y + 6], [x - width_px / 2, y + 26], [x - width_px / 2, y - 12]];
  return { text, kind, width_px, height_px: LABEL_PX + 3, places };
}

/**
 * @param {CanvasRenderingContext2D} context
 * @param {{text: string, kind: string, x_px: number, y_px: number}} wish
 */
function gridLabel(context, { text, kind, x_px, y_px }) {
  const width_px = context.measureText(text).width + 6;
  /** @type {[number, number][]} */
  const places = [[x_px, y_px], [x_px - width_px - 6, y_px], [x_px, y_px + LABEL_PX + 12]];
  return { text, kind, width_px, height_px: LABEL_PX + 3, places };
}

/** Boxes of the marks themselves, which no label may cover. @param {[number, number][]} anchors */
function markBoxes(anchors) {
  return anchors.map(([x, y]) => ({ left: x - 9, right: x + 9, top: y - 9, bottom: y + 9 }));
}

/**
 * Words keep clear of what is behind them by a rim of the ground's colour.
 * @param {Pen} pen
 * @param {Palette} palette
 * @param {ReturnType<typeof placeLabels>} placed
 */
function writeLabels({ context }, palette, placed) {
  context.setLineDash([]);
  context.lineJoin = "round";
  context.lineWidth = 3;
  context.strokeStyle = palette.ground;
  for (const { label, box } of placed) {
    context.fillStyle = label.kind === "mark" || label.kind === "tile" ? palette.text : palette.quiet;
    context.strokeText(label.text, box.left + 2, box.bottom - 4);
    context.fillText(label.text, box.left + 2, box.bottom - 4);
  }
}

/** How large a tile must be on the screen, pixels from its middle to a corner, before it shows its number. */
const NUMBER_FROM_PX = { held: 22, others: 70 };

/**
 * Numbers of tiles that are large enough on the screen, those in work first.
 * @param {Pen} pen
 * @param {Scene} scene
 */
function tileMarks({ view, rotation }, { tiles, chosen }) {
  const reach_px = (/** @type {import("./tiles.js").DrawnTile} */ tile) =>
    Math.acos(Math.min(1, tile.outline.cos_radius)) * view.scale_px;
  const isNamed = (/** @type {import("./tiles.js").DrawnTile} */ tile) => {
    if (chosen.includes(tile.number)) return true;
    const isHeld = tile.shown === "held" || tile.is_mine;
    return tile.shown !== null && reach_px(tile) > (isHeld ? NUMBER_FROM_PX.held : NUMBER_FROM_PX.others);
  };
  return tiles
    .filter(isNamed)
    .sort((a, b) => Number(b.shown === "held") - Number(a.shown === "held"))
    .slice(0, 60)
    .flatMap((tile) => {
      const at = screenOf(view, rotation, tile.outline.centre);
      return at ? [{ text: String(tile.number), kind: "tile", at }] : [];
    });
}

/**
 * @param {CanvasRenderingContext2D} context
 * @param {{text: string, kind: string, at: [number, number]}} mark
 */
function centredLabel(context, { text, kind, at: [x, y] }) {
  const width_px = context.measureText(text).width + 4;
  /** @type {[number, number][]} */
  const places = [[x - width_px / 2, y + 7]];
  return { text, kind, width_px, height_px: LABEL_PX + 3, places };
}

/**
 * Draws a view of a scene.
 * @param {CanvasRenderingContext2D} context    in CSS pixels
 * @param {View} view @param {Scene} scene @param {Palette} palette
 */
export function drawChart(context, view, scene, palette) {
  const pen = { view, rotation: rotationOf(view), context };
  context.clearRect(0, 0, view.width_px, view.height_px);
  context.font = `${LABEL_PX}px ${palette.font}`;
  const grid = gridLines(view);
  const isDome = !view.projection.has_seam;
  strokeLines(pen, palette, "grid", grid.map(({ points }) => openLine(points)));
  strokeLines(pen, palette, "galactic", [PLANE]);
  strokeLines(pen, palette, "frame", scene.frames);
  drawTiles(pen, palette, scene.tiles);
  drawBrackets(pen, palette, scene.tiles.filter(({ number }) => scene.chosen.includes(number)));
  if (isDome || isWhole(view) || view.scale_px < 2 * view.width_px) drawOutline(pen, palette);
  const marks = drawSunMoon(pen, palette, scene.now_ms);
  const wishes = [
    ...marks.map((mark) => markLabel(context, mark)),
    ...(isDome ? horizonMarks(view) : gridLabels(view, grid)).map((wish) => gridLabel(context, wish)),
    ...tileMarks(pen, scene).map((mark) => centredLabel(context, mark)),
  ];
  writeLabels(pen, palette, placeLabels(wishes, view, markBoxes(marks.map(({ anchor }) => anchor))));
}
