/** Times as people read them: UTC, and their own local time under it. */

const two = (/** @type {number} */ value) => String(value).padStart(2, "0");

/** "22:17" in UTC. @param {Date} date */
export function utcClock(date) {
  return `${two(date.getUTCHours())}:${two(date.getUTCMinutes())}`;
}

/** "00:17" by the device's own time. @param {Date} date */
export function localClock(date) {
  return `${two(date.getHours())}:${two(date.getMinutes())}`;
}

/** "22:17 UTC, 00:17 here". @param {Date} date */
export function bothClocks(date) {
  return `${utcClock(date)} UTC, ${localClock(date)} here`;
}

/** "2027-03-14 05:06 UTC". @param {Date} date */
export function utcDay(date) {
  return `${date.toISOString().slice(0, 10)} ${utcClock(date)} UTC`;
}

/** "2027-03-14 05:06:07" in UTC, as typed into fields. @param {Date} date */
export function utcTyped(date) {
  return date.toISOString().slice(0, 19).replace("T", " ");
}

/** Typed UTC back to a Date; null when it cannot be read. @param {string} text @returns {Date|null} */
export function readUtc(text) {
  const match = /^(\d{4}-\d{2}-\d{2})[T ]+(\d{1,2}):(\d{2})(?::(\d{2})(\.\d+)?)?\s*(?:Z|UTC?)?$/i.exec(text.trim());
  if (!match) return null;
  const [, day, hours, minutes, seconds = "00", fraction = ""] = match;
  const date = new Date(`${day}T${hours.padStart(2, "0")}:${minutes}:${seconds}${fraction.slice(0, 4)}Z`);
  return Number.isNaN(date.getTime()) ? null : date;
}

/** "06:40", "1:02:10", or "now" when nothing is left. @param {number} milliseconds */
export function countdown(milliseconds) {
  if (milliseconds <= 0) return "now";
  const seconds = Math.ceil(milliseconds / 1000);
  const hours = Math.floor(seconds / 3600);
  const rest = `${two(Math.floor((seconds % 3600) / 60))}:${two(seconds % 60)}`;
  return hours > 0 ? `${hours}:${rest}` : rest;
}

/** "3 h 20 min", "12 min", "less than a minute". @param {number} milliseconds */
export function span(milliseconds) {
  const minutes = Math.floor(milliseconds / 60000);
  if (minutes < 1) return "less than a minute";
  if (minutes < 60) return `${minutes} min`;
  const hours = Math.floor(minutes / 60);
  if (hours < 48) return `${hours} h ${two(minutes % 60)} min`;
  return `${Math.floor(hours / 24)} days`;
}
