/** How high a tile stands through the night, and until when it can be used. Pure. */

import { altitudeDeg } from "../../sky/site_sky.js";

/** @typedef {{at_ms: number, altitude_deg: number}[]} Curve */
/** @typedef {{latitude_deg: number, longitude_deg: number, min_altitude_deg: number}} Site */

const STEP_MS = 10 * 60_000;

/** A curve as the server sends it. @param {{at: string, altitude_deg: number}[]} said @returns {Curve} */
export function curveFrom(said) {
  return said.map(({ at, altitude_deg }) => ({ at_ms: Date.parse(at), altitude_deg }));
}

/** A curve computed here, for what moves or is not in the answer. @param {Site} site @param {(time_ms: number) => {ra_deg: number, dec_deg: number}} placeAt @param {{from_ms: number, to_ms: number}} span @returns {Curve} */
export function curveOver(site, placeAt, { from_ms, to_ms }) {
  const count = Math.max(2, Math.ceil((to_ms - from_ms) / STEP_MS) + 1);
  return Array.from({ length: count }, (_, i) => {
    const at_ms = from_ms + ((to_ms - from_ms) * i) / (count - 1);
    return { at_ms, altitude_deg: altitudeDeg(site, placeAt(at_ms), at_ms) };
  });
}

/** The server's points for the night, and our own for the twilight on both sides of it. @param {Curve} said @param {Curve} around @returns {Curve} */
export function withMargins(said, around) {
  const [first, last] = [said[0].at_ms, said[said.length - 1].at_ms];
  return [...around.filter(({ at_ms }) => at_ms < first), ...said, ...around.filter(({ at_ms }) => at_ms > last)];
}

/** Altitude at a time between two known ones; null outside. @param {Curve} curve @param {number} time_ms */
export function altitudeAt(curve, time_ms) {
  const after = curve.findIndex(({ at_ms }) => at_ms >= time_ms);
  if (after < 0) return null;
  if (after === 0) return curve[0].at_ms === time_ms ? curve[0].altitude_deg : null;
  const [a, b] = [curve[after - 1], curve[after]];
  const share = (time_ms - a.at_ms) / (b.at_ms - a.at_ms);
  return a.altitude_deg + share * (b.altitude_deg - a.altitude_deg);
}

/** First time after `from_ms` at which the curve falls through an altitude; null when it stays above. @param {Curve} curve @param {number} from_ms @param {number} least_deg */
export function fallsBelow(curve, from_ms, least_deg) {
  for (let i = 1; i < curve.length; i += 1) {
    const [a, b] = [curve[i - 1], curve[i]];
    if (b.at_ms <= from_ms || a.altitude_deg < least_deg || b.altitude_deg >= least_deg) continue;
    const share = (a.altitude_deg - least_deg) / (a.altitude_deg - b.altitude_deg);
    const at_ms = a.at_ms + share * (b.at_ms - a.at_ms);
    if (at_ms > from_ms) return at_ms;
  }
  return null;
}

/**
 * Until when the tile can be used, and what ends it.
 * @param {Curve} curve
 * @param {{now_ms: number, dawn_ms: number|null, least_deg: number}} limits
 * @returns {{until_ms: number, why: "it sets"|"the light comes"}|null}
 */
export function usableUntil(curve, { now_ms, dawn_ms, least_deg }) {
  const sets_ms = fallsBelow(curve, now_ms, least_deg);
  if (sets_ms !== null && (dawn_ms === null || sets_ms <= dawn_ms)) return { until_ms: sets_ms, why: "it sets" };
  return dawn_ms === null || dawn_ms <= now_ms ? null : { until_ms: dawn_ms, why: "the light comes" };
}

/** @param {Curve} curve @param {number} time_ms @returns {"rising"|"sinking"|"highest"} */
export function trend(curve, time_ms) {
  const before = altitudeAt(curve, time_ms - STEP_MS / 2) ?? altitudeAt(curve, time_ms);
  const after = altitudeAt(curve, time_ms + STEP_MS / 2) ?? altitudeAt(curve, time_ms);
  if (before === null || after === null || Math.abs(after - before) < 0.2) return "highest";
  return after > before ? "rising" : "sinking";
}
