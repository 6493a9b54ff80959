/** The history curve in a unit square: time to the right, share upwards. */

import { percentText } from "./words.js";

/**
 * @typedef {[number, number]} Point
 * @typedef {object} HistoryShape
 * @property {number} from_ms
 * @property {number} to_ms
 * @property {number} top    share at the upper edge
 * @property {number} now_x
 * @property {Point[]} imaged
 * @property {Point[]} searched
 * @property {Point[]} expected    from now to the end of the plan
 * @property {string} text
 */

const SHORTEST_MS = 3_600_000;
const TOPS = [0.04, 0.1, 0.2, 0.4, 0.6, 0.8, 1];

/** @param {import("./shapes.js").State} state */
function endOfPlan({ offers, claims }) {
  const held = Object.values(claims).filter((claim) => claim.state === "held");
  return Math.max(0, ...offers.map((offer) => Date.parse(offer.ends_at)), ...held.map((claim) => Date.parse(claim.until)));
}

const TICK_STEPS_H = [0.25, 0.5, 1, 2, 3, 6, 12, 24, 48, 96];
const MOST_TICKS = 5;

/**
 * Whole hours of UTC under the curve.
 * @param {number} from_ms
 * @param {number} to_ms
 * @returns {{x: number, text: string}[]}
 */
export function timeTicks(from_ms, to_ms) {
  const span_ms = to_ms - from_ms;
  const step_ms = (TICK_STEPS_H.find((step) => span_ms / (step * SHORTEST_MS) <= MOST_TICKS) ?? 240) * SHORTEST_MS;
  const first = Math.ceil(from_ms / step_ms) * step_ms;
  const n = Math.floor((to_ms - first) / step_ms) + 1;
  return Array.from({ length: Math.max(0, n) }, (_, i) => first + i * step_ms).map((time) => ({
    x: (time - from_ms) / span_ms,
    text: new Date(time).toISOString().slice(11, 16),
  }));
}

/** A number holds until the next mark: steps, not slopes. @param {Point[]} points @returns {Point[]} */
function stepped(points) {
  return points.flatMap((point, i) => (i === 0 ? [point] : [[point[0], points[i - 1][1]], point]));
}

/**
 * @param {import("./coverage.js").Coverage} coverage
 * @param {import("./shapes.js").State} state
 * @param {number} now_ms
 * @returns {HistoryShape}
 */
export function historyShape(coverage, state, now_ms) {
  const { history, searched, imaged } = coverage;
  const { plan, campaign } = state;
  const opened = campaign.opened_at ? Date.parse(campaign.opened_at) : now_ms;
  const from_ms = Math.min(opened, now_ms, ...history.slice(0, 1).map((mark) => Date.parse(mark.at)));
  const until = campaign.status === "closed" ? now_ms : Math.max(now_ms, endOfPlan(state));
  const to_ms = Math.max(until, from_ms + SHORTEST_MS);
  const isForecast = plan !== null && until > now_ms;
  const highest = Math.max(imaged, searched, isForecast ? plan.searched_expected : 0);
  const top = TOPS.find((part) => part >= highest) ?? 1;
  const x = (/** @type {number} */ time_ms) => (time_ms - from_ms) / (to_ms - from_ms);
  const line = (/** @type {"imaged" | "searched"} */ name) =>
    stepped([
      /** @type {Point} */ ([0, 0]),
      ...history.map((mark) => /** @type {Point} */ ([x(Date.parse(mark.at)), mark[name] / top])),
      /** @type {Point} */ ([x(now_ms), coverage[name] / top]),
    ]);
  return {
    from_ms,
    to_ms,
    top,
    now_x: x(now_ms),
    imaged: line("imaged"),
    searched: line("searched"),
    expected: isForecast
      ? [[x(now_ms), searched / top], [x(until), Math.max(searched, plan.searched_expected) / top]]
      : [],
    text: `searched ${percentText(searched)} %, imaged ${percentText(imaged)} %${
      isForecast ? `, ${percentText(plan.searched_expected)} % searched expected at the end of the plan` : ""
    }`,
  };
}
