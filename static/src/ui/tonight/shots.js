/** The tiles of my night in one list: held, offered, and the best of the moment. Pure. */

/** @typedef {"held"|"offered"|"best"|"alternative"} Standing */

/**
 * @typedef {object} Shot
 * @property {number} tile
 * @property {number} ra_deg
 * @property {number} dec_deg
 * @property {number} width_deg
 * @property {number} height_deg
 * @property {Standing} standing
 * @property {number|null} claim    its id, when held
 * @property {Date} starts_at
 * @property {Date} ends_at    of the series, or of the lease when held
 * @property {number|null} gain
 * @property {string} reason
 * @property {number} exposure_s
 * @property {number} n_exposures
 * @property {number|null} limit_forecast_mag
 */

/**
 * @typedef {object} TonightAnswer
 * @property {any[]} claims
 * @property {any[]} offers
 * @property {any|null} best
 * @property {any[]} alternatives
 * @property {string|null} why_not
 * @property {Record<string, {at: string, altitude_deg: number}[]>} curves
 * @property {{dusk: string|null, dawn: string|null}|null} night
 */

/** @typedef {{width_deg: number, height_deg: number, exposure_s: number, n_exposures: number}} Gear */
/** @typedef {Record<string, {ra_deg: number, dec_deg: number, width_deg: number, height_deg: number, probability: number}>} Tiles */

/**
 * One shot from whatever the server said of its tile.
 * @param {any} said @param {Standing} standing @param {Tiles} tiles @param {Gear} gear
 * @returns {Shot|null}    null while the tile itself is not known yet
 */
function shotOf(said, standing, tiles, gear) {
  const tile = tiles[said.tile];
  const ra_deg = said.ra_deg ?? tile?.ra_deg;
  if (ra_deg === undefined) return null;
  return {
    tile: said.tile,
    ra_deg,
    dec_deg: said.dec_deg ?? tile?.dec_deg,
    width_deg: tile?.width_deg ?? gear.width_deg,
    height_deg: tile?.height_deg ?? gear.height_deg,
    standing,
    claim: standing === "held" ? said.id : null,
    starts_at: new Date(said.starts_at),
    ends_at: new Date(said.until ?? said.ends_at ?? said.starts_at),
    gain: said.gain ?? null,
    reason: said.reason ?? "",
    exposure_s: said.exposure_s ?? gear.exposure_s,
    n_exposures: said.n_exposures ?? gear.n_exposures,
    limit_forecast_mag: said.limit_forecast_mag ?? null,
  };
}

/** @param {Shot} a @param {Shot} b */
function byStart(a, b) {
  return a.starts_at.getTime() - b.starts_at.getTime() || a.tile - b.tile;
}

/** What was said of the same tile before fills the gaps. @param {Shot} shot @param {Map<number, any>} forecasts */
function withForecast(shot, forecasts) {
  const same = forecasts.get(shot.tile);
  if (!same) return shot;
  return {
    ...shot,
    gain: shot.gain ?? same.gain ?? null,
    limit_forecast_mag: shot.limit_forecast_mag ?? same.limit_forecast_mag ?? null,
  };
}

/** Keeps the newest forecast of every tile: a tile that is held is no longer suggested. @param {TonightAnswer} tonight @param {Map<number, any>} forecasts */
export function keepForecasts(tonight, forecasts) {
  for (const one of [tonight.best, ...tonight.alternatives]) if (one) forecasts.set(one.tile, one);
}

/**
 * @typedef {object} Night
 * @property {Shot[]} held    in order of their start
 * @property {Shot[]} offered    in order; a tile may come back for another visit
 * @property {Shot[]} suggested    the best now, then its alternatives, without what is held
 */

/**
 * @param {TonightAnswer} tonight @param {Tiles} tiles @param {Gear} gear
 * @param {Map<number, any>} [forecasts]    of earlier answers
 * @returns {Night}
 */
export function nightOf(tonight, tiles, gear, forecasts = new Map()) {
  const shots = (/** @type {any[]} */ said, /** @type {Standing} */ standing) =>
    said.flatMap((one) => shotOf(one, standing, tiles, gear) ?? []).map((shot) => withForecast(shot, forecasts));
  const held = shots(tonight.claims, "held").sort(byStart);
  const isHeld = (/** @type {Shot} */ { tile }) => held.some((shot) => shot.tile === tile);
  const best = shots(tonight.best ? [tonight.best] : [], tonight.best?.offered ? "offered" : "best");
  const suggested = [...best, ...shots(tonight.alternatives, "alternative")].filter((shot) => !isHeld(shot));
  const offered = shots(tonight.offers, "offered").sort(byStart);
  return { held, offered, suggested };
}

/** @param {Shot} shot @param {Shot} other */
function isSame(shot, other) {
  return shot.tile === other.tile && shot.starts_at.getTime() === other.starts_at.getTime();
}

/**
 * The one for the card: the chosen one while it lasts (its tile, when its start has moved); else what
 * is held; else the best now; else the next offer.
 * @param {Night} night @param {Shot|null} chosen
 * @returns {Shot|null}
 */
export function shotForCard({ held, offered, suggested }, chosen) {
  const all = [...held, ...suggested, ...offered];
  const heldNow = chosen && held.find(({ tile }) => tile === chosen.tile);
  const wanted = chosen && (heldNow ?? all.find((shot) => isSame(shot, chosen)) ?? all.find(({ tile }) => tile === chosen.tile));
  return wanted ?? all[0] ?? null;
}

/**
 * What follows tonight: everything promised or offered before the light comes, but the card's own.
 * @param {Night} night @param {Shot|null} current @param {number|null} dawn_ms
 */
export function restOfNight({ held, offered }, current, dawn_ms) {
  // The best tile now, when the plan has it for later: taking it now is that visit.
  const first = offered.find(({ tile, starts_at }) => tile === current?.tile && starts_at >= current.starts_at);
  return [...held, ...offered.filter(({ tile }) => !held.some((shot) => shot.tile === tile))]
    .filter((shot) => dawn_ms === null || shot.starts_at.getTime() < dawn_ms)
    .filter((shot) => !(current && isSame(shot, current)) && shot !== first)
    .sort(byStart);
}

/** Suggested tiles but the card's own. @param {Night} night @param {Shot|null} current */
export function otherTiles({ suggested }, current) {
  return suggested.filter(({ tile }) => tile !== current?.tile);
}
