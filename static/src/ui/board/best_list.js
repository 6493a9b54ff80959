/** The map in words: the tiles with most probability left, each a button that goes there. */

import { bestTiles } from "../../state/tile_pixels.js";
import { sizeText, smallPercentText } from "../../state/words.js";
import { decText, raText } from "../../sky/sexagesimal.js";
import { element, fill } from "../shell/element.js";

/** @typedef {import("./board_model.js").BoardModel} BoardModel */

const N_BEST = 10;
const SLICE_MS = 6;
const REST_MS = 1500;

export class BestList {
  /** @type {Map<number, number>} */ #left = new Map();
  /** @type {number[]} */ #queue = [];
  /** @type {any} */ #timer = null;
  #list = element("ol", { class: "board-best" });

  /** @param {Element} place @param {BoardModel} model @param {(number: number) => void} goTo */
  constructor(place, model, goTo) {
    this.model = model;
    this.goTo = goTo;
    place.append(this.#list);
    model.onChange((changed) => {
      if (changed.has("coverage") || changed.has("tiles")) this.#plan(changed.has("tiles") ? 0 : REST_MS);
      else if (changed.has("state")) this.#show();
    });
  }

  /** Measures every tile anew, a few milliseconds at a time. @param {number} after_ms */
  #plan(after_ms) {
    if (this.#timer !== null || this.#queue.length > 0) return;
    this.#timer = setTimeout(() => {
      this.#timer = null;
      this.#queue = Object.keys(this.model.state?.tiles ?? {}).map(Number);
      this.#work();
    }, after_ms);
  }

  #work() {
    const until = performance.now() + SLICE_MS;
    while (this.#queue.length > 0 && performance.now() < until) {
      const number = /** @type {number} */ (this.#queue.pop());
      const share = this.model.shareOf(number);
      if (share) this.#left.set(number, share.left);
    }
    if (this.#queue.length > 0) setTimeout(() => this.#work(), 4);
    else this.#show();
  }

  /** @returns {number[]} numbers of the best tiles, best first */
  get best() {
    const tiles = this.model.state?.tiles ?? {};
    return bestTiles(tiles, (number, tile) => this.#left.get(number) ?? tile.probability, N_BEST).map(({ number }) => number);
  }

  #show() {
    const { state } = this.model;
    if (!state) return;
    const rows = this.best.map((number) => this.#row(number, state.tiles[number]));
    const empty = element("li", { class: "quiet" }, "No tiles yet. They are laid when the first instrument is registered.");
    fill(this.#list, ...(rows.length > 0 ? rows : [empty]));
  }

  /** @param {number} number @param {import("../../state/shapes.js").TileShown} tile */
  #row(number, tile) {
    const left = this.#left.get(number) ?? tile.probability;
    const line = this.model.lines.get(number)?.line ?? "open";
    const word = line === "met" ? "shot" : line;
    return element(
      "li",
      {},
      element("button", { type: "button", class: "link", "data-focus": `best-${number}`, onclick: () => this.goTo(number) }, `tile ${number}`),
      element("span", {}, `${smallPercentText(left)} left, ${word}`),
      element("span", { class: "quiet" }, `${sizeText(tile.width_deg, tile.height_deg)} at ${raText(tile.ra_deg, "minute")} ${decText(tile.dec_deg, "minute")}`),
    );
  }
}
