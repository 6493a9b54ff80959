/**
 * The grid of right ascension and declination that suits a view: steps, lines, and where their labels may
 * stand.
 */

import { DEG, clamp, wrapRaDeg } from "./angles.js";
import { raDec, unitVector } from "./vectors.js";
import { isWhole, rotationOf, screenOf, skyAt } from "./view.js";

/** Steps in degrees that read well in hours and minutes, and in degrees and arc minutes. */
const RA_STEPS_DEG = [30, 15, 7.5, 5, 2.5, 1.25, 0.5, 0.25, 0.125];
const DEC_STEPS_DEG = [30, 15, 10, 5, 2, 1, 0.5, 0.25, 0.1];
const WISH_PX = 150;
const SAMPLES = 48;

/**
 * The largest step not wider than wanted, else the smallest of all.
 * @param {number[]} steps
 * @param {number} wanted_deg
 */
function stepFor(steps, wanted_deg) {
  return steps.find((step) => step <= wanted_deg) ?? steps[steps.length - 1];
}

/** @param {import("./view.js").View} view @returns {{ra_deg: number, dec_deg: number}} */
export function gridSteps(view) {
  const wanted_deg = WISH_PX / (view.scale_px * DEG);
  const nearest = Math.max(Math.cos(view.dec_deg * DEG), 0.05);
  return {
    ra_deg: stepFor(RA_STEPS_DEG, Math.max(wanted_deg / nearest, 0.12)),
    dec_deg: stepFor(DEC_STEPS_DEG, wanted_deg * 1.2),
  };
}

/**
 * How far the screen reaches from its middle, degrees (at most the whole sky).
 * @param {import("./view.js").View} view
 */
function reachDeg(view) {
  const across = Math.hypot(view.width_px, view.height_px) / 2 / view.scale_px;
  return clamp((across / DEG) * 1.25, 0.1, 180);
}

/** Range of declinations and right ascensions on the screen. @param {import("./view.js").View} view */
export function shownRange(view) {
  const reach = reachDeg(view);
  const low_deg = clamp(view.dec_deg - reach, -90, 90);
  const high_deg = clamp(view.dec_deg + reach, -90, 90);
  const widest = Math.max(Math.abs(low_deg), Math.abs(high_deg));
  const ratio = Math.sin(Math.min(reach, 90) * DEG) / Math.max(Math.cos(view.dec_deg * DEG), 1e-9);
  const half_ra_deg = widest > 89 || ratio >= 1 ? 180 : Math.asin(ratio) / DEG;
  return { low_deg, high_deg, half_ra_deg };
}

/** Multiples of a step in a closed range. @param {number} low @param {number} high @param {number} step */
function multiples(low, high, step) {
  const first = Math.ceil(low / step - 1e-9);
  const count = Math.floor(high / step + 1e-9) - first + 1;
  return Array.from({ length: Math.max(0, count) }, (_, i) => (first + i) * step);
}

/** @param {number} low @param {number} high */
function samples(low, high) {
  return Array.from({ length: SAMPLES + 1 }, (_, i) => low + ((high - low) * i) / SAMPLES);
}

/**
 * Lines of the grid as directions.
 * @param {import("./view.js").View} view
 * @returns {{kind: "ra" | "dec", value_deg: number, points: import("./vectors.js").Vector[]}[]}
 */
export function gridLines(view) {
  const step = gridSteps(view);
  const { low_deg, high_deg, half_ra_deg } = shownRange(view);
  const [ra_low, ra_high] = [view.ra_deg - half_ra_deg, view.ra_deg + half_ra_deg];
  const last_ra = half_ra_deg >= 180 ? ra_high - step.ra_deg / 2 : ra_high;
  const meridians = multiples(ra_low, last_ra, step.ra_deg).map((ra) => ({
    kind: /** @type {const} */ ("ra"),
    value_deg: wrapRaDeg(ra),
    points: samples(low_deg, high_deg).map((dec) => unitVector(ra, dec)),
  }));
  const parallels = multiples(Math.max(low_deg, -89.99), Math.min(high_deg, 89.99), step.dec_deg);
  return [
    ...meridians,
    ...parallels.map((dec) => ({
      kind: /** @type {const} */ ("dec"),
      value_deg: dec,
      points: samples(ra_low + 1e-6, ra_high - 1e-6).map((ra) => unitVector(ra, dec)),
    })),
  ];
}

