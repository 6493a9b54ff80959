/** Ten seconds to take a tap back. */

import { element } from "./element.js";

const SECONDS = 10;

/** @type {{stop: () => void}|null} */
let current = null;

/** Says that the tap can no longer be taken back, or was. */
export function closeUndo() {
  current?.stop();
  current = null;
}

/** @param {HTMLElement} button @param {number} endsAt @param {() => void} onEnd */
function countDown(button, endsAt, onEnd) {
  const left = Math.ceil((endsAt - performance.now()) / 1000);
  if (left <= 0) onEnd();
  else button.textContent = `undo (${left})`;
}

/**
 * Offers to undo what was just done. A newer offer replaces an older one.
 * @param {HTMLElement} place
 * @param {string} said
 * @param {() => void|Promise<void>} undo
 */
export function offerUndo(place, said, undo) {
  closeUndo();
  const button = element("button", { type: "button" }, `undo (${SECONDS})`);
  const bar = element("div", { class: "undo", role: "status" }, element("span", {}, said), button);
  const endsAt = performance.now() + SECONDS * 1000;
  const timer = setInterval(() => countDown(button, endsAt, closeUndo), 250);
  current = {
    stop() {
      clearInterval(timer);
      bar.remove();
    },
  };
  button.addEventListener("click", () => {
    closeUndo();
    void undo();
  });
  place.replaceChildren(bar);
}
