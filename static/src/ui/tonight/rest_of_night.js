/** The rest of the night, and other tiles with their reasons: lists whose lines are buttons. */

import { localClock, utcClock } from "../shell/clock.js";
import { element } from "../shell/element.js";
import { perCent } from "../shell/numbers.js";

/** @typedef {import("./shots.js").Shot} Shot */

/** @param {Shot} shot */
function shareText(shot) {
  return shot.gain === null ? "" : `${perCent(shot.gain)} to gain`;
}

/** @param {Shot} shot @param {(shot: Shot) => void} onChoose */
function line(shot, onChoose) {
  const mark = shot.standing === "held" ? "held" : shot.standing === "offered" ? "offered" : "free";
  return element(
    "li",
    {},
    element(
      "button",
      { type: "button", class: `night-line is-${mark}`, onclick: () => onChoose(shot) },
      element("span", {}, `${utcClock(shot.starts_at)} `, element("span", { class: "small quiet" }, `UTC, ${localClock(shot.starts_at)} here`)),
      element("span", {}, `tile ${shot.tile} · ${mark}`),
      element("span", { class: "small quiet" }, shareText(shot)),
      shot.reason ? element("span", { class: "small quiet night-reason" }, shot.reason) : null,
    ),
  );
}

/** @param {Shot[]} shots @param {(shot: Shot) => void} onChoose */
export function restSection(shots, onChoose) {
  const words = "Nothing more is planned for you tonight. The plan is made anew after every change; this page follows.";
  const list = shots.length > 0 ? element("ul", {}, shots.map((shot) => line(shot, onChoose))) : element("p", { class: "small quiet" }, words);
  return element("section", { class: "rest" }, element("h2", {}, "The rest of your night"), list);
}

/** @param {Shot[]} shots @param {(shot: Shot) => void} onChoose @param {() => void} onBack */
export function othersSection(shots, onChoose, onBack) {
  const list = shots.length > 0
    ? element("ul", {}, shots.map((shot) => line(shot, onChoose)))
    : element("p", { class: "note" }, "There is no other free tile that is up, dark and worth having for this instrument now. Try again in half an hour, or choose another instrument.");
  return element(
    "section",
    { class: "stack" },
    element("h2", {}, "Another tile"),
    element("p", { class: "small quiet" }, "Choosing one only shows it; it is yours when you take it."),
    list,
    element("p", {}, element("button", { type: "button", onclick: onBack }, "back to my tile")),
  );
}
