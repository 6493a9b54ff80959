/**
 * At night a phone's own keyboard is a white lamp. Fields for numbers get this pad instead; a real
 * keyboard goes on working.
 */

import { element } from "./element.js";

/** Row by row, four to a row. */
const KEYS = ["1", "2", "3", "back", "4", "5", "6", "−", "7", "8", "9", ":", "space", "0", ".", "done"];

/** @type {HTMLInputElement|null} */
let target = null;
/** @type {HTMLElement|null} */
let pad = null;

/** Only where the system's keyboard would come up. */
function isWanted() {
  return document.documentElement.dataset.theme === "night" && matchMedia("(pointer: coarse)").matches;
}

/** @param {string} text @param {number} backwards   characters before the caret to take away */
function replaceAtCaret(text, backwards) {
  if (!target) return;
  const from = target.selectionStart ?? target.value.length;
  const to = target.selectionEnd ?? from;
  target.setRangeText(text, from === to ? Math.max(0, from - backwards) : from, to, "end");
  target.dispatchEvent(new Event("input", { bubbles: true }));
}

/** @param {string} key */
function press(key) {
  if (key === "back") replaceAtCaret("", 1);
  else if (key === "done") target?.blur();
  else replaceAtCaret(key === "space" ? " " : key, 0);
}

/** @param {string} key */
function keyButton(key) {
  const button = element("button", { type: "button", "data-key": key, tabindex: "-1" }, key);
  // The field keeps the focus, and with it the caret.
  button.addEventListener("pointerdown", (event) => event.preventDefault());
  button.addEventListener("click", () => press(key));
  return button;
}

/** @returns {HTMLElement} */
function makePad() {
  return element("div", { class: "number-pad", role: "group", "aria-label": "number pad" }, KEYS.map(keyButton));
}

/** @param {HTMLInputElement} input */
function open(input) {
  target = input;
  input.setAttribute("inputmode", "none");
  if (!pad) {
    pad = makePad();
    document.body.append(pad);
  }
  pad.hidden = false;
  input.scrollIntoView({ block: "center" });
}

/** Puts the system's keyboard back for the other themes. */
function close() {
  if (!target) return;
  target.setAttribute("inputmode", "decimal");
  target = null;
  if (pad) pad.hidden = true;
}

/** Listens for number fields to be entered and left. */
export function installNumberPad() {
  // Before the focus: a keyboard that has begun to rise cannot be called back.
  document.addEventListener("pointerdown", (event) => {
    const input = event.target instanceof HTMLInputElement ? event.target : null;
    if (input?.hasAttribute("data-number") && isWanted()) input.setAttribute("inputmode", "none");
  });
  document.addEventListener("focusin", (event) => {
    const input = event.target instanceof HTMLInputElement ? event.target : null;
    if (input?.hasAttribute("data-number") && isWanted()) open(input);
    else close();
  });
  document.addEventListener("focusout", close);
}
