/** What is already described, in a line or two each. */

import { fieldSize } from "../shell/numbers.js";
import { element } from "../shell/element.js";
import { presetOf } from "./presets.js";

/**
 * @typedef {object} Site
 * @property {number} id
 * @property {string} name
 * @property {number} latitude_deg
 * @property {number} longitude_deg
 * @property {number} height_m
 * @property {number} sky_brightness_mag
 * @property {number} seeing_arcsec
 * @property {number} min_altitude_deg
 * @property {[number, number][]} horizon_mask    the skyline: azimuth and altitude
 * @property {number} clear_chance
 */

/** @typedef {import("./presets.js").InstrumentValues & {id: number, site: number, is_in_use: boolean}} Instrument */

/** @param {Site} site */
export function placeText(site) {
  const north = `${Math.abs(site.latitude_deg).toFixed(4)}° ${site.latitude_deg < 0 ? "south" : "north"}`;
  const east = `${Math.abs(site.longitude_deg).toFixed(4)}° ${site.longitude_deg < 0 ? "west" : "east"}`;
  return `${north}, ${east}, ${Math.round(site.height_m)} m`;
}

/** @param {string} name @param {string[]} lines @param {() => void} onChange */
function card(name, lines, onChange) {
  const button = element("button", { type: "button", "aria-label": `change ${name}`, onclick: onChange }, "change");
  const words = lines.map((line) => element("p", { class: "quiet small" }, line));
  return element("li", { class: "panel gear-card" }, element("div", {}, element("h3", {}, name), words), button);
}

/** @param {Site} site @param {() => void} onChange */
export function siteCard(site, onChange) {
  const sky = `sky ${site.sky_brightness_mag.toFixed(1)} mag per square arcsec · above ${Math.round(site.min_altitude_deg)}° · clear ${Math.round(site.clear_chance * 100)} % of nights`;
  const skyline = site.horizon_mask.length > 0 ? [`skyline of ${site.horizon_mask.length} points`] : [];
  return card(site.name, [placeText(site), sky, ...skyline], onChange);
}

/** @param {Instrument} instrument */
function fieldText(instrument) {
  if (instrument.shape === "circle") return `circle of ${fieldSize(instrument.width_deg, instrument.width_deg).split(" × ")[0]}`;
  return fieldSize(instrument.width_deg, instrument.height_deg);
}

/** @param {Instrument} instrument */
function seriesText(instrument) {
  return `${instrument.n_exposures} × ${instrument.exposure_s} s, ${instrument.band}`;
}

/** @param {Instrument} instrument @param {Site[]} sites @param {() => void} onChange */
export function instrumentCard(instrument, sites, onChange) {
  const site = sites.find(({ id }) => id === instrument.site);
  const what = `${presetOf(instrument).label} · ${fieldText(instrument)} · ${Math.round(instrument.aperture_mm)} mm`;
  const where = `at ${site?.name ?? "another site"} · ${seriesText(instrument)}${instrument.is_in_use ? "" : " · not in use: gets no tiles"}`;
  return card(instrument.name, [what, where], onChange);
}
