/** Every frame: whose, when, how deep, how it counts; one's own can be withdrawn here. */

import { SendOnce } from "../../api/send_once.js";
import { countsAs, framesNewestFirst } from "../../state/log_rows.js";
import { messagePlace, showProblem, whileBusy } from "../shell/controls.js";
import { element, fill } from "../shell/element.js";

/** @typedef {import("../../state/shapes.js").State} State */

const N_SHOWN = 300;
const HEADS = ["frame", "observer", "tile", "mid-time, UTC", "band", "limit", "counts as", ""];

export class FrameTable {
  /** @type {State | null} */ #state = null;
  /** @type {number | null} */ #asked = null;
  #sender = new SendOnce();
  #body = element("tbody", {});
  #message = messagePlace();

  /** @param {Element} place @param {{campaign: string, me: number | null, isCoordinator: boolean}} reader */
  constructor(place, reader) {
    this.reader = reader;
    const head = element("tr", {}, HEADS.map((text) => element(text ? "th" : "td", text ? { scope: "col" } : {}, text)));
    place.append(
      this.#message,
      element("div", { class: "log-frames", tabindex: "0", role: "region", "aria-label": "frames" }, element("table", {}, element("thead", {}, head), this.#body)),
    );
  }

  /** @param {State} state */
  show(state) {
    if (state.frames === this.#state?.frames && state.campaign === this.#state.campaign) return;
    this.#state = state;
    this.#fill();
  }

  #fill() {
    const state = /** @type {State} */ (this.#state);
    const rows = framesNewestFirst(state).slice(0, N_SHOWN).map(({ number, frame }) => this.#row(number, frame, state));
    const empty = element("tr", {}, element("td", { colspan: HEADS.length, class: "quiet" }, "No frame yet. Frames are reported on the Tonight page."));
    fill(this.#body, ...(rows.length > 0 ? rows : [empty]));
  }

  /** @param {number} number @param {import("../../state/shapes.js").FrameShown} frame @param {State} state */
  #row(number, frame, state) {
    const cells = [
      String(number),
      state.observers[frame.observer]?.name ?? "",
      frame.tile === null ? "–" : String(frame.tile),
      frame.mid_time.slice(0, 19).replace("T", " "),
      frame.band,
      frame.limit_mag === null ? "–" : `${frame.limit_mag.toFixed(1)} (${frame.limit_kind})`,
      countsAs(frame, state.campaign.source),
    ].map((text) => element("td", {}, text));
    return element("tr", { class: frame.state }, cells, element("td", {}, this.#act(number, frame, state)));
  }

  /** @param {number} number @param {import("../../state/shapes.js").FrameShown} frame @param {State} state */
  #act(number, frame, state) {
    const { me, isCoordinator } = this.reader;
    const may = (isCoordinator || frame.observer === me) && frame.state === "counted" && state.campaign.status === "live";
    if (!may) return null;
    if (this.#asked !== number) return this.#button("withdraw", number, () => this.#ask(number));
    return [
      this.#button("withdraw it", number, () => this.#withdraw(number)),
      this.#button("keep it", -number, () => this.#ask(null)),
    ];
  }

  /** @param {string} text @param {number} key @param {() => void | Promise<void>} act */
  #button(text, key, act) {
    const button = element("button", { type: "button", class: "link", "data-focus": `frame-${key}` }, text);
    button.addEventListener("click", () => void whileBusy(button, async () => act()));
    return button;
  }

  /** @param {number | null} number */
  #ask(number) {
    this.#asked = number;
    this.#fill();
  }

  /** @param {number} number */
  async #withdraw(number) {
    this.#message.replaceChildren();
    try {
      await this.#sender.post(`campaigns/${this.reader.campaign}/frames/${number}/withdraw`, {});
      this.#asked = null;
    } catch (error) {
      showProblem(this.#message, error);
    }
  }
}
