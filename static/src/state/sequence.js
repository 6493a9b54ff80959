/** Which of the events that came may be applied, and whether some are missing. */

import { apply } from "./apply.js";

/**
 * @typedef {import("./shapes.js").Event} Event
 * @typedef {{seq: number, state: import("./shapes.js").State}} Held
 */

/**
 * @param {number} seq the last one applied
 * @param {Event[]} events
 * @returns {{next: Event[], is_gap: boolean}}
 */
export function inOrder(seq, events) {
  const later = events.filter((event) => event.seq > seq).sort((a, b) => a.seq - b.seq);
  /** @type {Event[]} */
  const next = [];
  let last = seq;
  for (const event of later) {
    if (event.seq === last) continue;
    if (event.seq !== last + 1) return { next, is_gap: true };
    next.push(event);
    last = event.seq;
  }
  return { next, is_gap: false };
}

/** @param {Held} held @param {Event[]} events @returns {{held: Held, applied: Event[], is_gap: boolean}} */
export function advanced(held, events) {
  const { next, is_gap } = inOrder(held.seq, events);
  const state = next.reduce(apply, held.state);
  return { held: { seq: held.seq + next.length, state }, applied: next, is_gap };
}
