/** The bar under the thumb: two large buttons, three small ones, and the line that says live or not. */

import { element } from "../shell/element.js";

/** @typedef {import("./shots.js").Shot} Shot */

/**
 * @typedef {object} Acts
 * @property {(shot: Shot) => void} take
 * @property {(shot: Shot) => void} extend
 * @property {(shot: Shot|null) => void} openReport
 * @property {(shot: Shot) => void} giveBack
 * @property {() => void} showOthers
 * @property {(status: "in"|"clouded") => void} setStatus
 */

/** @param {string} text @param {string} name @param {() => void} onclick @param {boolean} [isMain] */
function large(text, name, onclick, isMain = false) {
  return element("button", { type: "button", class: isMain ? "large main" : "large", "data-focus": name, onclick }, text);
}

/** @param {string} text @param {string} name @param {() => void} onclick */
function small(text, name, onclick) {
  return element("button", { type: "button", class: "link", "data-focus": name, onclick }, text);
}

/** @param {Shot|null} shot @param {Acts} acts */
function largeButtons(shot, acts) {
  if (!shot) return [large("report a frame", "report", () => acts.openReport(null))];
  const isHeld = shot.standing === "held";
  return [
    isHeld ? large("more time", "extend", () => acts.extend(shot)) : large("take it", "take", () => acts.take(shot), true),
    large("I shot it", "report", () => acts.openReport(shot), isHeld),
  ];
}

/** @param {{shot: Shot|null, status: string, isPending: boolean, acts: Acts}} options */
export function actionButtons({ shot, status, isPending, acts }) {
  const isOut = status === "clouded" || status === "out";
  const buttons = largeButtons(shot, acts);
  for (const button of buttons) if (isPending) button.disabled = true;
  return element(
    "div",
    { class: "actions" },
    element("div", { class: "large-buttons" }, buttons),
    element(
      "div",
      { class: "small-buttons" },
      shot?.standing === "held" ? small("give it back", "give", () => acts.giveBack(shot)) : null,
      isOut ? small("I am in", "status", () => acts.setStatus("in")) : small("clouded", "status", () => acts.setStatus("clouded")),
      !isOut && status !== "in" ? small("I am in", "status-in", () => acts.setStatus("in")) : null,
      small("another tile", "others", () => acts.showOthers()),
    ),
  );
}

const WAYS = {
  starting: "connecting…",
  live: "live",
  asking: "live, asking every 5 s",
  offline: "offline: nothing can be sent now",
};

/** @param {keyof typeof WAYS} way */
export function wayText(way) {
  return WAYS[way] ?? way;
}
