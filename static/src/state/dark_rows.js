/** The dark strip: when each site is dark in the next 24 hours, as shares of the strip. */

/**
 * @typedef {{site: string, observer: number | string, intervals: [string, string][]}} SiteDarkness
 * @typedef {{site: string, name: string, bars: [number, number][], is_clouded: boolean, is_dark: boolean}} DarkRow
 */

const HOURS_MS = 24 * 3_600_000;

/**
 * Rows in the order in which night comes, those in darkness first.
 * @param {SiteDarkness[]} sites
 * @param {import("./shapes.js").State} state
 * @param {number} from_ms    left end of the strip
 * @param {number} now_ms
 * @returns {DarkRow[]}
 */
export function darkRows(sites, state, from_ms, now_ms) {
  const share = (/** @type {string} */ iso) => Math.min(1, Math.max(0, (Date.parse(iso) - from_ms) / HOURS_MS));
  const now = (now_ms - from_ms) / HOURS_MS;
  return sites
    .map(({ site, observer, intervals }) => {
      const bars = intervals.map(([a, b]) => /** @type {[number, number]} */ ([share(a), share(b)])).filter(([a, b]) => b > a);
      const shown = state.observers[observer];
      return {
        site,
        name: shown?.name ?? "",
        bars,
        is_clouded: shown?.status === "clouded",
        is_dark: bars.some(([a, b]) => a <= now && now < b),
      };
    })
    .sort((a, b) => firstDark(a, now) - firstDark(b, now));
}

/** When the row is next dark; sooner is smaller, never is last. @param {DarkRow} row @param {number} now */
function firstDark({ bars }, now) {
  const next = bars.find(([, end]) => end > now);
  if (!next) return 2;
  return next[0] <= now ? next[1] - 1 : next[0];
}

/**
 * Whole hours of UTC on the strip.
 * @param {number} from_ms
 * @param {number} every_h
 * @returns {{x: number, text: string}[]}
 */
export function hourTicks(from_ms, every_h) {
  const step_ms = every_h * 3_600_000;
  const first = Math.ceil(from_ms / step_ms) * step_ms;
  return Array.from({ length: Math.floor(24 / every_h) }, (_, i) => first + i * step_ms).map((time) => ({
    x: (time - from_ms) / HOURS_MS,
    text: new Date(time).toISOString().slice(11, 13),
  }));
}
