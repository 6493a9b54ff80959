/** What the Log shows: events by what they are about, frames with how they count. */

import { isBeforeLight } from "./first_light.js";

/** Groups of kinds, by the word before the dot. @type {Record<string, string[]>} */
export const GROUPS = {
  all: [],
  claims: ["claim"],
  frames: ["frame"],
  people: ["observer"],
  "plan and region": ["plan", "region", "tiles", "campaign"],
};

/** @typedef {import("./shapes.js").Event} Event */

/** Events of a group, newest first. @param {Event[]} events @param {string} group @returns {Event[]} */
export function eventsOf(events, group) {
  const stems = GROUPS[group] ?? [];
  const wanted = stems.length === 0 ? events : events.filter(({ kind }) => stems.includes(kind.split(".")[0]));
  return [...wanted].reverse();
}

/**
 * How a frame counts, in words.
 * @param {import("./shapes.js").FrameShown} frame
 * @param {import("./shapes.js").CampaignShown["source"]} [source]
 * @returns {string}
 */
export function countsAs(frame, source) {
  if (frame.state === "withdrawn") return "withdrawn";
  if (isBeforeLight(frame, source)) return "imaged: before any light could have arrived";
  if (!frame.is_examined) return "imaged: nobody has examined it";
  if (frame.m_eff === null) return "imaged: no limit";
  return `searched to ${frame.m_eff.toFixed(1)}`;
}

/**
 * Frames, newest number first.
 * @param {import("./shapes.js").State} state
 * @returns {{number: number, frame: import("./shapes.js").FrameShown}[]}
 */
export function framesNewestFirst({ frames }) {
  return Object.entries(frames)
    .map(([number, frame]) => ({ number: Number(number), frame }))
    .sort((a, b) => b.number - a.number);
}
