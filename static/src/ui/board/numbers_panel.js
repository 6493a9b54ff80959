/** The two numbers, what the plan promises, and how sure that is. */

import { areaText, percentText, promiseText, spanText } from "../../state/words.js";
import { element, fill } from "../shell/element.js";
import { defined } from "./definition.js";

/** @typedef {import("./board_model.js").BoardModel} BoardModel */

const MEANINGS = {
  searched:
    "The share of the region's probability where the source would have been found: depth, time and examination of every frame count. Frames without a limit or without examination add nothing.",
  imaged: "The share of the region's probability under at least one counted frame, however shallow.",
  expected: "The searched share that the newest plan leads to if its offers are met as often as these observers meet them, with their chances of clear sky.",
  certificate:
    "An upper bound was computed for what any plan could reach with these observers, start times and options. This plan reaches at least this part of it.",
  outside: "Probability outside the drawn area, where nobody looks. It is never dropped and never counted as searched.",
};

/** @param {string} word @param {string} meaning @param {string} name */
function bigNumber(word, meaning, name) {
  const value = element("span", { class: "board-value", "data-share": name }, "–");
  const meter = element("progress", { class: `board-meter board-meter-${name}`, max: "1", value: "0", "aria-hidden": "true" });
  const node = element(
    "div",
    { class: "board-number" },
    defined(word, meaning),
    element("p", { class: "board-figure" }, value, element("span", { class: "board-unit" }, " %")),
    meter,
  );
  return { node, value, meter };
}

/** @param {string | Node} word @param {string} value */
function fact(word, value) {
  return [element("dt", {}, word), element("dd", {}, value)];
}

/** @param {BoardModel} model @returns {[string, string | null, string][]} name, meaning, value */
function facts({ state, now_ms }) {
  if (!state) return [];
  const { plan, region, campaign } = state;
  /** @type {[string, string | null, string][]} */
  const rows = [];
  if (plan) {
    rows.push(["searched when the plan is done", MEANINGS.expected, `${percentText(plan.searched_expected)} %`]);
    rows.push(["this plan is at least", MEANINGS.certificate, `${promiseText(plan.certificate)} of the best possible`]);
  } else {
    rows.push(["plan", null, "none yet"]);
  }
  if (region) {
    rows.push(["region, 90 % within", null, areaText(region.area_deg2["90"])]);
    rows.push(["outside the drawn area", MEANINGS.outside, `${percentText(region.outside)} %`]);
  }
  rows.push(["since the event", null, spanText(now_ms - Date.parse(campaign.event_time))]);
  rows.push(["source model", null, campaign.source.label]);
  return rows;
}

/** @param {Element} place @param {BoardModel} model */
export function numbersPanel(place, model) {
  const searched = bigNumber("searched", MEANINGS.searched, "searched");
  const imaged = bigNumber("imaged", MEANINGS.imaged, "imaged");
  const list = element("dl", { class: "board-facts" });
  place.append(element("div", { class: "board-numbers" }, searched.node, imaged.node), list);
  /** @type {string} */
  let shown = "";
  const show = () => {
    const { coverage } = model;
    if (coverage) {
      searched.value.textContent = percentText(coverage.searched);
      imaged.value.textContent = percentText(coverage.imaged);
      searched.meter.value = coverage.searched;
      imaged.meter.value = coverage.imaged;
    }
    const rows = facts(model);
    if (JSON.stringify(rows) === shown) return;
    shown = JSON.stringify(rows);
    fill(list, ...rows.flatMap(([word, meaning, value]) => fact(meaning ? defined(word, meaning) : word, value)));
  };
  model.onChange(show);
  setInterval(show, 10_000);
  show();
}
