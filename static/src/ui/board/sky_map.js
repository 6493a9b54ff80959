/** The map: two canvases and a view, moved by hand, drawn at most once a screen refresh. */

import { drawChart } from "../../draw/chart.js";
import { readPalette } from "../../draw/palette.js";
import { RasterGlow } from "../../draw/raster_glow.js";
import { shaderGlow } from "../../gl/shader_glow.js";
import { dome, wholeSky } from "../../sky/projections.js";
import { closeTo, holdUnder, isWhole, resized, skyAt, wholeView, zoomedAt } from "../../sky/view.js";
import { element } from "../shell/element.js";
import { Gestures } from "./gestures.js";

/**
 * @typedef {import("../../sky/vectors.js").Vector} Vector
 * @typedef {import("../../sky/view.js").View} View
 * @typedef {object} MapReader
 * @property {(v: Vector | null) => void} onHover
 * @property {(v: Vector) => void} onPick
 * @property {(key: string) => boolean} onKey
 * @property {(view: View) => void} onView
 */

const KEY_STEP_PX = 60;
const MOST_PIXEL_RATIO = 2;

export class SkyMap {
  /** @type {View} */ view;
  /** @type {import("../../draw/glow_levels.js").GlowLevels | null} */ glow = null;
  /** @type {import("../../draw/chart.js").Scene} */ scene = { tiles: [], frames: [], chosen: [], now_ms: 0 };
  #palette = readPalette();
  #isMoving = false;
  #isDue = false;
  #isGlowDue = true;
  /** @type {Vector | null} */ #grabbed = null;
  /** Script time of the last pictures, for measuring. @type {number[]} */ script_ms = [];

  /** @param {HTMLElement} place @param {MapReader} reader */
  constructor(place, reader) {
    this.place = place;
    this.reader = reader;
    this.glowDrawer = shaderGlow() ?? new RasterGlow(element("canvas"));
    this.canvas = element("canvas", { "aria-hidden": "true" });
    this.context = /** @type {CanvasRenderingContext2D} */ (this.canvas.getContext("2d"));
    this.glowDrawer.canvas.setAttribute("aria-hidden", "true");
    place.prepend(this.glowDrawer.canvas, this.canvas);
    this.glowDrawer.setPalette(this.#palette);
    this.view = wholeView(wholeSky, { ra_deg: 180, dec_deg: 0 }, this.#size());
    this.#fitCanvases();
    new ResizeObserver(() => this.#resize()).observe(place);
    this.#listen();
  }

  #listen() {
    document.addEventListener("quartersky:theme", () => this.#retheme());
    this.gestures = new Gestures(this.place, {
      onGrab: ({ x_px, y_px }) => {
        this.#grabbed = skyAt(this.view, x_px, y_px);
      },
      onDrag: ({ x_px, y_px }) => this.#drag(x_px, y_px),
      onZoom: (factor, at) => this.#zoom(factor, at),
      onRest: () => this.#rest(),
      onHover: (at) => this.reader.onHover(at && skyAt(this.view, at.x_px, at.y_px)),
      onTap: (at) => this.#tap(at),
      onKey: (key) => this.#key(key) || this.reader.onKey(key),
    });
  }

  #size() {
    const box = this.place.getBoundingClientRect();
    return { width_px: Math.max(60, box.width), height_px: Math.max(60, box.height) };
  }

  #fitCanvases() {
    const ratio = Math.min(MOST_PIXEL_RATIO, globalThis.devicePixelRatio || 1);
    for (const canvas of [this.glowDrawer.canvas, this.canvas]) {
      canvas.width = Math.round(this.view.width_px * ratio);
      canvas.height = Math.round(this.view.height_px * ratio);
    }
    this.context.setTransform(ratio, 0, 0, ratio, 0, 0);
  }

  #resize() {
    const size = this.#size();
    if (size.width_px === this.view.width_px && size.height_px === this.view.height_px) return;
    this.view = resized(this.view, size);
    this.#fitCanvases();
    this.#turned();
  }

  #retheme() {
    this.#palette = readPalette();
    this.glowDrawer.setPalette(this.#palette);
    this.redraw({ isGlowNew: true });
  }

