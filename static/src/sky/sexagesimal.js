/** Coordinates as people read them: 18h 12m 40s, −21° 04′ 10″. */

import { wrapRaDeg } from "./angles.js";

/** @param {number} value @param {number} width */
function padded(value, width = 2) {
  return String(value).padStart(width, "0");
}

/** @param {number} ra_deg @param {"second" | "minute"} finest @returns {string} */
export function raText(ra_deg, finest = "second") {
  const units = finest === "second" ? 86400 : 1440;
  const whole = Math.round((wrapRaDeg(ra_deg) / 360) * units) % units;
  if (finest === "minute") return `${padded(Math.floor(whole / 60))}h ${padded(whole % 60)}m`;
  const minutes = Math.floor(whole / 60);
  return `${padded(Math.floor(minutes / 60))}h ${padded(minutes % 60)}m ${padded(whole % 60)}s`;
}

/** @param {number} dec_deg @param {"second" | "minute"} finest @returns {string} */
export function decText(dec_deg, finest = "second") {
  const sign = dec_deg < 0 ? "−" : "+";
  const units = finest === "second" ? 3600 : 60;
  const whole = Math.round(Math.abs(dec_deg) * units);
  if (finest === "minute") return `${sign}${padded(Math.floor(whole / 60))}° ${padded(whole % 60)}′`;
  const minutes = Math.floor(whole / 60);
  return `${sign}${padded(Math.floor(minutes / 60))}° ${padded(minutes % 60)}′ ${padded(whole % 60)}″`;
}

/** @param {{ra_deg: number, dec_deg: number}} place @returns {string} */
export function decimalText({ ra_deg, dec_deg }) {
  const sign = dec_deg < 0 ? "−" : "+";
  return `${wrapRaDeg(ra_deg).toFixed(4)}° ${sign}${Math.abs(dec_deg).toFixed(4)}°`;
}
