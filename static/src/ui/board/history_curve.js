/** How both numbers grew, and where the plan leads. */

import { fill, svgElement } from "../shell/element.js";
import { historyShape, timeTicks } from "../../state/history_shape.js";

/** @typedef {import("./board_model.js").BoardModel} BoardModel */

const HEIGHT_PX = 132;
const LEFT_PX = 34;
const BOTTOM_PX = 20;
const TOP_PX = 6;

/** @param {[number, number][]} points in 0..1 @param {{width_px: number}} box */
function pathOf(points, { width_px }) {
  return points.map(([x, y], i) => `${i ? "L" : "M"}${atX(x, width_px)} ${atY(y)}`).join("");
}

/** @param {number} x @param {number} width_px */
function atX(x, width_px) {
  return (LEFT_PX + x * (width_px - LEFT_PX - 2)).toFixed(1);
}

/** @param {number} y */
function atY(y) {
  return (HEIGHT_PX - BOTTOM_PX - y * (HEIGHT_PX - BOTTOM_PX - TOP_PX)).toFixed(1);
}

/** Grid lines with their per cent. @param {number} width_px @param {number} top */
function scale(width_px, top) {
  return [0, 0.25, 0.5, 0.75, 1].flatMap((part) => [
    svgElement("line", { class: "board-grid", x1: LEFT_PX, x2: width_px, y1: atY(part), y2: atY(part) }),
    svgElement("text", { class: "board-tick", x: LEFT_PX - 6, y: Number(atY(part)) + 4, "text-anchor": "end" }, `${trimmed(part * top * 100)}`),
  ]);
}

/** @param {number} percent */
function trimmed(percent) {
  return percent >= 10 || percent === 0 ? percent.toFixed(0) : percent.toFixed(1).replace(/\.0$/, "");
}

/**
 * @param {NonNullable<ReturnType<typeof historyShape>>} shape
 * @param {number} width_px
 * @returns {SVGElement[]}
 */
function curves(shape, width_px) {
  const box = { width_px };
  const now_x = atX(shape.now_x, width_px);
  return [
    ...scale(width_px, shape.top),
    svgElement("path", { class: "board-curve board-imaged", d: pathOf(shape.imaged, box) }),
    svgElement("path", { class: "board-curve board-searched", d: pathOf(shape.searched, box) }),
    svgElement("path", { class: "board-curve board-expected", d: pathOf(shape.expected, box) }),
    svgElement("line", { class: "board-now", x1: now_x, x2: now_x, y1: atY(1), y2: atY(0) }),
    ...timeTicks(shape.from_ms, shape.to_ms).map(({ x, text }) =>
      svgElement("text", { class: "board-tick", x: atX(x, width_px), y: HEIGHT_PX - 4, "text-anchor": x > 0.95 ? "end" : "middle" }, text),
    ),
  ];
}

/** @param {Element} place @param {BoardModel} model */
export function historyCurve(place, model) {
  const svg = svgElement("svg", { class: "board-history", role: "img", height: HEIGHT_PX, width: "100%" });
  place.append(svg);
  const show = () => {
    const { state, coverage } = model;
    const width_px = svg.getBoundingClientRect().width;
    if (!state || !coverage || width_px < 60) return;
    const shape = historyShape(coverage, state, model.now_ms);
    svg.setAttribute("aria-label", shape.text);
    fill(svg, ...curves(shape, width_px));
  };
  model.onChange((changed) => {
    if (changed.has("coverage") || changed.has("state") || changed.has("clock")) show();
  });
  setInterval(show, 30_000);
  new ResizeObserver(show).observe(svg);
}
