/**
 * Probability and detection per pixel, and how the two numbers grew.
 *
 * @typedef {object} RegionPixels
 * @property {number} revision
 * @property {number} order
 * @property {Uint32Array} pixels    HEALPix NESTED, ascending
 * @property {Float32Array} probabilities
 *
 * @typedef {{at: string, imaged: number, searched: number}} Mark
 *
 * @typedef {object} Coverage
 * @property {number} through_seq
 * @property {number} imaged
 * @property {number} searched
 * @property {number} residual_outside
 * @property {Uint8Array} detected    255 D per pixel of the region
 * @property {Mark[]} history
 */

import { bytesOf, float32Of, uint32Of } from "./base64.js";

const N_HISTORY = 2000;

/**
 * @param {{revision: number, order: number, pixels_b64: string, probabilities_b64: string}} answer
 * @returns {RegionPixels}
 */
export function regionFromAnswer(answer) {
  return {
    revision: answer.revision,
    order: answer.order,
    pixels: uint32Of(answer.pixels_b64),
    probabilities: float32Of(answer.probabilities_b64),
  };
}

/** @param {any} answer of GET coverage @returns {Coverage} */
export function coverageFromAnswer(answer) {
  const { through_seq, imaged, searched, residual_outside, history } = answer;
  return { through_seq, imaged, searched, residual_outside, history, detected: bytesOf(answer.detected_b64) };
}

/** Nothing searched yet. @param {number} n_pixels @returns {Coverage} */
export function emptyCoverage(n_pixels) {
  const detected = new Uint8Array(n_pixels);
  return { through_seq: 0, imaged: 0, searched: 0, residual_outside: 0, detected, history: [] };
}

/**
 * Coverage after a live message, and which pixels changed. The message is kept only when it is news. It holds what
 * changed after `since_seq`: a page that is older than that, or whose region has not these pixels, must ask again.
 * @param {Coverage} coverage
 * @param {any} message
 * @returns {{coverage: Coverage, changed: Uint32Array, is_gap: boolean}}
 */
export function patched(coverage, message) {
  const nothing = new Uint32Array(0);
  if (message.through_seq < coverage.through_seq) return { coverage, changed: nothing, is_gap: false };
  const changed = uint32Of(message.changed.indices_b64);
  const values = bytesOf(message.changed.detected_b64);
  const detected = coverage.detected;
  if (changed.some((index) => index >= detected.length)) return { coverage, changed: nothing, is_gap: true };
  const is_gap = message.since_seq > coverage.through_seq;
  changed.forEach((index, i) => {
    detected[index] = values[i];
  });
  const { through_seq, imaged, searched, residual_outside, at } = message;
  const history = withMark(coverage.history, { at, imaged, searched });
  return { coverage: { through_seq, imaged, searched, residual_outside, detected, history }, changed, is_gap };
}

/**
 * @param {Mark[]} history
 * @param {{at: string | null, imaged: number, searched: number}} mark
 * @returns {Mark[]}
 */
function withMark(history, { at, imaged, searched }) {
  if (at === null) return history;
  const mark = { at, imaged, searched };
  const last = history[history.length - 1];
  const isSame = last && last.imaged === mark.imaged && last.searched === mark.searched;
  return isSame ? history : [...history, mark].slice(-N_HISTORY);
}

/**
 * What is left per pixel: p (1 - D), not normalised.
 * @param {RegionPixels} region
 * @param {Coverage} coverage
 * @param {number} index
 */
export function leftAt(region, coverage, index) {
  return region.probabilities[index] * (1 - coverage.detected[index] / 255);
}
