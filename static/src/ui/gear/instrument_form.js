/** One instrument: what it is, what it sees, how it works through a night, and the Sun. */

import { ask } from "../../api/request.js";
import { SendOnce } from "../../api/send_once.js";
import { choice, field, messagePlace, readFields, showProblem, tick, whileBusy } from "../shell/controls.js";
import { forgetDraft, keepDraft, recallDraft } from "../shell/draft.js";
import { element, fill } from "../shell/element.js";
import { fieldSection } from "./field_section.js";
import { readInstrument } from "./instrument_values.js";
import { mountSection } from "./mount_section.js";
import { PRESETS, presetOf, presetValues } from "./presets.js";

/** @typedef {import("./gear_cards.js").Instrument} Instrument */
/** @typedef {import("./gear_cards.js").Site} Site */
/** @typedef {import("./presets.js").Preset} Preset */

/** @typedef {{onSaved: () => void, onLeft: () => void}} Ways */

/**
 * @typedef {object} Job
 * @property {Instrument|null} instrument
 * @property {Site[]} sites
 * @property {Ways} ways
 * @property {Preset} preset
 * @property {HTMLFormElement} form
 * @property {HTMLElement} said
 * @property {SendOnce} once
 */

/** @param {Instrument|null} instrument */
function draftName(instrument) {
  return `instrument-${instrument?.id ?? "new"}`;
}

/** @param {Record<string, any>} values @param {Job} job */
function nameSection(values, job) {
  const sites = job.sites.map(({ id, name }) => ({ value: String(id), label: name }));
  return [
    field({ name: "name", label: "name, as others will see it", value: values.name }),
    choice({ name: "site", label: "where it stands", value: String(values.site ?? job.sites[0]?.id), options: sites }),
  ];
}

/** @param {Record<string, any>} values */
function seriesSection(values) {
  return [
    element("h3", {}, "A usual series on one tile"),
    element(
      "div",
      { class: "fields" },
      field({ name: "n_exposures", label: "exposures", value: values.n_exposures, number: true }),
      field({ name: "exposure_s", label: "seconds each", value: values.exposure_s, unit: "s", number: true }),
      field({ name: "band", label: "band or filter", value: values.band, hint: "V, R, g, r, clear …" }),
      field({ name: "overhead_s", label: "between tiles", value: values.overhead_s, unit: "s", number: true, hint: "settling, focusing, reading out" }),
      field({ name: "slew_deg_per_s", label: "moving speed", value: values.slew_deg_per_s, unit: "°/s", number: true }),
      field({ name: "tiles_per_night", label: "tiles a night at most", value: values.tiles_per_night, number: true, hint: "what you are willing to do" }),
    ),
  ];
}

/** @param {Record<string, any>} values @param {Preset} preset */
function lightSection(values, preset) {
  const isCamera = preset.values.kind === "camera";
  const hasOptics = preset.values.kind === "eyepiece" || preset.values.kind === "binoculars";
  return element(
    "details",
    {},
    element("summary", {}, "for the depth forecast (assumed unless you know better)"),
    element(
      "div",
      { class: "fields" },
      field({ name: "throughput", label: "share of the light that counts", value: values.throughput, number: true, hint: "optics × filter × detector, 0 to 1" }),
      field({ name: "obstruction", label: "central obstruction", value: values.obstruction, number: true, hint: "share of the diameter" }),
      isCamera ? field({ name: "read_noise_e", label: "read noise", value: values.read_noise_e, unit: "e⁻", number: true }) : null,
      isCamera ? field({ name: "dark_e_per_s", label: "dark current", value: values.dark_e_per_s, unit: "e⁻/s", number: true, hint: "of one pixel, as cooled" }) : null,
      isCamera ? field({ name: "full_well_e", label: "full well", value: values.full_well_e, unit: "e⁻", number: true, hint: "where a pixel saturates" }) : null,
      hasOptics ? field({ name: "magnification", label: "magnification", value: values.magnification ?? "", unit: "×", number: true, hint: "the first number on binoculars; empty: usual" }) : null,
      isCamera ? field({ name: "rotation_deg", label: "camera angle", value: values.rotation_deg, unit: "°", number: true, hint: "east of north; empty: not fixed" }) : null,
    ),
  );
}

const SUN_WORDS =
  "Never point optics or eyes near the Sun: it blinds at once. While the Sun is up, nothing is given to instruments that anybody can look through, nor to any that its owner has not declared here. Local rules and your site’s own safety officer come first.";

