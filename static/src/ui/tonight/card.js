/** One card: the tile to shoot now. */

import { decimalText, decText, raText } from "../../sky/sexagesimal.js";
import { defined } from "../shell/controls.js";
import { bothClocks, countdown } from "../shell/clock.js";
import { copyAndSay } from "../shell/copy.js";
import { element } from "../shell/element.js";
import { fieldSize, perCent } from "../shell/numbers.js";
import { altitudeChart } from "./altitude_chart.js";
import { altitudeAt, trend, usableUntil } from "./altitudes.js";

/** @typedef {import("./shots.js").Shot} Shot */
/** @typedef {import("./altitudes.js").Curve} Curve */

/**
 * @typedef {object} CardSky
 * @property {Curve|null} curve
 * @property {Curve|null} moon
 * @property {number|null} dusk_ms
 * @property {number|null} dawn_ms
 * @property {number} least_deg
 */

/** A free tile that could start within this time is one for now. */
const SOON_MS = 90_000;

/** Line over the countdown, and what it counts to. @param {Shot} shot @param {number} now_ms */
export function countTo(shot, now_ms) {
  const starts_ms = shot.starts_at.getTime();
  const soon_ms = shot.standing === "held" ? 0 : SOON_MS;
  if (now_ms < starts_ms - soon_ms) return { words: `tile ${shot.tile} starts in`, to_ms: starts_ms };
  if (shot.standing === "held") return { words: `tile ${shot.tile} is yours for`, to_ms: shot.ends_at.getTime() };
  return { words: `tile ${shot.tile}, ${shot.standing === "alternative" ? "free" : "best for you"}`, to_ms: null };
}

/** @param {Shot} shot @param {number} now_ms */
export function countdownText(shot, now_ms) {
  const { to_ms } = countTo(shot, now_ms);
  return to_ms === null ? "now" : countdown(to_ms - now_ms);
}

/** @param {CardSky} sky @param {number} now_ms */
function altitudeWords({ curve, moon, dawn_ms, least_deg }, now_ms) {
  if (!curve) return [];
  const altitude = altitudeAt(curve, now_ms);
  const until = usableUntil(curve, { now_ms, dawn_ms, least_deg });
  const high = altitude === null ? "" : `${Math.round(altitude)}° high, ${trend(curve, now_ms)}`;
  const line = [high, moonWords(moon && altitudeAt(moon, now_ms))].filter(Boolean).join(" · ");
  const ends = until ? `until ${bothClocks(new Date(until.until_ms))}, when ${until.why}` : "";
  return [line, ends].filter(Boolean);
}

/** @param {number|null} altitude_deg */
function moonWords(altitude_deg) {
  if (altitude_deg === null) return "";
  return altitude_deg < 0 ? "Moon down" : `Moon ${Math.round(altitude_deg)}° high (dashed)`;
}

const GAIN_MEANS = "expected rise of searched, if the series goes well: chance that the light is here × chance that you would find it";
const ESTIMATE_MEANS = "computed from your gear and tonight’s sky; assumed 5 sigma for a star";

/** @param {Shot} shot */
function seriesLine(shot) {
  const series = `${shot.n_exposures} × ${shot.exposure_s} s`;
  if (shot.limit_forecast_mag === null) return element("p", {}, series);
  return element("p", {}, `${series}: reaches about ${shot.limit_forecast_mag.toFixed(1)} (`, defined("estimate", ESTIMATE_MEANS), ")");
}

/** Two taps' worth of coordinates: sexagesimal large, decimal under it; either is copied whole. @param {string} name @param {string} large @param {string} small */
function coordinate(name, large, small) {
  const said = element("span", { class: "small quiet" }, small);
  const button = element(
    "button",
    { type: "button", class: "coordinate", "aria-label": `copy ${name} ${large}` },
    element("span", { class: "small quiet" }, name),
    element("span", { class: "coordinate-text" }, large),
    said,
  );
  button.addEventListener("click", () => copyAndSay(said, large));
  return button;
}

/** @param {Shot} shot */
function coordinates(shot) {
  const said = element("span", {}, "copy both in degrees");
  const both = element("button", { type: "button", class: "link copy-both" }, said);
  const plain = `${shot.ra_deg.toFixed(4)} ${shot.dec_deg.toFixed(4)}`;
  both.addEventListener("click", () => copyAndSay(said, plain));
  const half = decimalText(shot).split(/ (?=[+−])/);
  return element(
    "div",
    { class: "coordinates" },
    coordinate("right ascension", raText(shot.ra_deg), half[0]),
    coordinate("declination", decText(shot.dec_deg), half[1]),
    both,
  );
}

/** @param {Shot} shot */
function standingWord(shot) {
  if (shot.standing === "held") return `held by you until ${bothClocks(shot.ends_at)}`;
  return shot.standing === "offered" ? "offered to you by the plan" : "nobody holds it";
}

/**
 * @param {Shot} shot
 * @param {CardSky} sky
 * @param {{now_ms: number, pending: string}} moment    pending: what was asked for and not yet answered
 */
export function shotCard(shot, sky, { now_ms, pending }) {
  const { words } = countTo(shot, now_ms);
  const until = sky.curve ? usableUntil(sky.curve, { now_ms, dawn_ms: sky.dawn_ms, least_deg: sky.least_deg }) : null;
  const gain = shot.gain === null ? null : element("p", { class: "small" }, defined(`${perCent(shot.gain)} to gain`, GAIN_MEANS), ` · field ${fieldSize(shot.width_deg, shot.height_deg)}`);
  return element(
    "section",
    { class: `card ${shot.standing === "held" ? "is-held" : "is-free"}${pending ? " is-pending" : ""}`, "aria-label": `tile ${shot.tile}` },
    element(
      "div",
      {},
      element("p", { "data-count-words": true }, words),
      element("p", { class: "countdown", "data-countdown": true }, countdownText(shot, now_ms)),
    ),
    element("div", { class: "card-words" }, [pending || standingWord(shot), ...altitudeWords(sky, now_ms)].map((line) => element("p", {}, line))),
    sky.curve ? altitudeChart({ ...sky, curve: sky.curve, now_ms, until_ms: until?.until_ms ?? null }) : null,
    coordinates(shot),
    element("div", {}, seriesLine(shot), gain, shot.reason ? element("p", { class: "small quiet" }, shot.reason) : null),
  );
}
