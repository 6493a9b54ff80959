/** FITS header cards: 80 bytes each, 36 to a block of 2880 bytes (FITS Standard 4.0, section 4). */

export const BLOCK = 2880;
const CARD = 80;

/** @typedef {{keyword: string, value: string|number|boolean|null}} Card */

/** A quoted string with doubled quotes; trailing blanks do not count. @param {string} field */
function quotedValue(field) {
  const match = /^'((?:[^']|'')*)'/.exec(field);
  return match ? match[1].replaceAll("''", "'").trimEnd() : null;
}

/** Value of a card from column 11 on. @param {string} field @returns {Card["value"]} */
function cardValue(field) {
  const text = field.trim();
  if (text.startsWith("'")) return quotedValue(text);
  const bare = text.split("/")[0].trim();
  if (bare === "T" || bare === "F") return bare === "T";
  if (!/^[+-]?(\d+\.?\d*|\.\d+)([EeDd][+-]?\d+)?$/.test(bare)) return null;
  return Number(bare.replace(/[Dd]/, "e"));
}

/** One card; null for comments, blanks and what has no value. @param {string} text @returns {Card|null} */
export function readCard(text) {
  const keyword = text.slice(0, 8).trimEnd();
  if (!/^[A-Z0-9_-]+$/.test(keyword) || text.slice(8, 10) !== "= ") return null;
  return { keyword, value: cardValue(text.slice(10)) };
}

/**
 * Reads the cards of one header that begins at the first byte.
 * @param {Uint8Array} bytes
 * @returns {{cards: Card[], headerBytes: number}|null}    null while END has not come
 */
export function readCards(bytes) {
  /** @type {Card[]} */
  const cards = [];
  const decoder = new TextDecoder("latin1");
  for (let at = 0; at + CARD <= bytes.length; at += CARD) {
    const text = decoder.decode(bytes.subarray(at, at + CARD));
    if (/^END {5}/.test(text)) return { cards, headerBytes: Math.ceil((at + CARD) / BLOCK) * BLOCK };
    const card = readCard(text);
    if (card) cards.push(card);
  }
  return null;
}

/** Number of a keyword, or what it is taken for when absent. @param {Card[]} cards @param {string} keyword @param {number} otherwise */
export function numberOf(cards, keyword, otherwise) {
  const card = cards.find((one) => one.keyword === keyword);
  return typeof card?.value === "number" ? card.value : otherwise;
}

/** @param {Card[]} cards @param {string} keyword */
export function isTrue(cards, keyword) {
  return cards.some((card) => card.keyword === keyword && card.value === true);
}

/** Bytes of the data behind a header, whole blocks (FITS Standard 4.0, eq. 1 and 2). @param {Card[]} cards */
export function dataBytes(cards) {
  // The standard allows 999 axes; a damaged header may claim any number.
  const n = Math.min(numberOf(cards, "NAXIS", 0), 999);
  if (n <= 0) return 0;
  let size = 1;
  for (let axis = 1; axis <= n; axis += 1) size *= numberOf(cards, `NAXIS${axis}`, 0);
  const groups = numberOf(cards, "GCOUNT", 1) * (numberOf(cards, "PCOUNT", 0) + size);
  const bytes = (Math.abs(numberOf(cards, "BITPIX", 8)) / 8) * groups;
  return Math.max(0, Math.ceil(bytes / BLOCK) * BLOCK);
}
