/** Brings the head and foot of a page to life. */

import { showProblem } from "./controls.js";
import { ask } from "../../api/request.js";
import { element } from "./element.js";
import { localClock, utcClock } from "./clock.js";
import { now } from "./campaign_clock.js";
import { installNumberPad } from "./number_pad.js";
import { startThemeSwitch } from "./theme_switch.js";

/** Marks the way that the reader is on. */
function markCurrentWay() {
  for (const link of document.querySelectorAll(".shell-ways a")) {
    if (link.getAttribute("href") === location.pathname) link.setAttribute("aria-current", "page");
  }
}

/** UTC, with the reader's own time beside it. */
function showClock() {
  const place = document.querySelector("[data-clock]");
  if (!place) return;
  const date = now();
  place.textContent = `${utcClock(date)} UTC · ${localClock(date)} here`;
}

/** @param {HTMLButtonElement} button */
async function signOut(button) {
  try {
    await ask("session", { method: "DELETE" });
    location.assign("/");
  } catch (error) {
    const place = element("div", {});
    button.parentElement?.append(place);
    showProblem(place, error);
  }
}

/** Called once by every page. */
export function startShell() {
  markCurrentWay();
  showClock();
  setInterval(showClock, 1000);
  document.addEventListener("quartersky:clock", showClock);
  const button = /** @type {HTMLButtonElement|null} */ (document.querySelector("[data-sign-out]"));
  button?.addEventListener("click", () => signOut(button));
  startThemeSwitch(document);
  installNumberPad();
}
