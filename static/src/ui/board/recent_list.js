/** What just happened, newest first, in the server's own plain sentences. */

import { element, fill } from "../shell/element.js";
import { utcMinute } from "../../state/words.js";

/** @param {Element} place @param {import("./board_model.js").BoardModel} model */
export function recentList(place, model) {
  const list = element("ol", { class: "board-recent", tabindex: "0", "aria-label": "what just happened" });
  place.append(list);
  let shown = -1;
  model.onChange(() => {
    const { state, seq } = model;
    if (!state || seq === shown) return;
    shown = seq;
    const lines = [...state.recent].reverse().map(({ at, said }) =>
      element("li", {}, element("time", { datetime: at }, utcMinute(at)), element("span", {}, said)),
    );
    const empty = element("li", { class: "quiet" }, "Nothing yet. What observers do appears here as it happens.");
    fill(list, ...(lines.length > 0 ? lines : [empty]));
  });
}
