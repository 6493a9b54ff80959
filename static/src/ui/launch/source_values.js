/** What was typed about a source model, read against what its preset assumes. Pure. */

import { readNumber } from "../shell/numbers.js";

/**
 * @typedef {{name: string, label: string, value: number, unit: string, source: string, is_changed?: boolean}} Assumption
 * @typedef {{label: string, weight: number, first_light_d: number[] | null, ts_d: number[], magnitudes: (number | null)[]}} Curve
 * @typedef {{preset: string, label: string, about: string, prior: string, is_absolute: boolean, assumptions: Assumption[], curves: Curve[]}} SourceShown
 */

/** A field's name: apart from the names of the form around it. @param {string} name */
export function fieldName(name) {
  return `source.${name}`;
}

/** The model's own words for a number, without "4.0000001". @param {number} value */
export function valueText(value) {
  return String(Number(value.toPrecision(6)));
}

/**
 * The numbers that differ from the preset's, and the fields that hold none.
 * @param {SourceShown} preset @param {Record<string, any>} typed
 */
export function changedNumbers(preset, typed) {
  /** @type {Record<string, number>} */
  const parameters = {};
  /** @type {string[]} */
  const unread = [];
  for (const { name, value } of preset.assumptions) {
    const text = typed[fieldName(name)];
    if (text === undefined || text === valueText(value)) continue;
    const number = readNumber(text);
    if (number === null) unread.push(fieldName(name));
    else parameters[name] = number;
  }
  return { parameters, unread };
}

/** "red supergiant: share" belongs to "red supergiant". @param {Assumption[]} assumptions */
export function groupsOf(assumptions) {
  /** @type {Map<string, Assumption[]>} */
  const groups = new Map();
  for (const one of assumptions) {
    const parts = one.label.split(": ");
    const group = parts.length > 1 ? parts[0] : isOfGalaxy(one) ? "the Galaxy: stars and dust" : "";
    groups.set(group, [...(groups.get(group) ?? []), one]);
  }
  return [...groups];
}

/** @param {Assumption} assumption */
function isOfGalaxy({ name }) {
  return /^(disc|sun|edge|dust|centre|lmc|smc|floor)/.test(name);
}

/** @param {Assumption} assumption */
export function shortLabel({ label }) {
  const parts = label.split(": ");
  return parts[parts.length - 1];
}