/** @param {"ra" | "dec"} kind @param {number} value_deg @param {number} step_deg @returns {string} */
export function gridText(kind, value_deg, step_deg) {
  if (kind === "dec") return signedDegrees(value_deg, step_deg);
  const minutes = Math.round(value_deg * 4 * 100) / 100;
  const hours = Math.floor(minutes / 60);
  const rest = minutes - hours * 60;
  if (step_deg >= 15) return `${hours}h`;
  const seconds = Math.round((rest % 1) * 60);
  const two = (/** @type {number} */ part) => String(part).padStart(2, "0");
  return `${hours}h ${two(Math.floor(rest))}m${seconds ? ` ${two(seconds)}s` : ""}`;
}

/** @param {number} value_deg @param {number} step_deg */
function signedDegrees(value_deg, step_deg) {
  const sign = value_deg < -1e-9 ? "−" : value_deg > 1e-9 ? "+" : "";
  const size = Math.abs(value_deg);
  if (step_deg >= 1) return `${sign}${Math.round(size)}°`;
  const minutes = Math.round(size * 60);
  return `${sign}${Math.floor(minutes / 60)}° ${String(minutes % 60).padStart(2, "0")}′`;
}

/**
 * Where a line's label stands on the whole sky: meridians on the equator, parallels at the western edge.
 * @param {import("./view.js").View} view
 * @param {{kind: string, value_deg: number}} line
 */
function wholeAnchor(view, line) {
  if (line.kind === "ra") return unitVector(line.value_deg, 0);
  return unitVector(view.ra_deg - 179.9, line.value_deg);
}

/** Room that a label needs inside the edge of the screen. */
const INSET_PX = { left: 8, top: 18, right: 62, bottom: 22 };

/**
 * The part of a straight piece that is inside the screen, or null. Source: Liang & Barsky 1984, ACM Trans. Graphics 3, 1.
 * @param {[number, number]} a @param {[number, number]} b @param {import("./view.js").View} view
 * @returns {[number, number][] | null}
 */
export function clipped(a, b, { width_px, height_px }) {
  let from = 0;
  let to = 1;
  const [dx, dy] = [b[0] - a[0], b[1] - a[1]];
  for (const [step, room] of [
    [-dx, a[0] - INSET_PX.left],
    [dx, width_px - INSET_PX.right - a[0]],
    [-dy, a[1] - INSET_PX.top],
    [dy, height_px - INSET_PX.bottom - a[1]],
  ]) {
    if (step === 0 && room < 0) return null;
    if (step < 0) from = Math.max(from, room / step);
    if (step > 0) to = Math.min(to, room / step);
  }
  if (from > to) return null;
  return [[a[0] + dx * from, a[1] + dy * from], [a[0] + dx * to, a[1] + dy * to]];
}

/**
 * The point of a line inside the screen that is nearest to the edge its kind is labelled at: meridians below,
 * parallels right.
 * @param {import("./view.js").View} view
 * @param {{kind: string, points: import("./vectors.js").Vector[]}} line
 */
function edgeAnchor(view, line) {
  const rotation = rotationOf(view);
  const axis = line.kind === "ra" ? 1 : 0;
  const places = line.points.map((point) => screenOf(view, rotation, point));
  return places.reduce((best, at, i) => {
    const last = places[i - 1];
    if (!last || !at || (best && Math.max(last[axis], at[axis]) <= best[axis])) return best;
    return farthest(clipped(last, at, view) ?? [], axis, best);
  }, /** @type {[number, number] | null} */ (null));
}

/** @param {[number, number][]} ends @param {0 | 1} axis @param {[number, number] | null} best */
function farthest(ends, axis, best) {
  return ends.reduce((far, end) => (!far || end[axis] > far[axis] ? end : far), best);
}

/**
 * Labels of the grid with the place each wishes for.
 * @param {import("./view.js").View} view
 * @param {ReturnType<typeof gridLines>} lines
 * @returns {{text: string, x_px: number, y_px: number, kind: "ra" | "dec"}[]}
 */
export function gridLabels(view, lines) {
  const step = gridSteps(view);
  const rotation = rotationOf(view);
  const isAll = isWhole(view);
  return lines.flatMap((line) => {
    if (line.kind === "dec" && isAll && Math.abs(line.value_deg) < 1e-9) return [];
    const at = isAll
      ? screenOf(view, rotation, wholeAnchor(view, line))
      : edgeAnchor(view, line);
    if (!at) return [];
    const step_deg = line.kind === "ra" ? step.ra_deg : step.dec_deg;
    const text = gridText(line.kind, line.value_deg, step_deg);
    return [{ text, x_px: at[0] + 4, y_px: at[1] - 4, kind: line.kind }];
  });
}

/**
 * Coordinates under the pointer, or null.
 * @param {import("./view.js").View} view
 * @param {number} x_px
 * @param {number} y_px
 */
export function coordinatesAt(view, x_px, y_px) {
  const v = skyAt(view, x_px, y_px);
  return v && raDec(v);
}
