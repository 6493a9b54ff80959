/** A word with its definition on hover, focus, tap or long press. */

import { element } from "../shell/element.js";

let count = 0;

/** @param {string} word @param {string} meaning @returns {HTMLElement} */
export function defined(word, meaning) {
  count += 1;
  const id = `meaning-${count}`;
  const note = element("span", { class: "board-meaning", role: "tooltip", id, hidden: true }, meaning);
  const button = element("button", { type: "button", class: "definition", "aria-describedby": id }, word);
  const show = (/** @type {boolean} */ isShown) => {
    note.hidden = !isShown;
  };
  const box = element("span", { class: "board-defined" }, button, note);
  button.addEventListener("focus", () => show(true));
  button.addEventListener("blur", () => show(false));
  button.addEventListener("click", () => show(true));
  button.addEventListener("contextmenu", (event) => event.preventDefault());
  box.addEventListener("pointerenter", () => show(true));
  box.addEventListener("pointerleave", () => show(document.activeElement === button));
  box.addEventListener("keydown", (event) => {
    if (event.key === "Escape") show(false);
  });
  return box;
}
