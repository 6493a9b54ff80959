/** Numbers as the trade writes them, and as people type them. */

/** "41.8 %". @param {number} share */
export function perCent(share) {
  const percent = share * 100;
  if (percent > 0 && percent < 0.05) return "< 0.1 %";
  return `${percent.toFixed(1)} %`;
}

/** "3.2° × 2.1°". @param {number} widthDeg @param {number} heightDeg */
export function fieldSize(widthDeg, heightDeg) {
  return `${sideText(widthDeg)} × ${sideText(heightDeg)}`;
}

/** Small fields in arcminutes. @param {number} sideDeg */
function sideText(sideDeg) {
  return sideDeg < 1 ? `${(sideDeg * 60).toFixed(0)}′` : `${sideDeg.toFixed(1)}°`;
}

/** "1,512 deg²". @param {number} area */
export function squareDegrees(area) {
  const digits = area >= 100 ? 0 : area >= 10 ? 1 : 2;
  return `${area.toLocaleString("en", { maximumFractionDigits: digits, minimumFractionDigits: digits })} deg²`;
}

/** A typed number, comma or point; null when it is none. @param {string|undefined} text */
export function readNumber(text) {
  const cleaned = (text ?? "").trim().replace(",", ".").replace("−", "-");
  if (!/^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?$/i.test(cleaned)) return null;
  return Number(cleaned);
}

/**
 * A typed angle in degrees: decimal, or sexagesimal with the hours of a right ascension.
 * @param {string} text @param {{isHours: boolean}} options @returns {number|null}
 */
export function readAngle(text, { isHours }) {
  const plain = readNumber(text);
  if (plain !== null) return plain;
  const match = /^([+-])?(\d{1,3})[h°d: ]+(\d{1,2})(?:[m′': ]+(\d{1,2}(?:\.\d+)?))?[s″"]?$/i.exec(
    text.trim().replace("−", "-").replace(/\s+/g, " ").replace(/([h°dm′':]) /gi, "$1"),
  );
  if (!match) return null;
  const [, sign, whole, minutes, seconds = "0"] = match;
  if (Number(minutes) >= 60 || Number(seconds) >= 60) return null;
  const size = Number(whole) + Number(minutes) / 60 + Number(seconds) / 3600;
  return (sign === "-" ? -size : size) * (isHours ? 15 : 1);
}
