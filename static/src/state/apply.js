/**
 * The law of events: apply(state before, event) is the state after. Pure; the twin is
 * campaigns/events/apply.py.
 */

/** @typedef {import("./shapes.js").State} State */
/** @typedef {import("./shapes.js").Event} Event */

const N_RECENT = 40;

/**
 * @template {"observers" | "claims" | "frames"} P
 * @param {State} state
 * @param {P} part
 * @param {string | number} key
 * @param {any} value
 * @returns {State}
 */
function set(state, part, key, value) {
  return { ...state, [part]: { ...state[part], [key]: value } };
}

/**
 * @param {State} state
 * @param {"observers" | "claims" | "frames"} part
 * @param {string | number} key
 * @param {object} changes
 */
function amend(state, part, key, changes) {
  return set(state, part, key, { ...state[part][key], ...changes });
}

/** @param {State} state @param {any} payload */
function held(state, { id, claim }) {
  const offers = state.offers.filter(
    (offer) => offer.observer !== claim.observer || offer.tile !== claim.tile,
  );
  return { ...set(state, "claims", id, claim), offers };
}

/** @param {string} ending @returns {(state: State, payload: any) => State} */
function ended(ending) {
  return (state, { id, ended_at }) => amend(state, "claims", id, { state: ending, ended_at });
}

/** @param {State} state @param {any} payload */
function frame(state, payload) {
  return set(state, "frames", payload.number, payload.frame);
}

/** @param {State} state @param {any} payload */
function examined(state, { number, ...changes }) {
  return amend(state, "frames", number, changes);
}

/** @param {State} state @param {any} payload */
function revised(state, { region, tiles }) {
  const moved = Object.entries(tiles).map(([number, change]) => [number, { ...state.tiles[number], ...change }]);
  return { ...state, region, tiles: { ...state.tiles, ...Object.fromEntries(moved) } };
}

/** @type {Record<string, (state: State, payload: any) => State>} */
const CHANGES = {
  "campaign.opened": (state, { opened_at }) => ({
    ...state,
    campaign: { ...state.campaign, status: "live", opened_at },
  }),
  "campaign.closed": (state, { closed_at }) => ({
    ...state,
    campaign: { ...state.campaign, status: "closed", closed_at },
  }),
  "region.revised": revised,
  "tiles.laid": (state, { tiles }) => ({ ...state, tiles: { ...state.tiles, ...tiles } }),
  "observer.joined": (state, { id, observer }) => set(state, "observers", id, observer),
  "observer.status": (state, { observer, status }) => amend(state, "observers", observer, { status }),
  "plan.made": (state, { plan, offers }) => ({ ...state, plan, offers }),
  "claim.held": held,
  "claim.extended": (state, { id, until }) => amend(state, "claims", id, { until }),
  "claim.met": ended("met"),
  "claim.released": ended("released"),
  "claim.lapsed": ended("lapsed"),
  "frame.counted": frame,
  "frame.examined": examined,
  "frame.corrected": frame,
  "frame.withdrawn": (state, { number }) => amend(state, "frames", number, { state: "withdrawn" }),
};

/** Kinds that this page understands. */
export const KINDS = Object.freeze(Object.keys(CHANGES));

/** @param {State} state @param {Event} event @returns {State} */
export function apply(state, event) {
  const change = CHANGES[event.kind];
  if (!change) throw new UnknownEvent(event.kind);
  const line = { seq: event.seq, at: event.at, said: event.said };
  const after = change(state, event.payload);
  return { ...after, recent: [...state.recent, line].slice(-N_RECENT) };
}

/** A server newer than this page: only a fresh page helps. */
export class UnknownEvent extends Error {
  /** @param {string} kind */
  constructor(kind) {
    super(`This page does not know the event "${kind}". Reload it.`);
    this.kind = kind;
  }
}
