/**
 * What the Board says of the region: how it came to be, what speaks against it, and its constraints.
 *
 * @typedef {import("./shapes.js").RegionShown} RegionShown
 * @typedef {object} ConstraintShown
 * @property {number} number
 * @property {string} kind
 * @property {string} label
 * @property {boolean} is_on
 * @property {"" | "replaced" | "retracted"} ending
 */

import { areaText } from "./words.js";

/** Below this constraints contradict each other: CONTRADICTORY of skytiles/region/agreement.py. */
const CONTRADICTORY = 0.01;

/** @param {RegionShown} region @returns {{headline: string, notes: string[], is_trouble: boolean}} */
export function regionStory(region) {
  const { change, notes, overlap } = region;
  const area = areaText(region.area_deg2["90"]);
  const headline = change ? `Revision ${region.revision}: ${change.said}` : `As the alert came: 90 % within ${area}.`;
  return {
    headline,
    // What the sentence says already is not said twice.
    notes: notes.filter((note) => !headline.includes(note)),
    is_trouble: overlap !== null && overlap < CONTRADICTORY,
  };
}

/** @param {ConstraintShown} constraint */
export function constraintText({ number, kind, label, is_on, ending }) {
  const what = label ? `${kind} of ${label}` : kind;
  return `${number}: ${what}, ${ending || (is_on ? "in use" : "switched off")}`;
}

/**
 * Which of them may be switched, replaced or taken out: the last one in use must stay.
 * @param {ConstraintShown[]} constraints
 * @param {ConstraintShown} constraint
 */
export function choicesFor(constraints, constraint) {
  if (constraint.ending) return [];
  const n_on = constraints.filter(({ is_on }) => is_on).length;
  const isLast = constraint.is_on && n_on === 1;
  const always = ["replace by a file"];
  if (isLast) return always;
  return [constraint.is_on ? "switch off" : "switch on", ...always, "retract"];
}
