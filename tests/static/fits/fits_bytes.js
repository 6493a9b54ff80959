/** Makes small FITS files for the tests, after the FITS Standard 4.0: 80-byte cards, 2880-byte blocks. */

const BLOCK = 2880;

/** @param {string|number|boolean} value */
function written(value) {
  if (typeof value === "boolean") return (value ? "T" : "F").padStart(20);
  if (typeof value === "number") return String(value).toUpperCase().padStart(20);
  return `'${value.replaceAll("'", "''").padEnd(8)}'`;
}

/** @param {[string, string|number|boolean][]} cards */
export function headerBytes(cards) {
  const lines = cards.map(([keyword, value]) => `${keyword.padEnd(8)}= ${written(value)} / comment`.padEnd(80).slice(0, 80));
  const text = [...lines, "END".padEnd(80)].join("");
  return Buffer.from(text.padEnd(Math.ceil(text.length / BLOCK) * BLOCK), "latin1");
}

/** @param {number} bytes */
export function dataOf(bytes) {
  return Buffer.alloc(Math.ceil(bytes / BLOCK) * BLOCK);
}

/** A plain picture. @param {[string, string|number|boolean][]} more */
export function picture(more = []) {
  return headerBytes([["SIMPLE", true], ["BITPIX", 16], ["NAXIS", 2], ["NAXIS1", 60], ["NAXIS2", 40], ...more]);
}
