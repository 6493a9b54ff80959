/**
 * What a tile under the pointer answers: how much, who, since when, how deep so far, who could take it.
 *
 * @typedef {import("./shapes.js").State} State
 * @typedef {import("./shapes.js").FrameShown} FrameShown
 * @typedef {{headline: string, lines: string[]}} Story
 */

import { isUnderFrame } from "../sky/footprint.js";
import { altitudeDeg } from "../sky/site_sky.js";
import { sunRaDec } from "../sky/sun_moon.js";
import { unitVector } from "../sky/vectors.js";
import { isBeforeLight } from "./first_light.js";
import { countText, momentText, sizeText, smallPercentText } from "./words.js";

const LOWEST_ALTITUDE_DEG = 20;
const DARK_SUN_DEG = -12;
const N_NAMED = 3;
const N_OFFERS = 2;

/** @param {State} state @param {number} observer */
function nameOf(state, observer) {
  return state.observers[observer]?.name ?? "somebody";
}

/**
 * Who has it, since when, until when.
 * @param {State} state
 * @param {number} tile
 * @param {number} now_ms
 * @returns {string[]}
 */
export function whoLines(state, tile, now_ms) {
  const when = (/** @type {string} */ iso) => momentText(iso, now_ms);
  const claims = Object.values(state.claims).filter((claim) => claim.tile === tile);
  const held = claims
    .filter((claim) => claim.state === "held")
    .map((claim) => `held by ${nameOf(state, claim.observer)} since ${when(claim.held_at)}, until ${when(claim.until)} UTC`);
  const ended = claims
    .filter((claim) => claim.state === "met" || claim.state === "lapsed")
    .slice(-2)
    .map((claim) => endedLine(state, claim, when));
  const lines = [...held, ...offerLines(state, tile, when), ...ended];
  return lines.length > 0 ? lines : ["open: nobody has it"];
}

/**
 * The first offers of a tile, and how many more.
 * @param {State} state
 * @param {number} tile
 * @param {(iso: string) => string} when
 */
function offerLines(state, tile, when) {
  const offers = state.offers
    .filter((offer) => offer.tile === tile)
    .sort((a, b) => Date.parse(a.starts_at) - Date.parse(b.starts_at));
  const more = offers.length - N_OFFERS;
  return offers.slice(0, N_OFFERS).map((offer, i) => {
    const rest = i === N_OFFERS - 1 && more > 0 ? `, and ${countText(more, "offer")} more` : "";
    return `offered to ${nameOf(state, offer.observer)} for ${when(offer.starts_at)} UTC${rest}`;
  });
}

/**
 * @param {State} state
 * @param {import("./shapes.js").ClaimShown} claim
 * @param {(iso: string) => string} when
 */
function endedLine(state, claim, when) {
  const at = claim.ended_at ? ` at ${when(claim.ended_at)} UTC` : "";
  const verb = claim.state === "met" ? "shot by" : "claim lapsed:";
  return `${verb} ${nameOf(state, claim.observer)}${at}`;
}

/**
 * Counted frames over the middle of a tile.
 * @param {State} state
 * @param {import("./shapes.js").TileShown} tile
 * @returns {FrameShown[]}
 */
export function framesOver(state, tile) {
  const middle = unitVector(tile.ra_deg, tile.dec_deg);
  return Object.values(state.frames).filter(
    (frame) => frame.state === "counted" && isUnderFrame(frame.footprint, middle),
  );
}

/**
 * How deep the frames over a tile have searched; those from before any light are named apart.
 * @param {FrameShown[]} frames
 * @param {import("./shapes.js").CampaignShown["source"]} [source]
 * @returns {string[]}
 */
export function frameLines(frames, source) {
  const early = frames.filter((frame) => isBeforeLight(frame, source));
  const lines = [depthLine(frames.filter((frame) => !early.includes(frame)))];
  if (early.length > 0) lines.push(`${countText(early.length, "frame")} from before any light could have arrived: nothing searched by that`);
  return lines;
}

/** @param {FrameShown[]} frames @returns {string} */
export function depthLine(frames) {
  if (frames.length === 0) return "no frame yet";
  const deep = frames.filter((frame) => frame.is_examined && frame.m_eff !== null);
  const unexamined = frames.length - deep.length;
  if (deep.length === 0) return `${countText(frames.length, "frame")}, none examined with a limit: imaged, not searched`;
  const best = deep.reduce((a, b) => (Number(b.m_eff) > Number(a.m_eff) ? b : a));
  const rest = unexamined > 0 ? `; ${countText(unexamined, "frame")} more not examined` : "";
  return `searched to ${best.band} ${Number(best.m_eff).toFixed(1)} in ${countText(deep.length, "frame")}${rest}`;
}

/**
 * Whose site has it up in the dark now, highest first.
 * @param {State} state
 * @param {import("./shapes.js").TileShown} tile
 * @param {number} now_ms
 */
export function whoCould(state, tile, now_ms) {
  const sun = sunRaDec(now_ms);
  return Object.values(state.observers)
    .filter((observer) => observer.status === "in")
    .flatMap((observer) => observer.sites.map((site) => ({
      name: observer.name,
      altitude_deg: altitudeDeg(site, tile, now_ms),
      isDark: altitudeDeg(site, sun, now_ms) < DARK_SUN_DEG,
    })))
    .filter(({ altitude_deg, isDark }) => isDark && altitude_deg > LOWEST_ALTITUDE_DEG)
    .sort((a, b) => b.altitude_deg - a.altitude_deg);
}

/**
 * @param {State} state
 * @param {import("./shapes.js").TileShown} tile
 * @param {number} now_ms
 * @returns {string}
 */
export function whoCouldLine(state, tile, now_ms) {
  const could = whoCould(state, tile, now_ms);
  if (could.length === 0) return "up in the dark for nobody who is in just now";
  const named = could.slice(0, N_NAMED).map(({ name, altitude_deg }) => `${name} (${altitude_deg.toFixed(0)}°)`);
  const more = could.length - named.length;
  return `up in the dark for ${named.join(", ")}${more > 0 ? ` and ${more} more` : ""}`;
}

/**
 * @param {State} state
 * @param {number} number
 * @param {{left: number, whole: number} | null} share    from the pixels, or null while they are not there yet
 * @param {number} now_ms
 * @returns {Story | null}
 */
export function tileStory(state, number, share, now_ms) {
  const tile = state.tiles[number];
  if (!tile) return null;
  const whole = share ? share.whole : tile.probability;
  const left = share && share.left < share.whole * 0.995 ? `, ${smallPercentText(share.left)} left` : "";
  return {
    headline: `tile ${number} · ${sizeText(tile.width_deg, tile.height_deg)}`,
    lines: [
      `${smallPercentText(whole)} of the probability${left}`,
      ...(tile.is_dropped ? ["dropped out of the region: no new claim"] : []),
      ...whoLines(state, number, now_ms),
      ...frameLines(framesOver(state, tile), state.campaign.source),
      whoCouldLine(state, tile, now_ms),
    ],
  };
}
