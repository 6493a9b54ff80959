/**
 * Reads the header of a FITS file on the device: at most 1 MB of header, never the picture. A
 * compressed picture (.fz) stands in extension 1 with its true sizes in ZNAXISn.
 */

import { allowedKeywords } from "./allow_list.js";
import { byteSource, HeaderTrouble } from "./byte_source.js";
import { BLOCK, dataBytes, isTrue, numberOf, readCards } from "./cards.js";

/** @typedef {import("./cards.js").Card} Card */
/** @typedef {import("./byte_source.js").ByteSource} ByteSource */

const MAX_HEADER_BYTES = 1_000_000;
const FIRST_READ = 4 * BLOCK;
const MAX_EXTENSIONS = 8;
const MAX_PICTURES = 128;

export { HeaderTrouble };

const NOT_FITS = () =>
  new HeaderTrouble("This is not a FITS file.", "Choose the FITS file of the camera, or type the four fields by hand.");

/**
 * One header from a place in the file, read in growing steps until its END.
 * @param {ByteSource} source @param {number} from @param {number} allowed    bytes
 */
async function headerAt(source, from, allowed) {
  for (let size = Math.min(FIRST_READ, allowed); ; size = Math.min(size * 4, allowed)) {
    const bytes = await source.read(from, from + size);
    if (bytes.length === 0) return null;
    const header = readCards(bytes);
    if (header) return header;
    if (bytes.length < size) {
      throw new HeaderTrouble("The header stops in the middle: the file is cut off.", "Copy it again from the camera.");
    }
    if (size >= allowed) {
      throw new HeaderTrouble("The header is longer than 1 MB.", "Type the four fields by hand.");
    }
  }
}

/** @param {Card[]} cards */
function isPicture(cards) {
  return isTrue(cards, "ZIMAGE") || (numberOf(cards, "NAXIS", 0) >= 2 && !isTable(cards));
}

/** @param {Card[]} cards */
function isTable(cards) {
  return cards.some(({ keyword, value }) => keyword === "XTENSION" && String(value).includes("TABLE"));
}

/** The sizes of the picture itself, where it is compressed inside a table. @param {Card[]} cards @returns {Card[]} */
function trueSizes(cards) {
  if (!isTrue(cards, "ZIMAGE")) return cards;
  const inner = cards
    .filter(({ keyword }) => /^ZNAXIS\d*$/.test(keyword))
    .map(({ keyword, value }) => ({ keyword: keyword.slice(1), value }));
  return [...inner, ...cards.filter(({ keyword }) => !/^NAXIS\d*$/.test(keyword))];
}

/**
 * Cards of the pictures in the extensions: of the first one, or of all that have a plate solution.
 * @param {ByteSource} source @param {Card[]} primary @param {number} headerBytes
 * @returns {Promise<Card[][]>}
 */
async function extensionPictures(source, primary, headerBytes) {
  let at = headerBytes + dataBytes(primary);
  let left = MAX_HEADER_BYTES - headerBytes;
  /** @type {Card[][]} */
  const pictures = [];
  for (let n = 0; n < limitOf(pictures) && left > BLOCK; n += 1) {
    const header = await headerAt(source, at, left);
    if (!header || !header.cards.some(({ keyword }) => keyword === "XTENSION")) break;
    if (isPicture(header.cards)) pictures.push(trueSizes(header.cards));
    at += header.headerBytes + dataBytes(header.cards);
    left -= header.headerBytes;
  }
  return pictures;
}

/** Without a plate solution the first picture is enough. @param {Card[][]} pictures */
function limitOf(pictures) {
  return pictures.length === 0 || isSolved(pictures[0]) ? MAX_PICTURES : MAX_EXTENSIONS;
}

/** @param {Card[]} cards */
function isSolved(cards) {
  return cards.some(({ keyword }) => keyword === "CTYPE1") && cards.some(({ keyword }) => keyword === "CRVAL1");
}

/** @param {Card[]} cards */
function withoutSizes(cards) {
  return cards.filter(({ keyword }) => !/^NAXIS\d*$/.test(keyword));
}

/**
 * The allow-listed keywords of a frame, and of each picture where several were exposed together.
 * @param {Blob} file
 * @returns {Promise<{header: Record<string, string|number>, pictures: Record<string, string|number>[]}>}
 */
export async function readFrame(file) {
  const source = await byteSource(file);
  const start = new TextDecoder("latin1").decode(await source.read(0, 9));
  if (!start.startsWith("SIMPLE  =")) throw NOT_FITS();
  const primary = await headerAt(source, 0, MAX_HEADER_BYTES);
  if (!primary) throw NOT_FITS();
  if (isPicture(primary.cards)) return { header: allowedKeywords(primary.cards), pictures: [] };
  const found = await extensionPictures(source, primary.cards, primary.headerBytes);
  if (found.length === 0) throw new HeaderTrouble("There is no picture in this file.", "Choose the file that holds the frame.");
  const header = allowedKeywords([...found[0], ...withoutSizes(primary.cards)]);
  const solved = found.filter(isSolved);
  return { header, pictures: solved.length > 1 ? solved.map(allowedKeywords) : [] };
}

/** The allow-listed keywords of the first picture. @param {Blob} file */
export async function readHeader(file) {
  return (await readFrame(file)).header;
}
