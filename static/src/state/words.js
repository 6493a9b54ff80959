/** Numbers and times as the Board writes them. */

/**
 * A share with one decimal: "41.8". Never "100.0" before all is done, never "0.0" for something.
 * @param {number} share
 * @returns {string}
 */
export function percentText(share) {
  const percent = share * 100;
  if (percent > 99.9 && percent < 100) return "99.9";
  if (percent > 0 && percent < 0.05) return "< 0.1";
  return percent.toFixed(1);
}

/** Small shares, as of one tile, with two digits that mean something. @param {number} share */
export function smallPercentText(share) {
  const percent = share * 100;
  if (percent === 0) return "0 %";
  if (percent < 0.01) return "< 0.01 %";
  return `${percent < 10 ? percent.toFixed(2) : percent.toFixed(1)} %`;
}

/** A certificate is rounded down: it is a promise. @param {number} share */
export function promiseText(share) {
  return `${Math.floor(share * 100 + 1e-9)} %`;
}

/** "22:17" of an ISO time in UTC. @param {string} iso */
export function utcMinute(iso) {
  return new Date(iso).toISOString().slice(11, 16);
}

/** "22:17" today, "15 Mar 04:10" on another day, in UTC. @param {string} iso @param {number} now_ms */
export function momentText(iso, now_ms) {
  const at = new Date(iso);
  const isToday = at.toISOString().slice(0, 10) === new Date(now_ms).toISOString().slice(0, 10);
  if (isToday) return utcMinute(iso);
  const day = at.toLocaleDateString("en-GB", { day: "numeric", month: "short", timeZone: "UTC" });
  return `${day} ${utcMinute(iso)}`;
}

/** "03:41" between two instants, "2 d 03:41" after a day. @param {number} span_ms */
export function spanText(span_ms) {
  const minutes = Math.floor(Math.abs(span_ms) / 60_000);
  const clock = `${String(Math.floor(minutes / 60) % 24).padStart(2, "0")}:${String(minutes % 60).padStart(2, "0")}`;
  const days = Math.floor(minutes / 1440);
  return `${span_ms < 0 ? "−" : ""}${days > 0 ? `${days} d ` : ""}${clock}`;
}

/** "3.2° × 2.1°" or in arc minutes when small. @param {number} width_deg @param {number} height_deg */
export function sizeText(width_deg, height_deg) {
  const isSmall = Math.max(width_deg, height_deg) < 1;
  const side = (/** @type {number} */ deg) => (isSmall ? `${(deg * 60).toFixed(0)}′` : `${deg.toFixed(1)}°`);
  return `${side(width_deg)} × ${side(height_deg)}`;
}

/** "1,512 deg²" @param {number} area_deg2 */
export function areaText(area_deg2) {
  const digits = area_deg2 < 10 ? 1 : 0;
  return `${area_deg2.toLocaleString("en", { maximumFractionDigits: digits })} deg²`;
}

/** "1 frame", "3 frames" @param {number} count @param {string} word */
export function countText(count, word) {
  return `${count.toLocaleString("en")} ${word}${count === 1 ? "" : "s"}`;
}
