/** Fields, choices and messages that look and behave alike on every page. */

import { Problem, problemText } from "../../api/problem.js";
import { element } from "./element.js";

let nextId = 0;

/** @param {string} stem */
function freshId(stem) {
  nextId += 1;
  return `${stem}-${nextId}`;
}

/**
 * @typedef {object} FieldOptions
 * @property {string} name
 * @property {string} label
 * @property {string|number} [value]
 * @property {string} [hint]
 * @property {string} [unit]
 * @property {"text"|"password"} [type]
 * @property {boolean} [isWide]    takes the room of two
 * @property {boolean} [number]      asks for a number (our own pad on a phone)
 * @property {string} [autocomplete]
 * @property {(value: string) => void} [oninput]
 */

/**
 * A labelled text field; numbers are text too, so that no browser draws its own arrows or pickers.
 * @param {FieldOptions} options
 */
export function field(options) {
  const id = freshId(options.name);
  const input = element("input", {
    id,
    name: options.name,
    type: options.type ?? "text",
    value: options.value ?? "",
    autocomplete: options.autocomplete ?? "off",
    spellcheck: "false",
    autocapitalize: "off",
    "data-focus": options.name,
    "data-number": options.number ?? false,
    inputmode: options.number ? "decimal" : undefined,
    "aria-describedby": `${id}-hint`,
  });
  input.addEventListener("input", () => {
    input.removeAttribute("aria-invalid");
    options.oninput?.(input.value);
  });
  const box = options.unit
    ? element("span", { class: "with-unit" }, input, element("span", { class: "quiet" }, options.unit))
    : input;
  return element(
    "div",
    { class: options.isWide ? "field wide" : "field", "data-field": options.name },
    element("label", { for: id }, options.label),
    box,
    element("p", { class: "hint", id: `${id}-hint` }, options.hint ?? ""),
  );
}

/**
 * One of several.
 * @param {{name: string, label: string, value: string, options: {value: string, label: string}[],
 *          onchange?: (value: string) => void}} options
 */
export function choice({ name, label, value, options, onchange }) {
  const group = freshId(name);
  const shown = options.map((option) => {
    const input = element("input", {
      type: "radio",
      name: group,
      value: option.value,
      checked: option.value === value,
      "data-choice": name,
      "data-focus": `${name}-${option.value}`,
      onchange: () => onchange?.(option.value),
    });
    return element("label", { class: "option" }, input, option.label);
  });
  return element(
    "fieldset",
    { class: "choice", "data-field": name },
    element("legend", {}, label),
    element("div", { class: "options" }, shown),
  );
}

/**
 * Yes or no.
 * @param {{name: string, label: string, isOn: boolean, hint?: string,
 *          onchange?: (isOn: boolean) => void}} options
 */
export function tick({ name, label, isOn, hint, onchange }) {
  const input = element("input", { type: "checkbox", name, checked: isOn, "data-focus": name });
  input.addEventListener("change", () => onchange?.(input.checked));
  const words = element("span", {}, label, hint ? element("span", { class: "hint" }, ` ${hint}`) : "");
  return element("label", { class: "option bare", "data-field": name }, input, words);
}

/** What stands in the fields, by name: text as typed, ticks as booleans. @param {Element} root */
export function readFields(root) {
  /** @type {Record<string, any>} */
  const values = {};
  for (const input of root.querySelectorAll("input")) {
    if (input.type === "radio") {
      if (input.checked && input.dataset.choice) values[input.dataset.choice] = input.value;
    } else if (input.type === "checkbox") values[input.name] = input.checked;
    else if (input.name) values[input.name] = input.type === "password" ? input.value : input.value.trim();
  }
  return values;
}

/** A place for messages that screen readers announce. */
export function messagePlace() {
  return element("div", { class: "stack", role: "status", "aria-live": "polite" });
}

/**
 * Shows a problem where the person is looking, and beside each field that it names.
 * @param {Element} place @param {unknown} error @param {Element} [form]
 */
export function showProblem(place, error, form) {
  if (!(error instanceof Problem)) throw error;
  place.replaceChildren(error.code === "not-signed-in" ? signInAgain() : element("p", { class: "trouble alarm" }, problemText(error)));
  const unplaced = error.errors.filter(({ field: name, detail }) => !markField(form, name, detail) && detail !== error.detail);
  for (const { field: name, detail } of unplaced) {
    place.append(element("p", { class: "trouble" }, name ? `${name}: ${detail}` : detail));
  }
  place.scrollIntoView({ block: "center" });
}

/** An expired sign-in: what is typed waits in this tab. */
function signInAgain() {
  const way = `/sign-in/?next=${encodeURIComponent(location.pathname)}`;
  return element(
    "div",
    { class: "alarm stack" },
    element("p", { class: "trouble" }, "You are not signed in any more. What you typed is kept in this tab."),
    element("p", {}, element("a", { class: "button", href: way }, "sign in again")),
  );
}

/** @param {Element|undefined} form @param {string} name @param {string} detail @returns {boolean} */
export function markField(form, name, detail) {
  const box = form?.querySelector(`[data-field="${CSS.escape(name)}"]`);
  const hint = box?.querySelector(".hint");
  if (!box || !hint) return false;
  box.querySelector("input")?.setAttribute("aria-invalid", "true");
  hint.textContent = detail;
  hint.classList.add("trouble");
  return true;
}

/**
 * Runs work that a button started: the button says that it is busy and cannot be pressed twice.
 * @param {HTMLButtonElement} button @param {() => Promise<void>} work
 */
export async function whileBusy(button, work) {
  if (button.getAttribute("aria-busy") === "true") return;
  button.setAttribute("aria-busy", "true");
  try {
    await work();
  } finally {
    button.removeAttribute("aria-busy");
  }
}

/** A word that opens its definition under it. @param {string} word @param {string} meaning */
export function defined(word, meaning) {
  const text = element("span", { class: "hint", hidden: true }, ` ${meaning}`);
  const button = element("button", { type: "button", class: "definition", "aria-expanded": "false" }, word);
  button.addEventListener("click", () => {
    text.hidden = !text.hidden;
    button.setAttribute("aria-expanded", String(!text.hidden));
  });
  return element("span", {}, button, text);
}
