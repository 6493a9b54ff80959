/** Buttons on the map: what glows, whole sky or dome, zoom; and the key of the lines. */

import { KEY, STROKES } from "../../draw/strokes.js";
import { zenithOf } from "../../sky/site_sky.js";
import { element, fill, svgElement } from "../shell/element.js";

/**
 * @typedef {import("./board_model.js").BoardModel} BoardModel
 * @typedef {import("./sky_map.js").SkyMap} SkyMap
 * @typedef {import("../../state/shapes.js").SiteShown} SiteShown
 */

/** @param {string} text @param {() => void} onclick @param {Record<string, any>} [more] */
function button(text, onclick, more = {}) {
  return element("button", { type: "button", onclick, ...more }, text);
}

/** @param {HTMLElement} node @param {boolean} isOn */
function press(node, isOn) {
  node.setAttribute("aria-pressed", String(isOn));
}

/** What is still possible, or the alert as it came. @param {BoardModel} model */
function layerButtons(model) {
  const left = button("still possible", () => model.setLayer("left"));
  const alert = button("as alerted", () => model.setLayer("alert"));
  const show = () => {
    press(left, model.layer === "left");
    press(alert, model.layer === "alert");
  };
  model.onChange(show);
  show();
  return element("div", { class: "board-switch", role: "group", "aria-label": "what glows" }, left, alert);
}

/** A line as the map draws it. @param {{stroke: string, is_double: boolean}} entry */
function sample({ stroke, is_double }) {
  const { dash, width, colour } = STROKES[stroke];
  const ys = is_double ? [4, 9] : [6.5];
  const lines = ys.map((y) =>
    svgElement("line", { x1: 0, x2: 30, y1: y, y2: y, stroke: `var(--${colour})`, "stroke-width": width, "stroke-dasharray": dash.join(" ") || undefined }),
  );
  return svgElement("svg", { width: 30, height: 13, "aria-hidden": "true" }, ...lines);
}

/** The key folds away where there is little room. */
function lineKey() {
  const rows = KEY.map((entry) => element("li", {}, sample(entry), element("span", {}, entry.text)));
  return element("details", { class: "board-key" }, element("summary", {}, "lines"), element("ul", {}, rows));
}

/** The dome over a chosen site, turned on with the sky. */
export class DomeSwitch {
  /** @type {SiteShown | null} */ site = null;
  onChange = () => {};
  #whole = button("whole sky", () => this.#leave());
  #over = element("details", { class: "board-sites" });
  #sites = element("ul", {});

  /** @param {BoardModel} model @param {SkyMap} map */
  constructor(model, map) {
    this.model = model;
    this.map = map;
    this.node = element("div", { class: "board-switch", role: "group", "aria-label": "which map" }, this.#whole, this.#over);
    this.#over.append(element("summary", {}, "over a site"), this.#sites);
    this.#over.addEventListener("toggle", () => this.#list());
    this.#over.addEventListener("keydown", (event) => {
      if (event.key === "Escape") this.#over.open = false;
    });
    setInterval(() => this.turn(), 15_000);
    model.onChange((changed) => changed.has("clock") && this.turn());
    this.#show();
  }

  #list() {
    const observers = Object.values(this.model.state?.observers ?? {});
    const rows = observers.flatMap(({ name, sites }) =>
      sites.map((site) => element("li", {}, button(`${site.name} (${name})`, () => this.#enter(site), { class: "link" }))),
    );
    const empty = element("li", { class: "quiet" }, "No site yet.");
    fill(this.#sites, ...(rows.length > 0 ? rows : [empty]));
  }

  /** @param {SiteShown} site */
  #enter(site) {
    this.site = site;
    this.#over.open = false;
    this.map.showDome(zenithOf(site, this.model.now_ms));
    this.#show();
  }

  #leave() {
    this.site = null;
    this.map.showWhole();
    this.#show();
  }

  /** The sky has turned. */
  turn() {
    if (this.site) this.map.turnTo(zenithOf(this.site, this.model.now_ms));
  }

  /** The map was sent elsewhere. */
  forget() {
    this.site = null;
    this.#show();
  }

  #show() {
    press(this.#whole, this.site === null);
    const summary = /** @type {HTMLElement} */ (this.#over.firstElementChild);
    summary.textContent = this.site ? `over ${this.site.name}` : "over a site";
    this.#over.classList.toggle("is-on", this.site !== null);
    this.onChange();
  }
}

/** @param {SkyMap} map @param {DomeSwitch} domes */
function zoomButtons(map, domes) {
  const node = element(
    "div",
    { class: "board-switch", role: "group", "aria-label": "zoom" },
    button("+", () => map.zoomBy(1.6), { "aria-label": "zoom in" }),
    button("−", () => map.zoomBy(1 / 1.6), { "aria-label": "zoom out" }),
    button("all", () => map.showWhole(), { "aria-label": "show all of the sky" }),
  );
  // The dome stays as it is: it turns with the sky.
  domes.onChange = () => {
    node.hidden = domes.site !== null;
  };
  return node;
}

/**
 * @param {Element} place
 * @param {BoardModel} model
 * @param {SkyMap} map
 * @param {() => void} goToNext
 * @returns {DomeSwitch}
 */
export function mapControls(place, model, map, goToNext) {
  const domes = new DomeSwitch(model, map);
  const next = element("div", { class: "board-switch" }, button("next best tile", goToNext));
  place.prepend(layerButtons(model), domes.node, zoomButtons(map, domes), next, lineKey());
  return domes;
}
