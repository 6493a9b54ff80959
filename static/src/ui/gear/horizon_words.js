/** The skyline of a site in words: "90 35, 180 12" is azimuth and altitude, point by point. Pure. */

/** @typedef {[number, number]} Point    azimuth from north by east, altitude; degrees */

/** @param {Point[]|undefined} points */
export function horizonText(points) {
  return (points ?? []).map(([azimuth, altitude]) => `${azimuth} ${altitude}`).join(", ");
}

/** Points in the order of their azimuths; null when it cannot be read. @param {string} text @returns {Point[]|null} */
export function readHorizon(text) {
  const parts = text.split(/[,;\n]+/).map((part) => part.trim()).filter((part) => part !== "");
  const points = parts.map(readPoint);
  if (points.some((point) => point === null)) return null;
  return /** @type {Point[]} */ (points).sort(([first], [second]) => first - second);
}

/** @param {string} part @returns {Point|null} */
function readPoint(part) {
  const numbers = part.replaceAll("−", "-").replaceAll("°", " ").trim().split(/[\s:/]+/).map(Number);
  if (numbers.length !== 2 || !numbers.every(Number.isFinite)) return null;
  const [azimuth, altitude] = numbers;
  return azimuth >= 0 && azimuth <= 360 && altitude >= -10 && altitude <= 90 ? [azimuth, altitude] : null;
}
