/** A limit for a frame of which only the exposure is known: asked from the server, marked as estimate. */

import { ask } from "../../api/request.js";
import { messagePlace, readFields, showProblem, whileBusy } from "../shell/controls.js";
import { readUtc } from "../shell/clock.js";
import { element } from "../shell/element.js";
import { readAngle, readNumber } from "../shell/numbers.js";

/** @typedef {{limit_mag: number, uncertainty_mag: number, saturation_mag: number|null, assumptions: string[]}} Estimate */
/** @typedef {{ra_deg: number|null, dec_deg: number|null, mid_time: string|null, duration_s: number|null}} Question */

/** What the server is asked; null where a number is missing. @param {Record<string, any>} typed @returns {Question} */
export function estimateQuestion(typed) {
  const mid = readUtc(String(typed.mid_time ?? ""));
  return {
    ra_deg: readAngle(String(typed.ra_deg ?? ""), { isHours: true }),
    dec_deg: readAngle(String(typed.dec_deg ?? ""), { isHours: false }),
    mid_time: mid ? mid.toISOString() : null,
    duration_s: readNumber(String(typed.duration_s ?? "")),
  };
}

/** @param {Estimate} estimate */
export function estimateWords({ limit_mag, uncertainty_mag, saturation_mag, assumptions }) {
  const bright = saturation_mag === null ? "" : ` Stars brighter than ${saturation_mag.toFixed(1)} are saturated.`;
  return `Our estimate: ${limit_mag.toFixed(1)} ± ${uncertainty_mag.toFixed(1)}.${bright} Assumed: ${assumptions.join("; ")}.`;
}

/** @param {Question} question */
function isWhole(question) {
  return Object.values(question).every((value) => value !== null);
}

/**
 * A button that puts the estimate in.
 * @param {HTMLElement} form @param {{instrument: number, typed: () => Record<string, any>}} about
 * @param {(estimate: Estimate) => void} take
 */
export function estimateButton(form, about, take) {
  const said = messagePlace();
  const button = element("button", { type: "button" }, "estimate it from my gear and the sky");
  button.addEventListener("click", () =>
    whileBusy(button, async () => {
      const question = estimateQuestion({ ...about.typed(), ...readFields(form) });
      if (!isWhole(question)) {
        said.replaceChildren(element("p", { class: "hint" }, "Fill in position, time and exposure first."));
        return;
      }
      const query = new URLSearchParams(Object.entries(question).map(([name, value]) => [name, String(value)]));
      try {
        const estimate = /** @type {Estimate} */ (await ask(`instruments/${about.instrument}/depth-estimate?${query}`));
        take(estimate);
        said.replaceChildren(element("p", { class: "hint" }, estimateWords(estimate)));
      } catch (error) {
        showProblem(said, error);
      }
    }),
  );
  return element("div", { class: "stack" }, element("p", { class: "row" }, button), said);
}
