/** A source model as a small picture: magnitude against time since the event, both as astronomers draw them. */

import { element, svgElement } from "./element.js";

/** @typedef {import("../launch/source_values.js").Curve} Curve */

const WIDTH = 340;
const HEIGHT = 150;
const LEFT = 34;
const FOOT = 16;
const TIMES = [
  { t_d: 1 / 1440, text: "1 min" },
  { t_d: 1 / 24, text: "1 h" },
  { t_d: 1, text: "1 d" },
  { t_d: 10, text: "10 d" },
];

/** @param {Curve[]} curves */
function magnitudeRange(curves) {
  const seen = curves.flatMap(({ magnitudes }) => magnitudes.filter((m) => m !== null));
  const [bright, faint] = [Math.min(...seen), Math.max(...seen)];
  const room = Math.max(0.5, 0.08 * (faint - bright));
  return { bright: bright - room, faint: faint + room };
}

/** @param {Curve[]} curves */
export function chartScales(curves) {
  const { bright, faint } = magnitudeRange(curves);
  const times = curves.flatMap(({ ts_d }) => [ts_d[0], ts_d[ts_d.length - 1]]);
  const [first, last] = [Math.log(Math.min(...times)), Math.log(Math.max(...times))];
  return {
    x: (/** @type {number} */ t_d) => LEFT + ((Math.log(t_d) - first) / (last - first)) * (WIDTH - LEFT),
    y: (/** @type {number} */ magnitude) => ((magnitude - bright) / (faint - bright)) * HEIGHT,
    bright,
    faint,
  };
}

/** @param {Curve} curve @param {ReturnType<typeof chartScales>} scale */
export function curvePath({ ts_d, magnitudes }, scale) {
  let isDown = false;
  return ts_d
    .map((t_d, i) => {
      const magnitude = magnitudes[i];
      const step = magnitude === null ? "" : `${isDown ? "L" : "M"}${scale.x(t_d).toFixed(1)} ${scale.y(magnitude).toFixed(1)}`;
      isDown = magnitude !== null;
      return step;
    })
    .join("");
}

/** @param {number} days */
export function delayText(days) {
  if (days < 1 / 24) return `${Number((days * 1440).toPrecision(2))} min`;
  return days < 2 ? `${Number((days * 24).toPrecision(2))} h` : `${Number(days.toPrecision(2))} d`;
}

/** What a curve says, in words. @param {Curve} curve */
export function curveLine({ label, weight, first_light_d: ends, magnitudes }) {
  const seen = /** @type {number[]} */ (magnitudes.filter((m) => m !== null));
  const light = ends === null ? "always shone" : ends[1] <= 0 ? "light at once" : `light after ${[...new Set(ends.map(delayText))].join(" to ")}`;
  const peak = seen.length > 0 ? `, ${Math.min(...seen).toFixed(1).replace("-", "−")} at its brightest` : "";
  return `${label}: ${(100 * weight).toFixed(0)} %, ${light}${peak}`;
}

/** The number of a curve where it begins. @param {Curve} curve @param {ReturnType<typeof chartScales>} scale @param {number} number */
function numberOn({ ts_d, magnitudes }, scale, number) {
  const at = magnitudes.findIndex((m) => m !== null);
  return svgElement("text", { class: "chart-word", x: scale.x(ts_d[at]) - 3, y: scale.y(Number(magnitudes[at])) + 4, "text-anchor": "end" }, String(number));
}

/** @param {{curves: Curve[], is_absolute: boolean}} model @returns {HTMLElement} */
export function lightChart({ curves, is_absolute }) {
  const drawn = curves.filter(({ magnitudes }) => magnitudes.some((m) => m !== null));
  if (drawn.length === 0) return element("figure", {}, element("figcaption", { class: "small quiet" }, "No light within two months."));
  const scale = chartScales(drawn);
  const marks = [Math.ceil(scale.bright), Math.floor(scale.faint)];
  const picture = svgElement(
    "svg",
    { viewBox: `0 0 ${WIDTH} ${HEIGHT + FOOT}`, class: "light-chart", "aria-hidden": "true" },
    svgElement("line", { class: "chart-base", x1: LEFT, x2: WIDTH, y1: HEIGHT, y2: HEIGHT }),
    ...TIMES.map(({ t_d }) => svgElement("line", { class: "chart-least", x1: scale.x(t_d), x2: scale.x(t_d), y1: 0, y2: HEIGHT })),
    ...TIMES.map(({ t_d, text }, i) => svgElement("text", { class: "chart-word", x: scale.x(t_d), y: HEIGHT + 13, "text-anchor": i ? "middle" : "start" }, text)),
    ...marks.map((m) => svgElement("text", { class: "chart-word", x: LEFT - 5, y: scale.y(m) + 4, "text-anchor": "end" }, String(m).replace("-", "−"))),
    ...drawn.map((curve) => svgElement("path", { class: "chart-curve", d: curvePath(curve, scale) })),
    ...(drawn.length > 1 ? drawn.map((curve, i) => numberOn(curve, scale, i + 1)) : []),
  );
  const caption = `${is_absolute ? "Absolute magnitude" : "Magnitude"} in V against time since the event; of each kind the middle delay. Distance, dust and spread come on top.`;
  return element(
    "figure",
    { class: "stack" },
    /** @type {any} */ (picture),
    element("ol", { class: "small light-lines" }, [...drawn, ...curves.filter((curve) => !drawn.includes(curve))].map((curve) => element("li", {}, curveLine(curve)))),
    element("figcaption", { class: "small quiet" }, is_absolute ? caption : caption.replace("Distance, dust and spread come", "The spread comes")),
  );
}
