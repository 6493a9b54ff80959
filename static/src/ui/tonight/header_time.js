/** When a frame was taken, by its header; and which whole hours would set a wrong clock right. Pure. */

import { decText, raText } from "../../sky/sexagesimal.js";
import { utcTyped } from "../shell/clock.js";

/** @typedef {Record<string, string|number>} Header */

const MJD_OF_UNIX_EPOCH = 40587;
const DAY_MS = 86_400_000;

/** @param {string|number|undefined} value @returns {number|null} */
function timeMs(value) {
  if (typeof value === "number") return (value - MJD_OF_UNIX_EPOCH) * DAY_MS;
  if (typeof value !== "string" || !value.includes("T")) return null;
  const time_ms = Date.parse(/Z$/.test(value) ? value : `${value}Z`);
  return Number.isNaN(time_ms) ? null : time_ms;
}

/** @param {Header} header @returns {number|null} seconds */
export function headerDuration(header) {
  const value = header.EXPTIME ?? header.EXPOSURE ?? header.XPOSURE ?? header.EXP_TIME ?? header.TELAPSE;
  return typeof value === "number" && value > 0 ? value : null;
}

/** Middle of the exposure: stated, or start plus half of it. @param {Header} header @returns {number|null} */
export function headerMidTime(header) {
  const middle = timeMs(header["DATE-AVG"]) ?? timeMs(header["MJD-AVG"]);
  if (middle !== null) return middle;
  const start = timeMs(header["DATE-OBS"]) ?? timeMs(header["DATE-BEG"]) ?? timeMs(header["MJD-OBS"]);
  return start === null ? null : start + (headerDuration(header) ?? 0) * 500;
}

/** Fields for typing by hand, as far as a header fills them. @param {Header} header @returns {Record<string, string>} */
export function typedFromHeader(header) {
  const middle = headerMidTime(header);
  const duration = headerDuration(header);
  const isPointed = typeof header.CRVAL1 === "number" && typeof header.CRVAL2 === "number";
  return {
    ...(middle === null ? {} : { mid_time: utcTyped(new Date(middle)) }),
    ...(duration === null ? {} : { duration_s: String(duration) }),
    ...(typeof header.FILTER === "string" ? { band: header.FILTER.slice(0, 12) } : {}),
    ...(isPointed ? { ra_deg: raText(Number(header.CRVAL1)), dec_deg: decText(Number(header.CRVAL2)) } : {}),
  };
}

/**
 * Whole-hour shifts to offer: this device's own difference from UTC first, then the small ones.
 * @param {number[]} shifts_h @param {number} offset_h    of the device, east positive
 */
export function offeredShifts(shifts_h, offset_h, most = 4) {
  const isOwn = (/** @type {number} */ shift) => (shift === -offset_h ? 0 : 1);
  return [...shifts_h].sort((a, b) => isOwn(a) - isOwn(b) || Math.abs(a) - Math.abs(b)).slice(0, most);
}
