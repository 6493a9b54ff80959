/** Every event, newest first, with a choice of what they are about. */

import { eventsOf, GROUPS } from "../../state/log_rows.js";
import { element, fill } from "../shell/element.js";

/** @typedef {import("../../state/shapes.js").Event} Event */

const N_SHOWN = 200;

export class EventTable {
  /** @type {Event[]} */ #events = [];
  #group = "all";
  #n = N_SHOWN;
  #groups = element("div", { class: "board-switch", role: "group", "aria-label": "what about" });
  #list = element("ol", { class: "log-events" });
  #more = element("button", { type: "button", hidden: true, onclick: () => this.#showMore() }, "show earlier ones");

  /** @param {Element} place */
  constructor(place) {
    place.append(this.#groups, this.#list, this.#more);
    this.#show();
  }

  /** @param {Event[]} events in order; those that are known already are left out */
  add(events) {
    const last = this.#events.at(-1)?.seq ?? 0;
    this.#events.push(...events.filter(({ seq }) => seq > last));
    this.#show();
  }

  #showMore() {
    this.#n += N_SHOWN;
    this.#show();
  }

  /** @param {string} group */
  #choose(group) {
    this.#group = group;
    this.#n = N_SHOWN;
    this.#show();
  }

  #show() {
    fill(this.#groups, ...Object.keys(GROUPS).map((group) => this.#groupButton(group)));
    const rows = eventsOf(this.#events, this.#group);
    const empty = element("li", { class: "quiet" }, "Nothing of this kind yet.");
    fill(this.#list, ...(rows.length > 0 ? rows.slice(0, this.#n).map(eventRow) : [empty]));
    this.#more.hidden = rows.length <= this.#n;
  }

  /** @param {string} group */
  #groupButton(group) {
    return element(
      "button",
      { type: "button", "aria-pressed": String(group === this.#group), "data-focus": group, onclick: () => this.#choose(group) },
      group,
    );
  }
}

/** @param {Event} event */
function eventRow({ seq, at, said }) {
  return element(
    "li",
    {},
    element("span", { class: "quiet" }, String(seq)),
    element("time", { datetime: at }, at.slice(0, 19).replace("T", " ")),
    element("span", {}, said),
  );
}
