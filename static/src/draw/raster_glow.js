/**
 * The glow by canvas alone, for machines without a graphics processor: inverse projection, coarser while
 * moving.
 */

import { atlasPlaceAt } from "../sky/healpix.js";
import { rotationOf } from "../sky/view.js";
import { rampPixels } from "./palette.js";

/** Script time that one picture may take while the map moves, and one slice of the fine picture. */
const BUDGET_MS = 5;
const COARSEST_PX = 8;
const STEPS_PX = [1, 2, 3, 4, 6, COARSEST_PX];
/** A guess until the first picture has been timed. */
const FIRST_COST_MS = 120e-6;

/**
 * @typedef {import("../sky/view.js").View} View
 * @typedef {import("./glow_levels.js").GlowLevels} GlowLevels
 * @typedef {object} Band    rows of cells of one size across the screen
 * @property {number} step_px
 * @property {number} from    first row
 * @property {number} rows
 * @property {number} columns
 * @property {Float32Array} vectors    view vector under the middle of each cell, NaN outside the outline
 */

/** @param {View} view @param {number} step_px @param {number} from @param {number} to @returns {Band} */
function bandOf(view, step_px, from, to) {
  const columns = Math.ceil(view.width_px / step_px);
  const vectors = new Float32Array(3 * columns * (to - from));
  let at = 0;
  for (let row = from; row < to; row += 1) {
    const y = (view.height_px / 2 - (row + 0.5) * step_px) / view.scale_px;
    for (let column = 0; column < columns; column += 1, at += 3) {
      const x = (view.width_px / 2 - (column + 0.5) * step_px) / view.scale_px;
      const u = view.projection.inverse(x, y);
      if (u) vectors.set(u, at);
      else vectors[at] = NaN;
    }
  }
  return { step_px, from, rows: to - from, columns, vectors };
}

/**
 * @param {Band} band
 * @param {Float64Array} m
 * @param {GlowLevels} glow
 * @param {Uint32Array} ramp
 * @returns {ImageData}
 */
function imageOf(band, m, glow, ramp) {
  const { vectors, columns, rows } = band;
  const { levels, side } = glow;
  const image = new ImageData(columns, rows);
  const pixels = new Uint32Array(image.data.buffer);
  for (let i = 0, at = 0; i < pixels.length; i += 1, at += 3) {
    const a = vectors[at];
    if (Number.isNaN(a)) continue;
    const b = vectors[at + 1];
    const c = vectors[at + 2];
    const x = m[0] * a + m[3] * b + m[6] * c;
    const y = m[1] * a + m[4] * b + m[7] * c;
    const z = m[2] * a + m[5] * b + m[8] * c;
    pixels[i] = ramp[levels[atlasPlaceAt(side, x, y, z)]];
  }
  return image;
}

export class RasterGlow {
  /** @type {{key: string, band: Band} | null} */ #cached = null;
  #cost_ms = FIRST_COST_MS;
  #step_px = 4;
  #scale_px = 0;
  /** @type {Uint32Array} */ #ramp = new Uint32Array(256);
  #picture = 0;
  #cells = document.createElement("canvas");

  /** @param {HTMLCanvasElement} canvas */
  constructor(canvas) {
    this.canvas = canvas;
    this.context = /** @type {CanvasRenderingContext2D} */ (canvas.getContext("2d"));
  }

  /** @param {import("./palette.js").Palette} palette */
  setPalette(palette) {
    this.#ramp = rampPixels(palette.glow);
  }

  /** @param {View} view @param {GlowLevels | null} glow @param {{isMoving: boolean}} how */
  draw(view, glow, { isMoving }) {
    this.#picture += 1;
    if (!glow) return this.context.clearRect(0, 0, this.canvas.width, this.canvas.height);
    const step_px = isMoving && this.#isNewScale(view) ? COARSEST_PX : this.#stepFor(view);
    const band = this.#wholeBand(view, step_px);
    const begun = performance.now();
    this.#paint(view, glow, band);
    const cost_ms = (performance.now() - begun) / (band.columns * band.rows);
    // Other work on the machine only ever adds: the least is the truth, forgotten slowly.
    this.#cost_ms = Math.min(cost_ms, this.#cost_ms * 1.01);
    if (!isMoving && step_px > 1) this.#refine(view, glow);
  }

  /** A zoom needs new view vectors with every picture: fewer of them, then. @param {View} view */
  #isNewScale(view) {
    const isNew = view.scale_px !== this.#scale_px;
    this.#scale_px = view.scale_px;
    return isNew;
  }

  /** The finest cell that fits into the budget on this machine. @param {View} view */
  #stepFor(view) {
    const cells = Math.max(1, BUDGET_MS / this.#cost_ms);
    const wanted = Math.sqrt((view.width_px * view.height_px) / cells);
    // The step in use stays while it nearly fits: a new one costs a new band.
    if (wanted <= this.#step_px * 1.1 && wanted > this.#step_px / 2) return this.#step_px;
    this.#step_px = STEPS_PX.find((step) => step >= wanted) ?? COARSEST_PX;
    return this.#step_px;
  }

  /** Turning the sphere changes no view vector: they are kept. @param {View} view @param {number} step_px */
  #wholeBand(view, step_px) {
    const key = [view.projection.name, view.scale_px, view.width_px, view.height_px, step_px].join();
    if (this.#cached?.key === key) return this.#cached.band;
    const band = bandOf(view, step_px, 0, Math.ceil(view.height_px / step_px));
    this.#cached = { key, band };
    return band;
  }

  /** @param {View} view @param {GlowLevels} glow @param {Band} band */
  #paint(view, glow, band) {
    const { step_px, from, rows, columns } = band;
    this.#cells.width = columns;
    this.#cells.height = rows;
    const image = imageOf(band, rotationOf(view), glow, this.#ramp);
    this.#cells.getContext("2d")?.putImageData(image, 0, 0);
    const ratio = (this.canvas.width / view.width_px) * step_px;
    this.context.imageSmoothingEnabled = step_px > 1;
    this.context.clearRect(0, from * ratio, columns * ratio, rows * ratio);
    this.context.drawImage(this.#cells, 0, from * ratio, columns * ratio, rows * ratio);
  }

  /**
   * The fine picture, some rows a frame, given up as soon as anything else is drawn.
   * @param {View} view
   * @param {GlowLevels} glow
   */
  #refine(view, glow) {
    const picture = this.#picture;
    const rows = Math.max(1, Math.floor(BUDGET_MS / this.#cost_ms / view.width_px));
    let from = 0;
    const next = () => {
      if (picture !== this.#picture || from >= view.height_px) return;
      const to = Math.min(Math.ceil(view.height_px), from + rows);
      this.#paint(view, glow, bandOf(view, 1, from, to));
      from = to;
      requestAnimationFrame(next);
    };
    requestAnimationFrame(next);
  }
}
