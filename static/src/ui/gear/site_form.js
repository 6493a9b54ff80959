/** One site: a place on the Earth and its sky. */

import { ask } from "../../api/request.js";
import { SendOnce } from "../../api/send_once.js";
import { field, markField, messagePlace, readFields, showProblem, whileBusy } from "../shell/controls.js";
import { forgetDraft, keepDraft, recallDraft } from "../shell/draft.js";
import { element } from "../shell/element.js";
import { readAngle, readNumber } from "../shell/numbers.js";
import { devicePlace } from "./device_place.js";
import { horizonText, readHorizon } from "./horizon_words.js";

/** @typedef {import("./gear_cards.js").Site} Site */
/** @typedef {{onSaved: () => void, onLeft: () => void}} Ways */

const NEW_SITE = { name: "", latitude_deg: "", longitude_deg: "", height_m: "", sky_brightness_mag: 20.5, seeing_arcsec: 3, min_altitude_deg: 20, horizon_mask: [], clear_percent: 60 };

/** @param {Site|null} site @returns {Record<string, any>} */
function startingValues(site) {
  const kept = recallDraft(draftName(site));
  const stored = site ? { ...site, clear_percent: Math.round(site.clear_chance * 100) } : NEW_SITE;
  return { ...stored, ...kept };
}

/** @param {Site|null} site */
function draftName(site) {
  return `site-${site?.id ?? "new"}`;
}

/** @param {Record<string, any>} values */
function placeFields(values) {
  return element(
    "div",
    { class: "fields" },
    field({ name: "latitude_deg", label: "latitude", value: values.latitude_deg, unit: "°", number: true, hint: "north positive; 51.48 or 51 28 40" }),
    field({ name: "longitude_deg", label: "longitude", value: values.longitude_deg, unit: "°", number: true, hint: "east positive; −0.005" }),
    field({ name: "height_m", label: "height", value: values.height_m, unit: "m", number: true, hint: "above the sea" }),
  );
}

/** @param {Record<string, any>} values */
function skyFields(values) {
  return element(
    "div",
    { class: "fields" },
    field({ name: "sky_brightness_mag", label: "dark sky at the zenith", value: values.sky_brightness_mag, number: true, hint: "mag per square arcsec: 18 in a city, 20.5 in a village, 21.7 far out" }),
    field({ name: "seeing_arcsec", label: "seeing", value: values.seeing_arcsec, unit: "″", number: true, hint: "usual blur of a star" }),
    field({ name: "min_altitude_deg", label: "lowest altitude you can use", value: values.min_altitude_deg, unit: "°", number: true, hint: "trees, houses, haze" }),
    field({ name: "clear_percent", label: "clear nights at this season", value: values.clear_percent, unit: "%", number: true, hint: "an honest guess" }),
    field({ name: "horizon_mask", label: "skyline, where it is higher", value: typeof values.horizon_mask === "string" ? values.horizon_mask : horizonText(values.horizon_mask), isWide: true, hint: "azimuth and altitude, point by point: 90 35, 135 12, 270 20 (north 0, east 90); straight lines between; empty: none" }),
  );
}

const NUMBERS = ["height_m", "sky_brightness_mag", "seeing_arcsec", "min_altitude_deg", "clear_percent"];

/** Typed words to numbers; null when one cannot be read, which is marked. @param {HTMLElement} form */
function siteValues(form) {
  const typed = readFields(form);
  const numbers = Object.fromEntries(NUMBERS.map((name) => [name, readNumber(typed[name] || (name === "height_m" ? "0" : ""))]));
  const angles = Object.fromEntries(["latitude_deg", "longitude_deg"].map((name) => [name, readAngle(typed[name], { isHours: false })]));
  const all = { ...numbers, ...angles };
  const unread = Object.keys(all).filter((name) => all[name] === null);
  for (const name of unread) markField(form, name, "A number is needed here.");
  if (!typed.name) markField(form, "name", "A site needs a name.");
  const horizon_mask = readHorizon(typed.horizon_mask ?? "");
  if (horizon_mask === null) markField(form, "horizon_mask", "Write pairs of azimuth and altitude with commas between: 90 35, 135 12.");
  if (unread.length > 0 || !typed.name || horizon_mask === null) return null;
  const { clear_percent, ...rest } = all;
  return { name: typed.name, ...rest, horizon_mask, clear_chance: Number(clear_percent) / 100 };
}

/** @param {HTMLElement} form @param {HTMLElement} said */
function deviceButton(form, said) {
  const button = element("button", { type: "button" }, "use this device’s place");
  button.addEventListener("click", () =>
    whileBusy(button, async () => {
      const found = await devicePlace();
      said.replaceChildren(element("p", { class: "hint" }, found.said));
      for (const [name, value] of Object.entries(found.values)) {
        const input = /** @type {HTMLInputElement|null} */ (form.querySelector(`input[name="${name}"]`));
        if (input) input.value = value;
      }
      form.dispatchEvent(new Event("input"));
    }),
  );
  return button;
}

/**
 * @param {Site|null} site    null: a new one
 * @param {Ways} ways
 */
export function siteForm(site, ways) {
  const values = startingValues(site);
  const said = messagePlace();
  const once = new SendOnce();
  const save = element("button", { type: "submit", class: "main" }, site ? "keep the change" : "add the site");
  const form = element("form", { class: "stack panel", novalidate: true });
  const leave = element("button", { type: "button", onclick: () => leaveForm(site, ways) }, "leave without saving");
  form.append(
    element("h2", {}, site ? `Change ${site.name}` : "A new site"),
    field({ name: "name", label: "name, as others will see it", value: values.name }),
    element("h3", {}, "Place"),
    placeFields(values),
    element("p", { class: "row" }, deviceButton(form, said)),
    element("p", { class: "small quiet" }, "The exact place and the skyline stay between you and the coordinators; everyone else sees the place to 0.1 degree, about 10 km, and no skyline."),
    element("h3", {}, "Sky"),
    skyFields(values),
    said,
    element("p", { class: "row" }, save, leave),
  );
  keepDraft(form, draftName(site));
  form.addEventListener("submit", (event) => {
    event.preventDefault();
    void whileBusy(save, () => saveSite({ form, said, site, once, ways }));
  });
  return form;
}

/** @param {Site|null} site @param {Ways} ways */
function leaveForm(site, ways) {
  forgetDraft(draftName(site));
  ways.onLeft();
}

/** @param {{form: HTMLFormElement, said: Element, site: Site|null, once: SendOnce, ways: Ways}} job */
async function saveSite({ form, said, site, once, ways }) {
  const values = siteValues(form);
  if (!values) return;
  try {
    if (site) await ask(`sites/${site.id}`, { method: "PATCH", json: values });
    else await once.post("sites", values);
    forgetDraft(draftName(site));
    ways.onSaved();
  } catch (error) {
    showProblem(said, error, form);
  }
}
