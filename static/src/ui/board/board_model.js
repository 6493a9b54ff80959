/**
 * What the Board knows: confirmed state, pixels, coverage, and what follows from them. Panels read it and never edit it.
 */

import { GlowLevels } from "../../draw/glow_levels.js";
import { coverageFromAnswer, emptyCoverage, patched, regionFromAnswer } from "../../state/coverage.js";
import { tileLines } from "../../state/tile_lines.js";
import { TilePixels } from "../../state/tile_pixels.js";
import { laidTiles } from "../../state/tile_search.js";

/**
 * @typedef {import("../../state/shapes.js").State} State
 * @typedef {import("../../state/coverage.js").Coverage} Coverage
 * @typedef {import("../../live/connection.js").Way} Way
 * @typedef {"state" | "tiles" | "coverage" | "way" | "clock" | "choice"} Part
 */

export class BoardModel {
  /** @type {State | null} */ state = null;
  seq = 0;
  /** @type {Coverage | null} */ coverage = null;
  /** @type {import("../../state/coverage.js").RegionPixels | null} */ region = null;
  /** @type {GlowLevels | null} */ glow = null;
  /** @type {TilePixels | null} */ tilePixels = null;
  /** @type {Map<number, import("../../state/tile_lines.js").TileLine>} */ lines = new Map();
  /** @type {import("../../state/tile_search.js").LaidTile[]} */ laid = [];
  /** @type {Way} */ way = "starting";
  /** Offset of the campaign's clock from the device's. */
  offset_ms = 0;
  /** @type {number | null} */ chosen = null;
  /** What glows: what is still possible, or the alert as it came. @type {"left" | "alert"} */ layer = "left";
  /** @type {string | null} */ trouble = null;
  /** @type {any[]} */ #waiting = [];
  /** @type {Set<Part>} */ #changed = new Set();
  /** @type {((changed: Set<Part>) => void)[]} */ #readers = [];

  /** @param {number | null} me the reader's observer id */
  constructor(me) {
    this.me = me;
  }

  /** Calls a reader at most once a screen refresh. @param {(changed: Set<Part>) => void} reader */
  onChange(reader) {
    this.#readers.push(reader);
  }

  /** @param {Part[]} parts */
  #touch(...parts) {
    if (this.#changed.size === 0) setTimeout(() => this.#tell(), 16);
    for (const part of parts) this.#changed.add(part);
  }

  #tell() {
    const changed = this.#changed;
    this.#changed = new Set();
    for (const reader of this.#readers) reader(changed);
  }

  /** @returns {number} the campaign's time */
  get now_ms() {
    return Date.now() + this.offset_ms;
  }

  /** @param {string} now */
  setClock(now) {
    this.offset_ms = Date.parse(now) - Date.now();
    this.#touch("clock");
  }

  /** @param {Way} way */
  setWay(way) {
    this.way = way;
    this.#touch("way");
  }

  /** @param {string | null} trouble */
  setTrouble(trouble) {
    this.trouble = trouble;
    this.#touch("way");
  }

  /** @param {import("../../state/sequence.js").Held} held */
  setState({ seq, state }) {
    const areTilesNew = state.tiles !== this.state?.tiles;
    this.state = state;
    this.seq = seq;
    this.lines = tileLines(state, this.me);
    if (areTilesNew) this.laid = laidTiles(state.tiles);
    this.#touch("state", ...(areTilesNew ? [/** @type {const} */ ("tiles")] : []));
  }

  /** @param {number | null} number */
  choose(number) {
    this.chosen = number;
    this.#touch("choice");
  }

  /** @param {"left" | "alert"} layer */
  setLayer(layer) {
    this.layer = layer;
    this.#repaint();
    this.#touch("coverage");
  }

  #repaint() {
    this.glow?.setAll(this.layer === "left" ? this.coverage : null);
  }

  /** A region, as GET region answers. @param {any} answer */
  setRegion(answer) {
    if (this.region?.revision === answer.revision) return;
    this.region = regionFromAnswer(answer);
    this.glow = new GlowLevels(this.region);
    this.tilePixels = new TilePixels(this.region);
    this.coverage = emptyCoverage(this.region.pixels.length);
    this.#repaint();
    this.#touch("coverage", "tiles");
  }

  /**
   * The whole coverage, as GET coverage answers, and what came by the socket meanwhile.
   * @param {any} answer
   */
  setCoverage(answer) {
    const coverage = coverageFromAnswer(answer);
    // Counted on the pixels of another revision: both must be asked for anew.
    if (this.region && answer.revision !== this.region.revision) return false;
    const waiting = this.#waiting.splice(0);
    this.coverage = waiting.reduce((held, message) => patched(held, message).coverage, coverage);
    this.#repaint();
    this.#touch("coverage");
    return true;
  }

  /** @param {any} message a live coverage message @returns {boolean} whether it fits what is held */
  patchCoverage(message) {
    if (!this.coverage || !this.region) {
      this.#waiting.push(message);
      return true;
    }
    const { coverage, changed, is_gap } = patched(this.coverage, message);
    this.coverage = coverage;
    if (this.layer === "left") this.glow?.setSome(coverage, changed);
    this.#touch("coverage");
    return !is_gap;
  }

  /** What is left in a tile, or null while the pixels are not there. @param {number} number */
  shareOf(number) {
    const tile = this.state?.tiles[number];
    if (!tile || !this.tilePixels || !this.coverage) return null;
    return this.tilePixels.leftIn(number, tile, this.coverage);
  }
}
