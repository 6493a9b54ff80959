/** A small state for tests, made by hand. */

/** @returns {any} */
export function aState() {
  return {
    campaign: {
      id: "ember", title: "Ember Ring", status: "live", is_rehearsal: true, is_public: true, kind: "neutrino burst",
      event_time: "2027-03-14T05:06:07Z", opened_at: "2027-03-14T05:10:00Z", closed_at: null,
      source: { preset: "steady", label: "steady" },
    },
    region: {
      revision: 1, order: 8, n_pixels: 2, outside: 0.001, area_deg2: { 50: 1, 90: 2, 99: 3 },
      peak: { ra_deg: 10, dec_deg: 20 }, notes: [],
    },
    observers: {
      7: { name: "Marl Hill", status: "in", sites: [{ name: "hill", latitude_deg: 50, longitude_deg: 0 }], instruments: [] },
      8: { name: "Otter Bay", status: "silent", sites: [], instruments: [] },
    },
    tiles: {
      1: { ra_deg: 10, dec_deg: 20, width_deg: 2, height_deg: 2, probability: 0.3, seats: 1, is_dropped: false },
      2: { ra_deg: 12.2, dec_deg: 20, width_deg: 2, height_deg: 2, probability: 0.2, seats: 1, is_dropped: false },
      3: { ra_deg: 10, dec_deg: 20, width_deg: 1, height_deg: 1, probability: 0.1, seats: 1, is_dropped: false },
    },
    plan: null,
    offers: [],
    claims: {},
    frames: {},
    recent: [],
  };
}

/** @param {number} tile @param {number} observer @param {string} state */
export function aClaim(tile, observer, state = "held") {
  return {
    tile, seat: 1, observer, instrument: 1, state, held_at: "2027-03-14T20:00:00Z",
    starts_at: "2027-03-14T20:10:00Z", until: "2027-03-14T20:40:00Z",
    ended_at: state === "held" ? null : "2027-03-14T20:30:00Z",
  };
}

/** @param {number} tile @param {number} observer */
export function anOffer(tile, observer) {
  return {
    observer, instrument: 1, tile, starts_at: "2027-03-14T21:00:00Z", ends_at: "2027-03-14T21:10:00Z", gain: 0.01,
  };
}

/** @param {object} more */
export function aFrame(more = {}) {
  return {
    observer: 7, instrument: 1, tile: 1, state: "counted",
    footprint: { shape: "polygon", corners_deg: [[8.9, 18.9], [11.1, 18.9], [11.1, 21.1], [8.9, 21.1]] },
    mid_time: "2027-03-14T20:20:00Z", duration_s: 60, band: "r", limit_mag: 17.3, limit_kind: "5 sigma",
    m_eff: 17.3, is_examined: true, examined_way: "image by eye", reported_at: "2027-03-14T20:30:00Z", ...more,
  };
}

/** @param {number} seq @param {string} kind @param {any} payload */
export function anEvent(seq, kind, payload) {
  return { seq, kind, at: "2027-03-14T20:30:00Z", said: `event ${seq}`, payload };
}
