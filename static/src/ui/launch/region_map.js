/** The region on a small equal-area map of the whole sky, its brightest place in the middle. */

import { GlowLevels } from "../../draw/glow_levels.js";
import { readPalette } from "../../draw/palette.js";
import { RasterGlow } from "../../draw/raster_glow.js";
import { gridLabels, gridLines } from "../../sky/graticule.js";
import { wholeSky } from "../../sky/projections.js";
import { rotationOf, screenOf, wholeView } from "../../sky/view.js";
import { float32Of, uint32Of } from "../../state/base64.js";
import { element } from "../shell/element.js";

/** @typedef {import("../../sky/view.js").View} View */
/** @typedef {import("../../draw/palette.js").Palette} Palette */

/** Moves the pen along directions; lifts it where a line leaves the map or jumps its seam. @param {CanvasRenderingContext2D} pen @param {View} view @param {import("../../sky/vectors.js").Vector[]} points */
function trace(pen, view, points) {
  const rotation = rotationOf(view);
  /** @type {[number, number]|null} */
  let last = null;
  for (const point of points) {
    const at = screenOf(view, rotation, point);
    if (at && last && Math.hypot(at[0] - last[0], at[1] - last[1]) < view.width_px / 4) pen.lineTo(at[0], at[1]);
    else if (at) pen.moveTo(at[0], at[1]);
    last = at;
  }
}

/** @param {CanvasRenderingContext2D} pen @param {View} view @param {Palette} palette */
function drawGrid(pen, view, palette) {
  const lines = gridLines(view);
  pen.lineWidth = 1;
  pen.strokeStyle = palette.line;
  pen.beginPath();
  for (const line of lines) trace(pen, view, line.points);
  pen.stroke();
  pen.strokeStyle = palette.edge;
  pen.beginPath();
  pen.ellipse(view.width_px / 2, view.height_px / 2, view.scale_px * wholeSky.half_width, view.scale_px * wholeSky.half_height, 0, 0, 2 * Math.PI);
  pen.stroke();
  pen.fillStyle = palette.quiet;
  pen.font = `11px ${palette.font}`;
  for (const label of gridLabels(view, lines)) {
    const isWanted = label.kind === "dec" || /^(0|4|8|12|16|20)h$/.test(label.text);
    const isInside = label.x_px + pen.measureText(label.text).width < view.width_px;
    if (isWanted && isInside) pen.fillText(label.text, label.x_px, label.y_px);
  }
}


class RegionMap {
  glowCanvas = element("canvas", { class: "region-glow" });
  lineCanvas = element("canvas", { class: "region-lines" });

  /** @param {import("./launch_page.js").RegionRead} read */
  constructor({ map, region }) {
    this.middle = region.peak;
    this.levels = new GlowLevels({
      order: map.order,
      pixels: uint32Of(map.pixels_b64),
      probabilities: float32Of(map.probabilities_b64),
      revision: 0,
    });
    this.levels.setAll(null);
    this.raster = new RasterGlow(this.glowCanvas);
  }

  /** @param {number} width_px */
  draw(width_px) {
    const height_px = Math.round(width_px / 2) + 14;
    const ratio = globalThis.devicePixelRatio || 1;
    const view = wholeView(wholeSky, this.middle, { width_px, height_px });
    const palette = readPalette();
    for (const canvas of [this.glowCanvas, this.lineCanvas]) {
      canvas.width = Math.round(width_px * ratio);
      canvas.height = Math.round(height_px * ratio);
    }
    this.raster.setPalette(palette);
    this.raster.draw(view, this.levels, { isMoving: false });
    const pen = /** @type {CanvasRenderingContext2D} */ (this.lineCanvas.getContext("2d"));
    pen.setTransform(ratio, 0, 0, ratio, 0, 0);
    drawGrid(pen, view, palette);
  }
}

/** @param {import("./launch_page.js").RegionRead} read @returns {HTMLElement} */
export function regionMap(read) {
  const map = new RegionMap(read);
  const { ra_deg, dec_deg } = read.region.peak;
  const label = `the region on the whole sky; brightest at right ascension ${ra_deg.toFixed(1)}, declination ${dec_deg.toFixed(1)} degrees`;
  const place = element("div", { class: "region-map", role: "img", "aria-label": label }, map.glowCanvas, map.lineCanvas);
  const redraw = () => place.clientWidth > 0 && map.draw(place.clientWidth);
  new ResizeObserver(redraw).observe(place);
  document.addEventListener("quartersky:theme", redraw);
  return element("figure", { class: "stack" }, place, element("figcaption", { class: "small quiet" }, "Whole sky, equal areas, east to the left. The stronger the tone, the more probable."));
}
