/** The altitude curve of one tile through the night, as a small picture. */

import { utcClock } from "../shell/clock.js";
import { element, svgElement } from "../shell/element.js";

/** @typedef {import("./altitudes.js").Curve} Curve */

const WIDTH = 340;
const HEIGHT = 84;

/**
 * @typedef {object} ChartOptions
 * @property {Curve} curve
 * @property {Curve|null} moon
 * @property {number} now_ms
 * @property {number|null} dusk_ms
 * @property {number|null} dawn_ms
 * @property {number} least_deg    the lowest altitude in use
 * @property {number|null} until_ms
 */

/** @param {Curve} curve */
function scales(curve) {
  const [first, last] = [curve[0].at_ms, curve[curve.length - 1].at_ms];
  return {
    x: (/** @type {number} */ time_ms) => ((time_ms - first) / (last - first)) * WIDTH,
    y: (/** @type {number} */ altitude_deg) => HEIGHT - (Math.max(altitude_deg, -5) / 90) * HEIGHT,
  };
}

/** @param {Curve} curve @param {ReturnType<typeof scales>} scale */
function path(curve, scale) {
  return curve.map(({ at_ms, altitude_deg }, i) => `${i ? "L" : "M"}${scale.x(at_ms).toFixed(1)} ${scale.y(altitude_deg).toFixed(1)}`).join("");
}

/** @param {number} from @param {number} to */
function lightBand(from, to) {
  const [left, right] = [Math.max(0, from), Math.min(WIDTH, to)];
  if (right <= left) return svgElement("g");
  return svgElement("rect", { class: "chart-light", x: left, y: 0, width: right - left, height: HEIGHT });
}

/** Words under the chart, left to right, none upon another. @param {{x: number, text: string}[]} marks */
export function placedMarks(marks) {
  const wide = 56;
  /** @type {{x: number, text: string}[]} */
  const placed = [];
  for (const mark of marks) {
    const x = Math.min(WIDTH - wide / 2, Math.max(wide / 2, mark.x));
    if (placed.every((other) => Math.abs(other.x - x) >= wide)) placed.push({ ...mark, x });
  }
  return placed;
}

/** @param {ChartOptions} options @param {ReturnType<typeof scales>} scale */
function marksOf({ now_ms, dusk_ms, dawn_ms, until_ms }, scale) {
  const wanted = [{ x: scale.x(now_ms), text: "now" }];
  const add = (/** @type {number|null} */ time_ms, /** @type {string} */ word) => {
    if (time_ms === null) return;
    const x = scale.x(time_ms);
    if (x >= 0 && x <= WIDTH) wanted.push({ x, text: `${word}${utcClock(new Date(time_ms))}` });
  };
  add(until_ms, "");
  add(dawn_ms, "light ");
  add(dusk_ms, "dark ");
  return placedMarks(wanted.filter(({ x }) => x >= 0 && x <= WIDTH));
}

/** @param {ChartOptions} options @returns {HTMLElement} */
export function altitudeChart(options) {
  const { curve, moon, now_ms, dusk_ms, dawn_ms, least_deg } = options;
  const scale = scales(curve);
  const now = scale.x(now_ms);
  const picture = svgElement(
    "svg",
    { viewBox: `0 0 ${WIDTH} ${HEIGHT + 16}`, class: "altitude-chart", "aria-hidden": "true" },
    dusk_ms === null ? null : lightBand(0, scale.x(dusk_ms)),
    dawn_ms === null ? null : lightBand(scale.x(dawn_ms), WIDTH),
    svgElement("line", { class: "chart-base", x1: 0, x2: WIDTH, y1: HEIGHT, y2: HEIGHT }),
    svgElement("line", { class: "chart-least", x1: 0, x2: WIDTH, y1: scale.y(least_deg), y2: scale.y(least_deg) }),
    svgElement("text", { class: "chart-word", x: 2, y: scale.y(least_deg) - 3 }, `${Math.round(least_deg)}°`),
    moon ? svgElement("path", { class: "chart-moon", d: path(moon, scale) }) : null,
    svgElement("path", { class: "chart-curve", d: path(curve, scale) }),
    now >= 0 && now <= WIDTH ? svgElement("line", { class: "chart-now", x1: now, x2: now, y1: 0, y2: HEIGHT }) : null,
    ...marksOf(options, scale).map(({ x, text }) => svgElement("text", { class: "chart-word", x, y: HEIGHT + 13, "text-anchor": "middle" }, text)),
  );
  return element("figure", {}, /** @type {any} */ (picture));
}
