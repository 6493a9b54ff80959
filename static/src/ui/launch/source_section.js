/** What the light could do: which model, every number that it assumes, and how it looks. */

import { ask, send } from "../../api/request.js";
import { choice, field, messagePlace, readFields, showProblem, whileBusy } from "../shell/controls.js";
import { element, fill } from "../shell/element.js";
import { lightChart } from "../shell/light_chart.js";
import { changedNumbers, fieldName, groupsOf, shortLabel, valueText } from "./source_values.js";

/** @typedef {import("./source_values.js").SourceShown} SourceShown */

/** Up to this many numbers stand open; more are folded by what they belong to. */
const MOST_OPEN = 8;
const PRIORS = [
  { value: "flat", label: "as the alert says, nothing more" },
  { value: "galactic", label: "where the stars of the Galaxy are" },
];
const PRIOR_NOTE = "The map on this page shows the alert alone. With the stars of the Galaxy the campaign's region is narrower: it is computed at launch, and the Board shows it.";

export class SourceSection {
  node = element("div", { class: "stack" }, element("h3", {}, "What the light could do"));
  /** @type {SourceShown[]} */ #presets = [];
  #body = element("div", { class: "stack" });
  #picture = element("div", {});
  #said = messagePlace();

  /** @param {Record<string, any>} typed    as the form was left */
  constructor(typed) {
    this.typed = typed;
    this.node.append(this.#said, this.#body);
    void this.#load();
  }

  async #load() {
    try {
      this.#presets = (await ask("source-models")).presets;
      this.show(this.typed.preset ?? "steady");
    } catch (error) {
      showProblem(this.#said, error);
    }
  }

  /** @returns {SourceShown | undefined} */
  get preset() {
    return this.#presets.find(({ preset }) => preset === this.chosen);
  }

  /** @param {string} name */
  show(name) {
    const isSwitch = this.chosen !== undefined;
    this.chosen = name;
    const { preset } = this;
    if (!preset) return;
    const prior = isSwitch ? preset.prior : (this.typed.prior ?? preset.prior);
    const names = this.#presets.map((one) => ({ value: one.preset, label: one.preset }));
    fill(
      this.#body,
      choice({ name: "preset", label: "source model", value: name, options: names, onchange: (value) => this.show(value) }),
      element("p", { class: "small quiet" }, preset.about),
      ...this.#numbers(preset),
      choice({ name: "prior", label: "where sources are", value: prior, options: PRIORS }),
      element("p", { class: "small quiet" }, PRIOR_NOTE),
      this.#picture,
      element("p", {}, this.#drawButton()),
    );
    fill(this.#picture, lightChart(preset));
  }

  /** @param {SourceShown} preset */
  #numbers({ assumptions }) {
    const groups = groupsOf(assumptions);
    const isMany = assumptions.length > MOST_OPEN;
    return groups.map(([group, members]) => {
      const fields = element("div", { class: "fields" }, members.map((one) => this.#field(one)));
      if (!isMany) return fields;
      return element("details", {}, element("summary", {}, group || "everything else"), fields);
    });
  }

  /** @param {import("./source_values.js").Assumption} assumption */
  #field(assumption) {
    const { name, value, unit, source } = assumption;
    const typed = this.typed.preset === this.chosen ? this.typed[fieldName(name)] : undefined;
    return field({ name: fieldName(name), label: shortLabel(assumption), value: typed ?? valueText(value), unit: unit || undefined, number: true, hint: source });
  }

  #drawButton() {
    const button = element("button", { type: "button" }, "draw with these numbers");
    button.addEventListener("click", () => whileBusy(button, () => this.#draw()));
    return button;
  }

  async #draw() {
    this.#said.replaceChildren();
    try {
      fill(this.#picture, lightChart(await send("source-models", this.read().source)));
    } catch (error) {
      showProblem(this.#said, error);
    }
  }

  /** The model as it is sent, and the fields that hold no number. */
  read() {
    const typed = readFields(this.node);
    const { preset } = this;
    if (!preset) return { source: this.typed.preset ?? "steady", prior: undefined, unread: [] };
    const { parameters, unread } = changedNumbers(preset, typed);
    return { source: { preset: preset.preset, parameters }, prior: typed.prior, unread };
  }
}
