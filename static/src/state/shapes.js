/**
 * What the server's JSON looks like; the same words as campaigns/events/state.py.
 *
 * @typedef {object} CampaignShown
 * @property {string} id
 * @property {string} title
 * @property {"draft" | "live" | "closed"} status
 * @property {boolean} is_rehearsal
 * @property {boolean} is_public
 * @property {string} kind
 * @property {string} event_time
 * @property {string | null} opened_at
 * @property {string | null} closed_at
 * @property {{preset: string, label: string, first_light_at?: string | null}} source
 *
 * @typedef {object} RegionShown
 * @property {number} revision
 * @property {number} order
 * @property {number} n_pixels
 * @property {number} outside
 * @property {Record<string, number>} area_deg2
 * @property {{ra_deg: number, dec_deg: number}} peak
 * @property {string[]} notes
 * @property {number | null} overlap
 * @property {ChangeShown | null} change
 *
 * @typedef {object} ChangeShown
 * @property {"added" | "replaced" | "switched on" | "switched off" | "retracted"} way
 * @property {string} said
 * @property {Record<string, number>} area_before_deg2
 * @property {number} n_tiles_new
 * @property {number[]} tiles_dropped
 * @property {number[]} tiles_back
 *
 * @typedef {{name: string, latitude_deg: number, longitude_deg: number}} SiteShown
 *
 * @typedef {object} InstrumentShown
 * @property {number} id
 * @property {string} name
 * @property {number} width_deg
 * @property {number} height_deg
 * @property {string} kind
 * @property {string} band
 * @property {number} tile_width_deg
 * @property {number} tile_height_deg
 *
 * @typedef {object} ObserverShown
 * @property {string} name
 * @property {"silent" | "in" | "clouded" | "out"} status
 * @property {SiteShown[]} sites
 * @property {InstrumentShown[]} instruments
 *
 * @typedef {object} TileShown
 * @property {number} ra_deg
 * @property {number} dec_deg
 * @property {number} width_deg
 * @property {number} height_deg
 * @property {number} probability
 * @property {number} seats
 * @property {boolean} is_dropped
 *
 * @typedef {object} PlanShown
 * @property {string} made_at
 * @property {number} searched_expected
 * @property {number} searched_bound
 * @property {number} certificate
 * @property {number} n_observers
 * @property {number} n_assignments
 * @property {number} seconds
 * @property {{observer: number, reason: string}[]} unassigned
 *
 * @typedef {object} OfferShown
 * @property {number} observer
 * @property {number} instrument
 * @property {number} tile
 * @property {string} starts_at
 * @property {string} ends_at
 * @property {number} gain
 *
 * @typedef {object} ClaimShown
 * @property {number} tile
 * @property {number} seat
 * @property {number} observer
 * @property {number} instrument
 * @property {"held" | "met" | "released" | "lapsed"} state
 * @property {string} held_at
 * @property {string} starts_at
 * @property {string} until
 * @property {string | null} ended_at
 *
 * @typedef {object} FrameShown
 * @property {number} observer
 * @property {number} instrument
 * @property {number | null} tile
 * @property {"counted" | "withdrawn"} state
 * @property {import("../sky/footprint.js").FootprintJson} footprint
 * @property {string} mid_time
 * @property {number} duration_s
 * @property {string} band
 * @property {number | null} limit_mag
 * @property {string} limit_kind
 * @property {number | null} m_eff
 * @property {boolean} is_examined
 * @property {string} examined_way
 * @property {string} reported_at
 *
 * @typedef {{seq: number, at: string, said: string}} Recent
 *
 * @typedef {object} State
 * @property {CampaignShown} campaign
 * @property {RegionShown | null} region
 * @property {Record<string, ObserverShown>} observers
 * @property {Record<string, TileShown>} tiles
 * @property {PlanShown | null} plan
 * @property {OfferShown[]} offers
 * @property {Record<string, ClaimShown>} claims
 * @property {Record<string, FrameShown>} frames
 * @property {Recent[]} recent
 *
 * @typedef {{seq: number, kind: string, at: string, said: string, payload: any}} Event
 */

export {};
