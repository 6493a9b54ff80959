/** The fields of a report: where and when, how deep, and who has looked. */

import { choice, field, readFields, tick } from "../shell/controls.js";
import { localClock, readUtc, utcClock } from "../shell/clock.js";
import { element } from "../shell/element.js";
import { readNumber } from "../shell/numbers.js";
import { estimateButton } from "./depth_estimate.js";
import { LIMIT_KINDS, limitFromStar, WAYS } from "./report_values.js";

/** @param {string} text */
function localHint(text) {
  const date = readUtc(text);
  return date ? `${utcClock(date)} UTC is ${localClock(date)} here` : "like 2027-03-14 22:17:30, in UTC";
}

/** @param {Record<string, any>} values */
export function frameFields(values) {
  const mid = field({
    name: "mid_time",
    label: "middle of the exposure, UTC",
    value: values.mid_time,
    number: true,
    isWide: true,
    hint: localHint(String(values.mid_time)),
    oninput: (text) => {
      const hint = mid.querySelector(".hint");
      if (hint) hint.textContent = localHint(text);
    },
  });
  return element(
    "div",
    { class: "fields" },
    field({ name: "ra_deg", label: "right ascension of the middle", value: values.ra_deg, number: true, hint: "18 12 40, or degrees" }),
    field({ name: "dec_deg", label: "declination of the middle", value: values.dec_deg, number: true, hint: "−21 04 10, or degrees" }),
    mid,
    field({ name: "duration_s", label: "exposure in all", value: values.duration_s, unit: "s", number: true, hint: "the sum of a stack" }),
    field({ name: "band", label: "band or filter", value: values.band }),
    field({ name: "rotation_deg", label: "camera angle", value: values.rotation_deg, unit: "°", number: true, hint: "east of north; empty: only the circle that is inside at any angle counts" }),
  );
}

/** @param {HTMLElement} form @param {string} name @param {string} value */
function put(form, name, value) {
  const input = /** @type {HTMLInputElement|null} */ (form.querySelector(`input[name="${name}"]`));
  if (input) input.value = value;
}

/** @param {HTMLElement} form @param {Element} said */
function computeLimit(form, said) {
  const typed = readFields(form);
  const star_mag = readNumber(typed.star_mag);
  const snr = readNumber(typed.star_snr);
  if (star_mag === null || snr === null || snr <= 0) {
    said.textContent = "fill both numbers first";
    return;
  }
  put(form, "limit_mag", limitFromStar(star_mag, snr).toFixed(2));
  chooseKind(form, "5 sigma");
  said.textContent = "put in as a 5 sigma limit";
  form.dispatchEvent(new Event("input"));
}

/** @param {HTMLElement} form */
function fromOneStar(form) {
  const said = element("span", { class: "hint", role: "status" });
  return element(
    "details",
    {},
    element("summary", {}, "limit from one star"),
    element(
      "div",
      { class: "stack" },
      element(
        "div",
        { class: "fields" },
        field({ name: "star_mag", label: "its magnitude", number: true }),
        field({ name: "star_snr", label: "its signal to noise", number: true }),
      ),
      element("p", { class: "row" }, element("button", { type: "button", onclick: () => computeLimit(form, said) }, "compute"), said),
    ),
  );
}

/** @param {HTMLElement} form @param {string} kind */
function chooseKind(form, kind) {
  const option = /** @type {HTMLInputElement|null} */ (form.querySelector(`input[data-choice="limit_kind"][value="${kind}"]`));
  if (option) option.checked = true;
}

/** @param {Record<string, any>} values @param {HTMLElement} form @param {{instrument: number, typed: () => Record<string, any>}} about */
export function depthFields(values, form, about) {
  const takeEstimate = (/** @type {import("./depth_estimate.js").Estimate} */ { limit_mag }) => {
    put(form, "limit_mag", limit_mag.toFixed(1));
    chooseKind(form, "estimate");
    form.dispatchEvent(new Event("input"));
  };
  return element(
    "section",
    { class: "stack" },
    element("h3", {}, "How deep"),
    field({ name: "limit_mag", label: "limiting magnitude", value: values.limit_mag, number: true, hint: values.limit_kind === "estimate" ? "our estimate: better yours, if you measured" : "empty: it counts as imaged, not as searched" }),
    choice({ name: "limit_kind", label: "what it means", value: values.limit_kind, options: LIMIT_KINDS }),
    fromOneStar(form),
    estimateButton(form, about, takeEstimate),
  );
}

/** What the answer asks on about. @param {HTMLElement} more @param {string} way @param {Record<string, any>} values */
function showMore(more, way, values) {
  const isProgram = way === "difference imaging" || way === "program against a catalogue";
  const hint = "A new source is found only against something that shows what was there.";
  more.replaceChildren(
    ...(way ? [field({ name: "reference_mag", label: "the chart or picture compared with shows stars to", value: values.reference_mag, unit: "mag", number: true, hint })] : []),
    ...(isProgram ? [tick({ name: "masks_saturated", label: "The program masks saturated pixels.", isOn: values.masks_saturated === true })] : []),
  );
}

/** @param {Record<string, any>} values */
export function lookedFields(values) {
  const more = element("div", { class: "stack" });
  showMore(more, values.examined_way, values);
  return element(
    "section",
    { class: "stack" },
    element("h3", {}, "Has anyone looked at it for something new?"),
    choice({ name: "examined_way", label: "and how", value: values.examined_way, options: WAYS, onchange: (way) => showMore(more, way, values) }),
    more,
  );
}