  /** Over a site the middle is its zenith and stays there. */
  get isDome() {
    return this.view.projection === dome;
  }

  /** @param {number} x_px @param {number} y_px */
  #drag(x_px, y_px) {
    if (this.isDome || !this.#grabbed) return;
    this.#isMoving = true;
    this.view = holdUnder(this.view, this.#grabbed, x_px, y_px);
    this.#turned();
  }

  /** @param {number} factor @param {{x_px: number, y_px: number}} at */
  #zoom(factor, at) {
    if (this.isDome) return;
    this.#isMoving = true;
    this.view = zoomedAt(this.view, factor, at);
    this.#turned();
  }

  #rest() {
    this.#isMoving = false;
    this.redraw({ isGlowNew: true });
  }

  /** @param {{x_px: number, y_px: number}} at */
  #tap({ x_px, y_px }) {
    const v = skyAt(this.view, x_px, y_px);
    if (v) this.reader.onPick(v);
  }

  /** @param {string} key */
  #key(key) {
    const middle = { x_px: this.view.width_px / 2, y_px: this.view.height_px / 2 };
    /** @type {Record<string, [number, number]>} */
    const steps = { ArrowLeft: [1, 0], ArrowRight: [-1, 0], ArrowUp: [0, 1], ArrowDown: [0, -1] };
    const step = steps[key];
    if (step) this.#push(step[0] * KEY_STEP_PX, step[1] * KEY_STEP_PX);
    else if (key === "+" || key === "=") this.zoomBy(1.5);
    else if (key === "-") this.zoomBy(1 / 1.5);
    else if (key === "0" || key === "Home") this.showWhole();
    else return false;
    this.reader.onHover(skyAt(this.view, middle.x_px, middle.y_px));
    return true;
  }

  /** @param {number} x_px @param {number} y_px */
  #push(x_px, y_px) {
    const { width_px, height_px } = this.view;
    this.#grabbed = skyAt(this.view, width_px / 2, height_px / 2);
    this.#drag(width_px / 2 + x_px, height_px / 2 + y_px);
    this.#rest();
  }

  /** @param {number} factor */
  zoomBy(factor) {
    this.#zoom(factor, { x_px: this.view.width_px / 2, y_px: this.view.height_px / 2 });
    this.#rest();
  }

  showWhole() {
    this.view = wholeView(wholeSky, this.isDome ? { ra_deg: this.view.ra_deg, dec_deg: 0 } : this.view, this.#size());
    this.#turned();
  }

  /** @param {{ra_deg: number, dec_deg: number}} zenith */
  showDome(zenith) {
    this.view = wholeView(dome, zenith, this.#size());
    this.#turned();
  }

  /** @param {{ra_deg: number, dec_deg: number}} middle */
  turnTo(middle) {
    this.view = { ...this.view, ra_deg: middle.ra_deg, dec_deg: middle.dec_deg };
    this.#turned();
  }

  /** @param {{ra_deg: number, dec_deg: number}} middle @param {number} span_deg */
  goTo(middle, span_deg) {
    this.view = closeTo({ ...this.view, projection: wholeSky }, middle, span_deg);
    this.#turned();
  }

  get isWhole() {
    return isWhole(this.view);
  }

  #turned() {
    this.place.classList.toggle("is-dome", this.isDome);
    this.reader.onView(this.view);
    this.redraw({ isGlowNew: true });
  }

  /** @param {{isGlowNew: boolean}} what */
  redraw({ isGlowNew }) {
    this.#isGlowDue ||= isGlowNew;
    if (this.#isDue) return;
    this.#isDue = true;
    requestAnimationFrame(() => this.#draw());
  }

  #draw() {
    const begun = performance.now();
    this.#isDue = false;
    if (this.#isGlowDue) this.glowDrawer.draw(this.view, this.glow, { isMoving: this.#isMoving });
    this.#isGlowDue = false;
    drawChart(this.context, this.view, this.scene, this.#palette);
    this.script_ms = [...this.script_ms.slice(-99), performance.now() - begun];
  }
}
