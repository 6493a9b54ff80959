/** The tile under the pointer, or the chosen one, answers; and the coordinates under the pointer. */

import { decText, decimalText, raText } from "../../sky/sexagesimal.js";
import { raDec } from "../../sky/vectors.js";
import { tileStory } from "../../state/tile_story.js";
import { element, fill } from "../shell/element.js";

/** @typedef {import("./board_model.js").BoardModel} BoardModel */

/** Text that a tap copies. @param {string} text @returns {HTMLElement} */
function copyable(text) {
  const button = element("button", { type: "button", class: "link board-copy", title: "copy" }, text);
  button.addEventListener("click", async () => {
    try {
      await navigator.clipboard.writeText(text);
      button.textContent = "copied";
    } catch {
      button.textContent = `${text} (copying is not allowed here)`;
    }
    setTimeout(() => {
      button.textContent = text;
    }, 1500);
  });
  return button;
}

/** @param {Element} place @param {BoardModel} model */
export function tileCard(place, model) {
  /** @type {number | null} */
  let hovered = null;
  let shown = "";
  const show = () => {
    const number = hovered ?? model.chosen;
    const story = number === null || !model.state ? null : tileStory(model.state, number, model.shareOf(number), model.now_ms);
    const text = JSON.stringify(story);
    if (text === shown) return;
    shown = text;
    fill(place, ...(story && number !== null ? storyNodes(story, model, number) : [hint()]));
  };
  model.onChange(show);
  show();
  return {
    /** @param {number | null} number */
    hover(number) {
      if (number === hovered) return;
      hovered = number;
      show();
    },
  };
}

function hint() {
  return element("p", { class: "quiet small" }, "Point at a tile, or tap it: it says who has it and how deep it was searched.");
}

/**
 * @param {import("../../state/tile_story.js").Story} story
 * @param {BoardModel} model
 * @param {number} number
 */
function storyNodes(story, model, number) {
  const tile = /** @type {import("../../state/shapes.js").TileShown} */ (model.state?.tiles[number]);
  const sexagesimal = `${raText(tile.ra_deg)} ${decText(tile.dec_deg)}`;
  return [
    element("p", { class: "board-story-head" }, story.headline),
    ...story.lines.map((line) => element("p", {}, line)),
    element("p", { class: "board-coordinates" }, copyable(sexagesimal), copyable(decimalText(tile))),
  ];
}

/** @param {Element} place @param {import("../../sky/vectors.js").Vector | null} v */
export function showCoordinates(place, v) {
  if (!v) {
    place.textContent = "";
    return;
  }
  const at = raDec(v);
  place.textContent = `${raText(at.ra_deg)}  ${decText(at.dec_deg)}   ${decimalText(at)}`;
}
