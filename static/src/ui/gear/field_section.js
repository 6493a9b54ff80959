/** What one exposure sees: typed, or computed from what is printed on the gear. */

import { choice, field, readFields } from "../shell/controls.js";
import { element } from "../shell/element.js";
import { readNumber } from "../shell/numbers.js";
import { eyepieceFieldDeg, fieldDeg, pixelArcsec, rounded } from "./optics.js";
import { SENSORS } from "./presets.js";

/** @typedef {import("./presets.js").Preset} Preset */

/** @param {HTMLElement} form @param {string} name @param {number} value */
function put(form, name, value) {
  const input = /** @type {HTMLInputElement|null} */ (form.querySelector(`input[name="${name}"]`));
  if (input) input.value = String(rounded(value));
}

/** Numbers of the named fields; null when one is missing. @param {HTMLElement} form @param {string[]} names */
function numbersIn(form, names) {
  const typed = readFields(form);
  const values = names.map((name) => readNumber(typed[name]));
  return values.every((value) => value !== null && value > 0) ? /** @type {number[]} */ (values) : null;
}

/** @param {HTMLElement} form */
function sensorSides(form) {
  const named = SENSORS.find(({ value }) => value === readFields(form).sensor);
  if (named && named.width_mm > 0) return [named.width_mm, named.height_mm];
  return numbersIn(form, ["sensor_width_mm", "sensor_height_mm"]);
}

/** @param {HTMLElement} form @returns {boolean} whether everything needed was there */
function computeCameraField(form) {
  const optics = numbersIn(form, ["focal_length_mm", "pixel_um"]);
  const sides = sensorSides(form);
  if (!optics || !sides) return false;
  put(form, "width_deg", fieldDeg(sides[0], optics[0]));
  put(form, "height_deg", fieldDeg(sides[1], optics[0]));
  put(form, "pixel_arcsec", pixelArcsec(optics[1], optics[0]));
  return true;
}

/** @param {HTMLElement} form */
function computeEyepieceField(form) {
  const optics = numbersIn(form, ["focal_length_mm", "eyepiece_mm", "apparent_deg"]);
  if (!optics) return false;
  const [focal_length_mm, eyepiece_mm, apparent_deg] = optics;
  put(form, "width_deg", eyepieceFieldDeg({ focal_length_mm, eyepiece_mm, apparent_deg }));
  put(form, "magnification", focal_length_mm / eyepiece_mm);
  return true;
}

/** @param {HTMLElement} form @param {Preset} preset */
function computeButton(form, preset) {
  const said = element("span", { class: "hint", role: "status" });
  const compute = () => {
    const isDone = preset.camera ? computeCameraField(form) : computeEyepieceField(form);
    said.textContent = isDone ? "computed; change it if you measured better" : "fill the numbers above first";
    form.dispatchEvent(new Event("input"));
  };
  return element("p", { class: "row" }, element("button", { type: "button", onclick: compute }, "compute the field"), said);
}

/** @param {Record<string, any>} values @param {Preset} preset */
function cameraOptics(values, preset) {
  const other = element(
    "div",
    { class: "fields", hidden: (values.sensor ?? preset.camera?.sensor) !== "other" },
    field({ name: "sensor_width_mm", label: "sensor width", value: values.sensor_width_mm, unit: "mm", number: true }),
    field({ name: "sensor_height_mm", label: "sensor height", value: values.sensor_height_mm, unit: "mm", number: true }),
  );
  return [
    choice({ name: "sensor", label: "sensor", value: values.sensor ?? preset.camera?.sensor, options: SENSORS, onchange: (value) => { other.hidden = value !== "other"; } }),
    other,
    element(
      "div",
      { class: "fields" },
      field({ name: "focal_length_mm", label: "focal length", value: values.focal_length_mm ?? "", unit: "mm", number: true }),
      field({ name: "aperture_mm", label: "aperture", value: values.aperture_mm, unit: "mm", number: true, hint: "diameter of the opening" }),
      field({ name: "pixel_um", label: "pixel", value: values.pixel_um ?? preset.camera?.pixel_um, unit: "µm", number: true }),
    ),
  ];
}

/** @param {Record<string, any>} values @param {Preset} preset */
function eyepieceOptics(values, preset) {
  return [
    element(
      "div",
      { class: "fields" },
      field({ name: "aperture_mm", label: "aperture", value: values.aperture_mm, unit: "mm", number: true }),
      field({ name: "focal_length_mm", label: "focal length of the telescope", value: values.focal_length_mm ?? "", unit: "mm", number: true }),
      field({ name: "eyepiece_mm", label: "focal length of the eyepiece", value: values.eyepiece_mm ?? preset.eyepiece?.eyepiece_mm, unit: "mm", number: true }),
      field({ name: "apparent_deg", label: "its apparent field", value: values.apparent_deg ?? preset.eyepiece?.apparent_deg, unit: "°", number: true }),
    ),
  ];
}

/** @param {Record<string, any>} values */
function bareAperture(values) {
  const hint = values.kind === "eye" ? "the pupil, in the dark" : "the second number printed on them";
  return [element("div", { class: "fields" }, field({ name: "aperture_mm", label: "aperture", value: values.aperture_mm, unit: "mm", number: true, hint }))];
}

/** @param {Record<string, any>} values @param {Preset} preset */
function fieldFields(values, preset) {
  if (preset.values.shape === "circle") {
    return [field({ name: "width_deg", label: "field, its diameter", value: values.width_deg, unit: "°", number: true })];
  }
  return [
    field({ name: "width_deg", label: "field width", value: values.width_deg, unit: "°", number: true }),
    field({ name: "height_deg", label: "field height", value: values.height_deg, unit: "°", number: true }),
    field({ name: "pixel_arcsec", label: "pixel on the sky", value: values.pixel_arcsec ?? "", unit: "″", number: true }),
  ];
}

/** A new instrument begins with the field of its preset's optics. @param {Record<string, any>} values @param {Preset} preset */
export function withField(values, preset) {
  const focal_length_mm = Number(values.focal_length_mm);
  if (values.id || !focal_length_mm || values.sensor || values.eyepiece_mm) return values;
  if (preset.camera) {
    const sensor = SENSORS.find(({ value }) => value === preset.camera?.sensor) ?? SENSORS[0];
    return {
      ...values,
      width_deg: rounded(fieldDeg(sensor.width_mm, focal_length_mm)),
      height_deg: rounded(fieldDeg(sensor.height_mm, focal_length_mm)),
      pixel_arcsec: rounded(pixelArcsec(preset.camera.pixel_um, focal_length_mm)),
    };
  }
  if (!preset.eyepiece) return values;
  const width_deg = rounded(eyepieceFieldDeg({ ...preset.eyepiece, focal_length_mm }));
  return { ...values, width_deg, height_deg: width_deg };
}

/** @param {Record<string, any>} given @param {Preset} preset @param {HTMLElement} form */
export function fieldSection(given, preset, form) {
  const values = withField(given, preset);
  const optics = preset.camera ? cameraOptics(values, preset) : preset.eyepiece ? eyepieceOptics(values, preset) : bareAperture(values);
  return [
    element("h3", {}, "What it sees"),
    ...optics,
    preset.camera || preset.eyepiece ? computeButton(form, preset) : null,
    element("div", { class: "fields" }, fieldFields(values, preset)),
  ];
}
