/** From a claim to the fields of a report, and from the typed fields to what is sent. Pure. */

import { decText, raText } from "../../sky/sexagesimal.js";
import { readUtc, utcTyped } from "../shell/clock.js";
import { readAngle, readNumber } from "../shell/numbers.js";

/** @typedef {import("./shots.js").Shot} Shot */

/** The answer's own words (campaigns/rules/examination.py). */
export const WAYS = [
  { value: "", label: "not yet" },
  { value: "eyepiece", label: "at the eyepiece" },
  { value: "image by eye", label: "image by eye" },
  { value: "program against a catalogue", label: "program against a catalogue" },
  { value: "difference imaging", label: "difference imaging" },
];

export const LIMIT_KINDS = [
  { value: "5 sigma", label: "5 sigma" },
  { value: "3 sigma", label: "3 sigma" },
  { value: "50 %", label: "50 % found" },
  { value: "90 %", label: "90 % found" },
  { value: "faintest star seen", label: "faintest star seen" },
  { value: "estimate", label: "estimate" },
];

/**
 * Middle of a series: its start plus half of it; never ahead of now.
 * @param {{starts_ms: number|null, series_s: number, now_ms: number}} series
 */
export function midTimeMs({ starts_ms, series_s, now_ms }) {
  const half_ms = series_s * 500;
  const from_ms = starts_ms === null || starts_ms + 2 * half_ms > now_ms ? now_ms - 2 * half_ms : starts_ms;
  return from_ms + half_ms;
}

/**
 * Fields as they stand before anything is typed.
 * @param {Shot|null} shot
 * @param {{exposure_s: number, n_exposures: number, band: string, kind: string, rotation_deg: number|null}} gear
 * @param {number} now_ms
 * @returns {Record<string, any>}
 */
export function prefilled(shot, gear, now_ms) {
  const exposure_s = shot?.exposure_s ?? gear.exposure_s;
  const n_exposures = shot?.n_exposures ?? gear.n_exposures;
  const starts_ms = shot?.standing === "held" ? shot.starts_at.getTime() : null;
  const series_s = exposure_s * n_exposures;
  const isByEye = gear.kind !== "camera";
  return {
    ra_deg: shot ? raText(shot.ra_deg) : "",
    dec_deg: shot ? decText(shot.dec_deg) : "",
    mid_time: utcTyped(new Date(midTimeMs({ starts_ms, series_s, now_ms }))),
    duration_s: String(series_s),
    band: gear.band,
    rotation_deg: gear.rotation_deg ?? "",
    limit_mag: shot?.limit_forecast_mag?.toFixed(1) ?? "",
    limit_kind: shot?.limit_forecast_mag ? "estimate" : isByEye ? "faintest star seen" : "5 sigma",
    examined_way: "",
    reference_mag: "",
  };
}

/** Limit of a frame from one star in it: m + 2.5 log10(SNR / 5). @param {number} star_mag @param {number} snr */
export function limitFromStar(star_mag, snr) {
  return star_mag + 2.5 * Math.log10(snr / 5);
}

/** Position, time, duration, band: only where no header tells them. @param {Record<string, any>} typed */
function typedFrame(typed) {
  const mid = readUtc(typed.mid_time ?? "");
  return {
    needed: {
      ra_deg: readAngle(typed.ra_deg ?? "", { isHours: true }),
      dec_deg: readAngle(typed.dec_deg ?? "", { isHours: false }),
      mid_time: mid ? mid.toISOString() : null,
      duration_s: readNumber(typed.duration_s),
      band: typed.band || null,
    },
    optional: optionalNumbers(typed, ["rotation_deg"]),
  };
}

/** @param {Record<string, any>} typed @param {string[]} names */
function optionalNumbers(typed, names) {
  return Object.fromEntries(names.filter((name) => typed[name]).map((name) => [name, readNumber(typed[name])]));
}

/**
 * What is sent, and the names of fields that cannot be read.
 * @param {Record<string, any>} typed
 * @param {{instrument: number, claim: number|null, header: Record<string, any>|null, pictures?: Record<string, any>[], mid_time?: string}} about
 *     mid_time: sets the header's own right
 */
export function reportBody(typed, { instrument, claim, header, pictures = [], mid_time }) {
  const frame = header ? { needed: {}, optional: {} } : typedFrame(typed);
  const numbers = optionalNumbers(typed, ["limit_mag", ...(typed.examined_way ? ["reference_mag"] : []), "saturation_mag"]);
  const all = { ...frame.needed, ...frame.optional, ...numbers };
  const unread = Object.keys(all).filter((name) => /** @type {any} */ (all)[name] === null);
  const examined = typed.examined_way ? { is_examined: true, examined_way: typed.examined_way } : { is_examined: false };
  const masks = typed.masks_saturated ? { masks_saturated: true } : {};
  const limit = typed.limit_mag ? { limit_kind: typed.limit_kind } : {};
  const body = { instrument, ...(claim === null ? {} : { claim }), ...(header ? { header } : {}), ...(header && pictures.length > 0 ? { pictures } : {}), ...(header && mid_time ? { mid_time } : {}), ...all, ...limit, ...examined, ...masks };
  return { body, unread };
}
