/** From the typed words of the form to the values that the API takes. */

import { markField, readFields } from "../shell/controls.js";
import { readNumber } from "../shell/numbers.js";
import { meridianValue, MOUNT_LIMITS } from "./mount_section.js";
import { presetValues } from "./presets.js";

/** @typedef {import("./presets.js").Preset} Preset */

const NEEDED = ["width_deg", "aperture_mm", "exposure_s", "n_exposures", "overhead_s", "slew_deg_per_s", "tiles_per_night", "throughput", "obstruction"];
const OPTIONAL = ["focal_length_mm", "pixel_arcsec", "rotation_deg", "magnification", ...MOUNT_LIMITS];

/**
 * Pure: values from words. `unread` names the fields that hold no number.
 * @param {Record<string, any>} typed @param {Preset} preset
 */
export function instrumentValues(typed, preset) {
  const isCircle = preset.values.shape === "circle";
  const isCamera = preset.values.kind === "camera";
  const needed = [...NEEDED, ...(isCircle ? [] : ["height_deg"]), ...(isCamera ? ["read_noise_e", "dark_e_per_s", "full_well_e", "sun_avoidance_deg"] : [])];
  const numbers = Object.fromEntries(needed.map((name) => [name, readNumber(typed[name])]));
  const optional = Object.fromEntries(OPTIONAL.map((name) => [name, typed[name] ? readNumber(typed[name]) : null]));
  const unread = [
    ...needed.filter((name) => numbers[name] === null),
    ...OPTIONAL.filter((name) => typed[name] && optional[name] === null),
  ];
  const { kind, shape } = presetValues(preset);
  const solar = isCamera ? { is_daytime_rated: typed.is_daytime_rated === true, is_eye_free: typed.is_eye_free === true } : {};
  const height = isCircle ? { height_deg: numbers.width_deg } : {};
  const values = { name: typed.name, site: Number(typed.site), kind, shape, band: typed.band, ...numbers, ...height, ...optional, ...meridianValue(typed), ...solar };
  return { values, unread };
}

/**
 * Reads the form; marks what is missing and gives null then.
 * @param {HTMLElement} form @param {Preset} preset @param {{id: number}|null} instrument
 */
export function readInstrument(form, preset, instrument) {
  const typed = readFields(form);
  const { values, unread } = instrumentValues(typed, preset);
  for (const name of unread) markField(form, name, "A number is needed here.");
  if (!typed.name) markField(form, "name", "An instrument needs a name.");
  if (!typed.band) markField(form, "band", "Name the band, or write clear.");
  form.querySelector("[aria-invalid=true]")?.scrollIntoView({ block: "center" });
  if (unread.length > 0 || !typed.name || !typed.band) return null;
  return instrument ? { ...values, is_in_use: typed.is_in_use === true } : values;
}
