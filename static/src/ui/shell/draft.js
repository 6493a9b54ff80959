/** Keeps what is typed through reloads, lost connections and expired sign-ins, in this tab only. */

import { readFields } from "./controls.js";

const PREFIX = "quartersky.draft.";

/** @param {string} name @param {Record<string, any>|null} values */
function store(name, values) {
  try {
    if (values) sessionStorage.setItem(PREFIX + name, JSON.stringify(values));
    else sessionStorage.removeItem(PREFIX + name);
  } catch {
    // Storage is forbidden here: the page itself still holds what was typed.
  }
}

/** What was typed earlier and never sent. @param {string} name @returns {Record<string, any>|null} */
export function recallDraft(name) {
  try {
    return JSON.parse(sessionStorage.getItem(PREFIX + name) ?? "null");
  } catch {
    return null;
  }
}

/** Names of what was typed and never sent. @param {string} start    of the name */
export function listDrafts(start) {
  try {
    return Object.keys(sessionStorage)
      .filter((key) => key.startsWith(PREFIX + start))
      .map((key) => key.slice(PREFIX.length));
  } catch {
    return [];
  }
}

/** @param {string} name */
export function forgetDraft(name) {
  store(name, null);
}

/** Stores the fields of a form at every change; passwords are never stored. @param {HTMLFormElement} form @param {string|(() => string)} name */
export function keepDraft(form, name) {
  const keep = () => {
    const values = readFields(form);
    for (const input of form.querySelectorAll("input[type=password]")) delete values[/** @type {HTMLInputElement} */ (input).name];
    store(typeof name === "string" ? name : name(), values);
  };
  form.addEventListener("input", keep);
  form.addEventListener("change", keep);
}
