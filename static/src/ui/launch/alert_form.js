/** An alert typed by hand: a direction with its radius, when a message came as words only. */

import { choice, field, markField, readFields, whileBusy } from "../shell/controls.js";
import { readUtc, utcTyped } from "../shell/clock.js";
import { keepDraft, recallDraft } from "../shell/draft.js";
import { element } from "../shell/element.js";
import { readAngle, readNumber } from "../shell/numbers.js";

export const ALERT_DRAFT = "alert";

export const CONTAINMENTS = [
  { value: "0.68", label: "68 % inside" },
  { value: "0.9", label: "90 % inside" },
];

/**
 * Pure: the alert from typed words, and which fields could not be read.
 * @param {Record<string, string>} typed
 */
export function typedAlert(typed) {
  const event = readUtc(typed.event_time ?? "");
  const numbers = {
    ra_deg: readAngle(typed.ra_deg ?? "", { isHours: true }),
    dec_deg: readAngle(typed.dec_deg ?? "", { isHours: false }),
    radius_deg: readNumber(typed.radius_deg),
  };
  const unread = [
    ...(event ? [] : ["event_time"]),
    ...Object.entries(numbers).filter(([, value]) => value === null).map(([name]) => name),
  ];
  const cone = { type: "cone", ...numbers, containment: Number(typed.containment) };
  const alert = {
    id: typed.id || `typed ${event?.toISOString().slice(0, 16) ?? ""}`,
    event_time: event?.toISOString().replace(/\.\d+Z$/, "Z"),
    kind: typed.kind || "typed alert",
    role: typed.role,
    constraints: [cone],
  };
  return { alert, unread };
}

/** @param {Record<string, any>} values */
function formFields(values) {
  const text = (/** @type {string} */ name, /** @type {string} */ label, /** @type {object} */ more = {}) =>
    field({ name, label, value: values[name] ?? "", ...more });
  return [
    element(
      "div",
      { class: "fields" },
      text("ra_deg", "right ascension", { hint: "18 12 40, or degrees", number: true }),
      text("dec_deg", "declination", { hint: "−21 04 10, or degrees", number: true }),
      text("radius_deg", "radius", { unit: "°", number: true }),
    ),
    choice({ name: "containment", label: "the radius means", value: values.containment ?? "0.68", options: CONTAINMENTS }),
    element(
      "div",
      { class: "fields" },
      text("event_time", "time of the event, UTC", { hint: `like ${utcTyped(new Date())}`, number: true, isWide: true }),
      text("kind", "kind", { hint: "neutrino burst, gamma rays …" }),
      text("id", "identifier", { hint: "as the message gives it" }),
    ),
    choice({
      name: "role",
      label: "the message is",
      value: values.role ?? "observation",
      options: [{ value: "observation", label: "real" }, { value: "test", label: "a test" }],
    }),
  ];
}

/** @param {(alert: any) => Promise<void>} onAlert */
export function alertForm(onAlert) {
  const values = recallDraft(ALERT_DRAFT) ?? {};
  const button = element("button", { type: "submit" }, "see the region");
  const form = element("form", { class: "stack", novalidate: true }, formFields(values), element("p", {}, button));
  keepDraft(form, ALERT_DRAFT);
  form.addEventListener("submit", (event) => {
    event.preventDefault();
    const { alert, unread } = typedAlert(readFields(form));
    for (const name of unread) markField(form, name, "This cannot be read: see the example.");
    form.querySelector("[aria-invalid=true]")?.scrollIntoView({ block: "center" });
    if (unread.length === 0) void whileBusy(button, () => onAlert(alert));
  });
  return element("details", { open: Object.keys(values).length > 0 }, element("summary", {}, "or type a direction and its radius"), form);
}
