/** Where the mount can point; what is left empty limits nothing. */

import { field, tick } from "../shell/controls.js";
import { element } from "../shell/element.js";

export const MOUNT_LIMITS = ["mount_min_altitude_deg", "mount_max_altitude_deg", "min_hour_angle_h", "max_hour_angle_h", "min_dec_deg", "max_dec_deg"];

/** @param {Record<string, any>} values @param {string} name @param {string} label @param {string} unit @param {string} hint */
function limit(values, name, label, unit, hint) {
  return field({ name, label, value: values[name] ?? "", unit, number: true, hint });
}

/** @param {Record<string, any>} values @param {{values: {kind?: string}}} preset */
export function mountSection(values, preset) {
  if (preset.values.kind === "binoculars" || preset.values.kind === "eye") return null;
  const isSet = MOUNT_LIMITS.some((name) => values[name] !== null && values[name] !== undefined && values[name] !== "");
  const turns = values.turns_at_meridian ?? values.crosses_meridian === false;
  return element(
    "details",
    { open: isSet || turns },
    element("summary", {}, "where the mount can point (empty: everywhere)"),
    element(
      "div",
      { class: "fields" },
      limit(values, "mount_min_altitude_deg", "lowest altitude of the mount", "°", "a dome slit, a wall"),
      limit(values, "mount_max_altitude_deg", "highest altitude", "°", "where the camera would meet the pier"),
      limit(values, "min_hour_angle_h", "hour angle from", "h", "before the meridian is negative: −6"),
      limit(values, "max_hour_angle_h", "hour angle to", "h", "a mount that cannot pass the meridian: 0"),
      limit(values, "min_dec_deg", "declination from", "°", ""),
      limit(values, "max_dec_deg", "declination to", "°", ""),
    ),
    tick({ name: "turns_at_meridian", label: "It turns over at the meridian: a series lies wholly before or after it.", isOn: turns }),
  );
}

/** @param {Record<string, any>} typed */
export function meridianValue(typed) {
  return typed.turns_at_meridian === undefined ? {} : { crosses_meridian: typed.turns_at_meridian !== true };
}
