/** One thin bar per site over the next 24 hours: darkness filled, a line for now, clouded sites hatched. */

import { darkRows, hourTicks } from "../../state/dark_rows.js";
import { countText } from "../../state/words.js";
import { element, fill, svgElement } from "../shell/element.js";

/**
 * @typedef {import("./board_model.js").BoardModel} BoardModel
 * @typedef {import("../../state/dark_rows.js").DarkRow} DarkRow
 */

const ROW_PX = 18;
const BAR_PX = 9;
/** Room for names, and how many letters fit: on a laptop, on a phone. */
const NAMES = { wide: { px: 132, letters: 19 }, narrow: { px: 104, letters: 15 } };
const NARROW_PX = 380;
const FOOT_PX = 16;
/** Asked for again when the campaign's clock has gone this far. */
const FRESH_MS = 20 * 60_000;
const SOONEST_MS = 10_000;

/** @returns {SVGElement} */
function hatch() {
  const line = svgElement("path", { class: "board-hatch", d: "M0 6L6 0M-1 1L1 -1M5 7L7 5" });
  return svgElement("defs", {}, svgElement("pattern", { id: "board-clouds", width: 6, height: 6, patternUnits: "userSpaceOnUse" }, line));
}

/** @param {number} width_px */
function namesFor(width_px) {
  return width_px < NARROW_PX ? NAMES.narrow : NAMES.wide;
}

/** @param {DarkRow} row @param {number} i @param {number} width_px */
function rowParts(row, i, width_px) {
  const { px: left_px, letters } = namesFor(width_px);
  const y = i * ROW_PX + (ROW_PX - BAR_PX) / 2;
  const across = width_px - left_px;
  const bars = row.bars.map(([from, to]) =>
    svgElement("rect", {
      class: row.is_clouded ? "board-clouded" : "board-dark",
      ...(row.is_clouded ? { fill: "url(#board-clouds)" } : {}),
      x: left_px + from * across,
      width: Math.max(1, (to - from) * across),
      y,
      height: BAR_PX,
    }),
  );
  return [
    svgElement("text", { class: row.is_dark ? "board-site is-dark" : "board-site", x: 0, y: y + BAR_PX }, shortName(row.site, letters)),
    svgElement("rect", { class: "board-day", x: left_px, width: across, y, height: BAR_PX }),
    ...bars,
  ];
}

/** @param {string} name @param {number} letters */
function shortName(name, letters) {
  return name.length > letters ? `${name.slice(0, letters - 1)}…` : name;
}

/** @param {DarkRow[]} rows @returns {string} */
function wordsFor(rows) {
  const dark = rows.filter((row) => row.is_dark);
  const clouded = dark.filter((row) => row.is_clouded).length;
  if (rows.length === 0) return "No site yet: sites appear here when observers have entered them under My gear.";
  return `${dark.length} of ${countText(rows.length, "site")} in darkness now${clouded ? `, ${clouded} of them clouded` : ""}.`;
}

export class DarkStrip {
  /** @type {import("../../state/dark_rows.js").SiteDarkness[]} */ #sites = [];
  #from_ms = 0;
  #askedAt = -Infinity;
  #isFresh = false;
  #svg = svgElement("svg", { class: "board-strip", "aria-hidden": "true", width: "100%", height: "20" });
  #words = element("p", { class: "quiet small" }, "asking for the nights…");

  /** @param {Element} place @param {BoardModel} model @param {(path: string) => Promise<any>} ask */
  constructor(place, model, ask) {
    this.model = model;
    this.ask = ask;
    place.append(element("div", { class: "board-strip-box", tabindex: "0", role: "group", "aria-label": "nights of the sites" }, this.#svg), this.#words);
    model.onChange(() => this.#check());
    setInterval(() => this.#check(), 15_000);
    new ResizeObserver(() => this.#show()).observe(this.#svg);
  }

  /** Sites change when somebody joins. */
  forget() {
    this.#isFresh = false;
    this.#check();
  }

  #check() {
    const { state, now_ms } = this.model;
    if (!state) return;
    this.#show();
    const isOld = Math.abs(now_ms - this.#from_ms) > FRESH_MS || !this.#isFresh;
    if (!isOld || performance.now() - this.#askedAt < SOONEST_MS) return;
    this.#askedAt = performance.now();
    void this.#fetch(state.campaign.id, now_ms);
  }

  /** @param {string} campaign @param {number} from_ms */
  async #fetch(campaign, from_ms) {
    try {
      this.#sites = await this.ask(`campaigns/${campaign}/darkness?hours=24`);
      this.#from_ms = from_ms;
      this.#isFresh = true;
      this.#show();
    } catch {
      if (!this.#isFresh) this.#words.textContent = "The nights could not be asked for; trying again.";
    }
  }

  #show() {
    const { state, now_ms } = this.model;
    const width_px = this.#svg.getBoundingClientRect().width;
    if (!state || !this.#isFresh || width_px < 150) return;
    const { px: left_px } = namesFor(width_px);
    const rows = darkRows(this.#sites, state, this.#from_ms, now_ms);
    const height = rows.length * ROW_PX;
    this.#svg.setAttribute("height", String(height + FOOT_PX));
    const across = width_px - left_px;
    const now_x = left_px + Math.min(1, Math.max(0, (now_ms - this.#from_ms) / 86_400_000)) * across;
    fill(
      this.#svg,
      hatch(),
      ...rows.flatMap((row, i) => rowParts(row, i, width_px)),
      ...hourTicks(this.#from_ms, 6).map(({ x, text }) =>
        svgElement("text", { class: "board-tick", x: left_px + x * across, y: height + FOOT_PX - 4, "text-anchor": "middle" }, text),
      ),
      rows.length > 0 && svgElement("line", { class: "board-now", x1: now_x, x2: now_x, y1: 0, y2: height }),
    );
    this.#words.textContent = wordsFor(rows);
  }
}
