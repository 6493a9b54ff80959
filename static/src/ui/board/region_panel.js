/** The region: what the newest revision changed, for everybody; its constraints, which coordinators change. */

import { ask } from "../../api/request.js";
import { Problem } from "../../api/problem.js";
import { SendOnce } from "../../api/send_once.js";
import { choicesFor, constraintText, regionStory } from "../../state/region_story.js";
import { messagePlace, showProblem, whileBusy } from "../shell/controls.js";
import { element, fill } from "../shell/element.js";

/**
 * @typedef {import("./board_model.js").BoardModel} BoardModel
 * @typedef {import("../../state/region_story.js").ConstraintShown} ConstraintShown
 */

export class RegionPanel {
  #sender = new SendOnce();
  #story = element("div", { class: "board-extra", role: "status" });
  #buttons = element("div", { class: "board-acts board-region-acts" });
  #list = element("div", { class: "board-extra" });
  #message = messagePlace();
  #picker = element("input", { type: "file", hidden: true, accept: ".fits,.fit,.gz,.json,.xml" });
  /** What the picked file is for. @type {Record<string, any>} */ #wish = { way: "add" };
  #shownRevision = 0;
  #isOpen = false;

  /** @param {Element} place @param {BoardModel} model @param {{campaign: string, isCoordinator: boolean}} who */
  constructor(place, model, { campaign, isCoordinator }) {
    this.model = model;
    this.path = `campaigns/${campaign}/region`;
    this.isCoordinator = isCoordinator;
    place.append(this.#story, this.#buttons, this.#list, this.#message, this.#picker);
    this.#picker.addEventListener("change", () => void this.#picked());
    model.onChange((changed) => changed.has("state") && this.#show());
  }

  get #mayChange() {
    return this.isCoordinator && this.model.state?.campaign.status !== "closed";
  }

  #show() {
    const region = this.model.state?.region;
    if (!region || region.revision === this.#shownRevision) return;
    this.#shownRevision = region.revision;
    const { headline, notes, is_trouble } = regionStory(region);
    fill(
      this.#story,
      element("p", { class: is_trouble ? "trouble" : "", "data-region": "change" }, headline),
      ...notes.map((note) => element("p", { class: "small quiet" }, note)),
    );
    const add = this.#mayChange ? this.#button("add a constraint from a file", () => this.#pick({ way: "add" })) : null;
    fill(this.#buttons, this.#button("constraints", () => this.#toggle()), add);
    if (this.#isOpen) void this.#read();
  }

  /** @param {string} text @param {() => void | Promise<void>} act @param {string} [focus] */
  #button(text, act, focus = text) {
    const node = element("button", { type: "button", "data-focus": `region-${focus}` }, text);
    node.addEventListener("click", () => void whileBusy(node, async () => act()));
    return node;
  }

  async #toggle() {
    this.#isOpen = !this.#isOpen;
    if (this.#isOpen) await this.#read();
    else fill(this.#list);
  }

  async #read() {
    try {
      const { constraints } = await ask(`${this.path}/revisions`);
      const rows = constraints.map((/** @type {ConstraintShown} */ one) => this.#row(constraints, one));
      if (this.#isOpen) fill(this.#list, ...rows);
    } catch (error) {
      showProblem(this.#message, error);
    }
  }

  /** @param {ConstraintShown[]} constraints @param {ConstraintShown} constraint */
  #row(constraints, constraint) {
    const words = element("p", { class: constraint.is_on ? "" : "quiet" }, constraintText(constraint));
    if (!this.#mayChange) return words;
    const acts = choicesFor(constraints, constraint).map((choice) =>
      this.#button(choice, () => this.#choose(choice, constraint.number), `${choice}-${constraint.number}`),
    );
    return element("div", { "data-constraint": constraint.number }, words, element("div", { class: "board-acts" }, acts));
  }

  /** @param {string} choice @param {number} constraint */
  async #choose(choice, constraint) {
    if (choice === "replace by a file") this.#pick({ way: "replace", constraint });
    else if (choice === "retract") this.#askRetract(constraint);
    else await this.#revise({ way: "switch", constraint, is_on: choice === "switch on" });
  }

  /** @param {number} constraint */
  #askRetract(constraint) {
    fill(
      this.#message,
      element("p", { class: "small" }, `Constraint ${constraint} is taken out for good. It stays in the record.`),
      element(
        "div",
        { class: "board-acts" },
        this.#button(`retract constraint ${constraint}`, () => this.#revise({ way: "retract", constraint })),
        this.#button("leave it", () => fill(this.#message)),
      ),
    );
  }

  /** @param {Record<string, any>} wish */
  #pick(wish) {
    this.#wish = wish;
    this.#picker.click();
  }

  async #picked() {
    const file = this.#picker.files?.[0];
    this.#picker.value = "";
    if (!file) return;
    fill(this.#message, element("p", { class: "small" }, `Reading ${file.name} …`));
    const form = new FormData();
    form.append("file", file);
    try {
      const { upload } = await ask("region", { method: "POST", form });
      await this.#revise({ ...this.#wish, upload, filename: file.name.slice(-100) });
    } catch (error) {
      showProblem(this.#message, error);
    }
  }

  /** @param {Record<string, any>} wish */
  async #revise(wish) {
    fill(this.#message);
    try {
      await this.#sender.post(this.path, wish);
    } catch (error) {
      showProblem(this.#message, error);
      if (error instanceof Problem && error.code === "messages-apart") this.#askApart(wish);
    }
  }

  /** Messages far apart are combined only on a coordinator's word. @param {Record<string, any>} wish */
  #askApart(wish) {
    this.#message.append(
      element(
        "div",
        { class: "board-acts" },
        this.#button("they belong together: combine them", () => this.#revise({ ...wish, despite_time_apart: true })),
        this.#button("leave it", () => fill(this.#message)),
      ),
    );
  }
}
