/**
 * How each tile is drawn: its state from offers, claims and frames, and whether it is mine.
 *
 * @typedef {import("./shapes.js").State} State
 * @typedef {import("./shapes.js").ClaimShown} ClaimShown
 * @typedef {"open" | "offered" | "held" | "met" | "lapsed"} Line
 * @typedef {object} TileLine
 * @property {Line} line
 * @property {boolean} is_mine    held by or offered to the reader
 * @property {boolean} has_frame    a counted frame of it is on the map with its true footprint
 * @property {number} starts_ms    when the first offer of it begins; infinite without one
 */

/**
 * A held claim says most, then a met one, then an offer, then a lapse. A released one leaves the tile open.
 */
const RANK = { open: 0, released: 0, lapsed: 1, offered: 2, met: 3, held: 4 };

/** @type {TileLine} */
const OPEN = { line: "open", is_mine: false, has_frame: false, starts_ms: Infinity };

/**
 * @param {State} state
 * @param {number | null} me the reader's observer id
 * @returns {Map<number, TileLine>} tiles that are not simply open
 */
export function tileLines(state, me) {
  /** @type {Map<number, TileLine>} */
  const lines = new Map();
  const raise = (/** @type {number} */ tile, /** @type {Line} */ line, /** @type {number} */ observer) => {
    const known = lines.get(tile) ?? { ...OPEN };
    const isMine = observer === me && (line === "held" || line === "offered");
    const higher = RANK[line] > RANK[known.line] ? line : known.line;
    lines.set(tile, { ...known, line: higher, is_mine: known.is_mine || isMine });
  };
  for (const offer of state.offers) {
    raise(offer.tile, "offered", offer.observer);
    const known = /** @type {TileLine} */ (lines.get(offer.tile));
    known.starts_ms = Math.min(known.starts_ms, Date.parse(offer.starts_at));
  }
  for (const claim of Object.values(state.claims)) {
    if (claim.state !== "released") raise(claim.tile, claim.state, claim.observer);
  }
  return withFrames(lines, state);
}

/** @param {Map<number, TileLine>} lines @param {State} state */
function withFrames(lines, state) {
  for (const frame of Object.values(state.frames)) {
    const line = frame.tile === null || frame.state !== "counted" ? null : lines.get(frame.tile);
    if (line) line.has_frame = true;
  }
  return lines;
}

/** Counts of members by what they last said. @param {State} state */
export function statusCounts(state) {
  const counts = { in: 0, clouded: 0, out: 0, silent: 0 };
  for (const { status } of Object.values(state.observers)) counts[status] += 1;
  return counts;
}
