/** The source model that the numbers rest on: its curves, and every number that it assumes. */

import { element, fill } from "../shell/element.js";
import { lightChart } from "../shell/light_chart.js";
import { valueText } from "../launch/source_values.js";

/** @typedef {import("../launch/source_values.js").Assumption} Assumption */

/** @param {Assumption} assumption */
function row({ label, value, unit, source, is_changed }) {
  const origin = is_changed ? "changed at launch" : source;
  return element(
    "tr",
    {},
    element("td", {}, label),
    element("td", { class: "number" }, [valueText(value), unit].filter(Boolean).join(" ")),
    element("td", { class: "quiet" }, origin),
  );
}

/** @param {import("../launch/source_values.js").SourceShown} model */
function details(model) {
  const prior = model.prior === "galactic" ? "Sources are where the stars of the Galaxy are." : "The direction is as the alert says.";
  return [
    element("p", { class: "small quiet" }, model.about, " ", prior),
    lightChart(model),
    element("div", { class: "board-table" }, element("table", { class: "small" }, element("tbody", {}, model.assumptions.map(row)))),
  ];
}

/**
 * Asks for the model only when somebody opens it.
 * @param {Element} place @param {string} campaign @param {(path: string) => Promise<any>} ask
 */
export function sourcePanel(place, campaign, ask) {
  const body = element("div", { class: "stack" });
  const panel = element("details", {}, element("summary", {}, "every assumption"), body);
  let isAsked = false;
  panel.addEventListener("toggle", async () => {
    if (!panel.open || isAsked) return;
    isAsked = true;
    fill(body, element("p", { class: "quiet" }, "reading…"));
    try {
      fill(body, ...details(await ask(`campaigns/${campaign}/source`)));
    } catch {
      isAsked = false;
      fill(body, element("p", { class: "trouble" }, "The source model could not be read. Close and open this to try again."));
    }
  });
  place.append(panel);
}
