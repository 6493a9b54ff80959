/** Sensible beginnings for each kind of gear: assumptions, every one of them editable. */

/** Sensor sizes in mm, by their everyday names. */
export const SENSORS = [
  { value: "36 x 24", label: "full frame, 36 × 24 mm", width_mm: 36, height_mm: 24 },
  { value: "23.5 x 15.7", label: "APS-C, 23.5 × 15.7 mm", width_mm: 23.5, height_mm: 15.7 },
  { value: "17.6 x 13.3", label: "17.6 × 13.3 mm", width_mm: 17.6, height_mm: 13.3 },
  { value: "11.3 x 11.3", label: "11.3 × 11.3 mm", width_mm: 11.3, height_mm: 11.3 },
  { value: "other", label: "another", width_mm: 0, height_mm: 0 },
];

/** Values that an instrument has unless its owner says otherwise. */
const COMMON = {
  name: "",
  kind: "camera",
  shape: "rectangle",
  width_deg: 1,
  height_deg: 1,
  rotation_deg: /** @type {number|null} */ (null),
  aperture_mm: 200,
  focal_length_mm: /** @type {number|null} */ (null),
  pixel_arcsec: /** @type {number|null} */ (null),
  obstruction: 0,
  throughput: 0.4,
  read_noise_e: 3,
  dark_e_per_s: 0.01,
  full_well_e: 50000,
  magnification: /** @type {number|null} */ (null),
  band: "clear",
  exposure_s: 60,
  n_exposures: 4,
  overhead_s: 60,
  slew_deg_per_s: 1,
  tiles_per_night: 30,
  mount_min_altitude_deg: /** @type {number|null} */ (null),
  mount_max_altitude_deg: /** @type {number|null} */ (null),
  min_hour_angle_h: /** @type {number|null} */ (null),
  max_hour_angle_h: /** @type {number|null} */ (null),
  min_dec_deg: /** @type {number|null} */ (null),
  max_dec_deg: /** @type {number|null} */ (null),
  crosses_meridian: true,
  is_daytime_rated: false,
  is_eye_free: false,
  sun_avoidance_deg: 45,
};

/** @typedef {typeof COMMON} InstrumentValues */

/**
 * @typedef {object} Preset
 * @property {string} id
 * @property {string} label
 * @property {string} hint
 * @property {Partial<InstrumentValues>} values
 * @property {{sensor: string, pixel_um: number}} [camera]    field from focal length and sensor
 * @property {{apparent_deg: number, eyepiece_mm: number}} [eyepiece]    field from the eyepiece
 */

/** @type {Preset[]} */
export const PRESETS = [
  {
    id: "lens",
    label: "camera and lens",
    hint: "on a tripod or a small tracker",
    camera: { sensor: "36 x 24", pixel_um: 4.4 },
    values: { kind: "camera", aperture_mm: 48, focal_length_mm: 135, throughput: 0.25, exposure_s: 20, n_exposures: 12, overhead_s: 90, slew_deg_per_s: 3 },
  },
  {
    id: "telescope",
    label: "telescope and camera",
    hint: "a mount that tracks",
    camera: { sensor: "23.5 x 15.7", pixel_um: 3.76 },
    values: { kind: "camera", aperture_mm: 200, focal_length_mm: 800, obstruction: 0.35, exposure_s: 60, n_exposures: 5, overhead_s: 60, slew_deg_per_s: 2 },
  },
  {
    id: "eyepiece",
    label: "telescope and eyepiece",
    hint: "somebody looks into it",
    eyepiece: { apparent_deg: 60, eyepiece_mm: 30 },
    values: { kind: "eyepiece", shape: "circle", aperture_mm: 200, focal_length_mm: 1200, magnification: 40, throughput: 0.7, exposure_s: 180, n_exposures: 1, overhead_s: 180, slew_deg_per_s: 1, tiles_per_night: 15 },
  },
  {
    id: "binoculars",
    label: "binoculars",
    hint: "the field is printed on them",
    values: { kind: "binoculars", shape: "circle", width_deg: 6.5, height_deg: 6.5, aperture_mm: 50, magnification: 10, throughput: 0.8, exposure_s: 120, n_exposures: 1, overhead_s: 60, slew_deg_per_s: 10, tiles_per_night: 20 },
  },
  {
    id: "eye",
    label: "eye alone",
    hint: "a patch of sky and patience",
    values: { kind: "eye", shape: "circle", width_deg: 30, height_deg: 30, aperture_mm: 6, throughput: 0.9, exposure_s: 180, n_exposures: 1, overhead_s: 30, slew_deg_per_s: 30, tiles_per_night: 20 },
  },
];

/** All values of a preset. @param {Preset} preset @returns {InstrumentValues} */
export function presetValues(preset) {
  return { ...COMMON, ...preset.values };
}

/** The preset that an instrument most resembles. @param {{kind: string, focal_length_mm?: number|null}} instrument */
export function presetOf(instrument) {
  if (instrument.kind !== "camera") return PRESETS.find(({ id }) => id === instrument.kind) ?? PRESETS[1];
  return (instrument.focal_length_mm ?? 800) < 300 ? PRESETS[0] : PRESETS[1];
}
