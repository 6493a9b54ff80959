/** Who is in, clouded, out or silent; who got nothing from the plan, and why. */

import { statusCounts } from "../../state/tile_lines.js";
import { countText } from "../../state/words.js";
import { element, fill } from "../shell/element.js";

/** @typedef {import("./board_model.js").BoardModel} BoardModel */

const WORDS = /** @type {const} */ (["in", "clouded", "out", "silent"]);

/** @param {import("../../state/shapes.js").State} state */
function counts(state) {
  const n = statusCounts(state);
  return element(
    "p",
    { class: "board-counts" },
    WORDS.map((word) => element("span", {}, `${word} `, element("strong", {}, String(n[word])))),
  );
}

/** @param {import("../../state/shapes.js").State} state */
function withoutTile({ plan, observers }) {
  if (!plan || plan.unassigned.length === 0) return null;
  const rows = plan.unassigned.map(({ observer, reason }) =>
    element("li", {}, element("strong", {}, observers[observer]?.name ?? "somebody"), ` ${reason}`),
  );
  const word = countText(plan.unassigned.length, "observer");
  return element("details", {}, element("summary", {}, `${word} got nothing from this plan: why`), element("ul", { class: "board-reasons" }, rows));
}

/** @param {Element} place @param {BoardModel} model */
export function networkPanel(place, model) {
  const summary = element("div", {});
  const reasons = element("div", {});
  place.append(summary, reasons);
  /** @type {BoardModel["state"]} */
  let shown = null;
  model.onChange(() => {
    const { state } = model;
    if (!state || state === shown) return;
    if (state.observers !== shown?.observers) fill(summary, counts(state));
    if (state.plan !== shown?.plan) fill(reasons, withoutTile(state));
    shown = state;
  });
}
