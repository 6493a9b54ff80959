/** What a coordinator does from the Board: open, plan now, invite, close. */

import { SendOnce } from "../../api/send_once.js";
import { element, fill } from "../shell/element.js";
import { messagePlace, showProblem, whileBusy } from "../shell/controls.js";

/**
 * @typedef {import("./board_model.js").BoardModel} BoardModel
 * @typedef {import("../../state/shapes.js").PlanShown} PlanShown
 */

const ROLES = ["observer", "onlooker", "coordinator"];

export class CoordinatorPanel {
  #sender = new SendOnce();
  #message = messagePlace();
  #buttons = element("div", { class: "board-acts" });
  #extra = element("div", { class: "board-extra" });
  /** @type {PlanShown | null | "none"} */ #planBefore = "none";
  #shownStatus = "";

  /** @param {Element} place @param {BoardModel} model @param {string} campaign */
  constructor(place, model, campaign) {
    this.model = model;
    this.campaign = campaign;
    place.append(element("h2", {}, "coordinate"), this.#buttons, this.#extra, this.#message);
    model.onChange((changed) => changed.has("state") && this.#show());
  }

  get #isPlanAwaited() {
    return this.#planBefore !== "none";
  }

  #show() {
    const { state } = this.model;
    if (!state) return;
    if (this.#isPlanAwaited && state.plan !== this.#planBefore) {
      this.#planBefore = "none";
      this.#say("The new plan is on the map.");
    }
    if (state.campaign.status === this.#shownStatus) return;
    this.#shownStatus = state.campaign.status;
    fill(this.#extra);
    fill(this.#buttons, ...this.#buttonsFor(state.campaign.status));
  }

  /** @param {"draft" | "live" | "closed"} status @returns {HTMLElement[]} */
  #buttonsFor(status) {
    const invite = this.#button("invite", () => this.#askRole());
    if (status === "closed") return [element("p", { class: "quiet small" }, "Closed: nothing more is planned or counted.")];
    if (status === "draft") return [this.#button("open the campaign", () => this.#open(), "main"), invite];
    return [
      this.#button("plan now", () => this.#plan()),
      invite,
      this.#button("close", () => this.#askClose()),
    ];
  }

  /** @param {string} text @param {() => void | Promise<void>} act @param {string} [look] */
  #button(text, act, look = "") {
    const node = element("button", { type: "button", class: look, "data-focus": `act-${text}` }, text);
    node.addEventListener("click", () => void whileBusy(node, async () => act()));
    return node;
  }

  /** @param {string} text */
  #say(text) {
    this.#message.replaceChildren(element("p", { class: "small" }, text));
  }

  /**
   * @param {string} path
   * @param {any} json
   * @returns {Promise<any>} null when it was refused, which is then shown
   */
  async #post(path, json) {
    this.#message.replaceChildren();
    try {
      return await this.#sender.post(path, json);
    } catch (error) {
      showProblem(this.#message, error);
      return null;
    }
  }

  async #open() {
    await this.#post(`campaigns/${this.campaign}/open`, {});
  }

  async #plan() {
    this.#planBefore = this.model.state?.plan ?? null;
    const answer = await this.#post(`campaigns/${this.campaign}/plan`, {});
    if (answer === null) this.#planBefore = "none";
    else if (this.#isPlanAwaited) this.#say("Asked for. The new plan appears here when it is made.");
  }

  #askRole() {
    const choose = ROLES.map((role) => this.#button(`as ${role}`, () => this.#invite(role)));
    fill(this.#extra, element("p", { class: "small" }, "A link that works once, for somebody who joins"), element("div", { class: "board-acts" }, choose, this.#never()));
  }

  #never() {
    return this.#button("leave it", () => fill(this.#extra));
  }

  /** @param {string} role */
  async #invite(role) {
    const answer = await this.#post("invitations", { role });
    if (!answer) return;
    const link = new URL(answer.link, location.href).href;
    const copy = this.#button("copy the link", () => this.#copy(link));
    fill(
      this.#extra,
      element("p", { class: "small" }, `For one ${role}, until ${answer.expires_at.slice(0, 16).replace("T", " ")} UTC:`),
      element("p", { class: "board-link", tabindex: "0" }, link),
      element("div", { class: "board-acts" }, copy, this.#never()),
    );
  }

  /** @param {string} link */
  async #copy(link) {
    try {
      await navigator.clipboard.writeText(link);
      this.#say("Copied.");
    } catch {
      this.#say("This browser does not allow copying here: mark the link and copy it by hand.");
    }
  }

  #askClose() {
    fill(
      this.#extra,
      element("p", { class: "small" }, "Closing is for good: no more claims, frames or plans. Everything stays readable."),
      element("div", { class: "board-acts" }, this.#button("close it for good", () => this.#close(), "main"), this.#never()),
    );
  }

  async #close() {
    await this.#post(`campaigns/${this.campaign}/close`, {});
  }
}