/** @param {Record<string, any>} values @param {Preset} preset */
function sunSection(values, preset) {
  const heading = element("h3", {}, "The Sun");
  if (preset.values.kind !== "camera") {
    return [heading, element("p", { class: "alarm" }, element("strong", {}, "Eyes only after sunset. "), SUN_WORDS)];
  }
  return [
    heading,
    element("p", { class: "alarm" }, element("strong", {}, "Care. "), SUN_WORDS),
    tick({ name: "is_daytime_rated", label: "It is built for work in daylight, by its maker’s word.", isOn: values.is_daytime_rated }),
    tick({ name: "is_eye_free", label: "Nobody can look into it: no eyepiece, no optical finder.", isOn: values.is_eye_free }),
    element(
      "div",
      { class: "fields" },
      field({ name: "sun_avoidance_deg", label: "it stays away from the Sun by", value: values.sun_avoidance_deg, unit: "°", number: true, hint: "never below 20°, the way there included" }),
    ),
  ];
}

/** @param {Job} job @param {Record<string, any>} values */
function presetChoice(job, values) {
  return choice({
    name: "preset",
    label: "what it is",
    value: job.preset.id,
    options: PRESETS.map(({ id, label }) => ({ value: id, label })),
    onchange: (id) => changePreset(job, id, values),
  });
}

/** Another kind brings its own numbers; name and site stay as typed. @param {Job} job @param {string} id @param {Record<string, any>} values */
function changePreset(job, id, values) {
  const { name, site } = readFields(job.form);
  job.preset = PRESETS.find((preset) => preset.id === id) ?? job.preset;
  drawForm(job, { ...values, ...presetValues(job.preset), name, site });
}

/** @param {Job} job @param {Record<string, any>} values */
function drawForm(job, values) {
  const { instrument, form, preset, said } = job;
  const save = element("button", { type: "submit", class: "main", "data-save": true }, instrument ? "keep the change" : "add the instrument");
  const leave = element("button", { type: "button", onclick: () => leaveForm(job) }, "leave without saving");
  fill(
    form,
    element("h2", {}, instrument ? `Change ${instrument.name}` : "A new instrument"),
    presetChoice(job, values),
    element("p", { class: "small quiet" }, `${preset.hint}. The numbers below are sensible for it; change what differs.`),
    ...nameSection(values, job),
    ...fieldSection(values, preset, form),
    ...seriesSection(values),
    lightSection(values, preset),
    mountSection(values, preset),
    ...sunSection(values, preset),
    instrument ? tick({ name: "is_in_use", label: "in use: it is given tiles", isOn: values.is_in_use }) : null,
    said,
    element("p", { class: "row" }, save, leave),
  );
}

/** @param {Job} job */
function leaveForm(job) {
  forgetDraft(draftName(job.instrument));
  job.ways.onLeft();
}

/** @param {Job} job */
async function save(job) {
  const values = readInstrument(job.form, job.preset, job.instrument);
  if (!values) return;
  try {
    if (job.instrument) await ask(`instruments/${job.instrument.id}`, { method: "PATCH", json: values });
    else await job.once.post("instruments", values);
    forgetDraft(draftName(job.instrument));
    job.ways.onSaved();
  } catch (error) {
    showProblem(job.said, error, job.form);
  }
}

/** @param {Instrument|null} instrument @param {Record<string, any>|null} kept */
function startingPreset(instrument, kept) {
  if (kept?.preset) return PRESETS.find(({ id }) => id === kept.preset) ?? PRESETS[1];
  return instrument ? presetOf(instrument) : PRESETS[1];
}

/**
 * @param {Instrument|null} instrument    null: a new one
 * @param {Site[]} sites
 * @param {Ways} ways
 */
export function instrumentForm(instrument, sites, ways) {
  const kept = recallDraft(draftName(instrument));
  const form = element("form", { class: "stack panel", novalidate: true });
  /** @type {Job} */
  const job = { instrument, sites, ways, form, preset: startingPreset(instrument, kept), said: messagePlace(), once: new SendOnce() };
  drawForm(job, { ...presetValues(job.preset), is_in_use: true, ...instrument, ...kept });
  keepDraft(form, draftName(instrument));
  form.addEventListener("submit", (event) => {
    event.preventDefault();
    const button = /** @type {HTMLButtonElement} */ (form.querySelector("[data-save]"));
    void whileBusy(button, () => save(job));
  });
  return form;
}
