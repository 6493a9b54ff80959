/** FITS files for a report: headers read here, shown in full before anything is sent. */

import { HeaderTrouble, readFrame } from "../../fits/read_header.js";
import { element } from "../shell/element.js";
import { fileDrop } from "../shell/file_drop.js";

/** @typedef {Record<string, string|number>} Header */
/** @typedef {{name: string, header: Header|null, pictures: Header[], trouble: string}} ReadFile */

/** @param {File} file @returns {Promise<ReadFile>} */
async function readOne(file) {
  try {
    return { name: file.name, ...(await readFrame(file)), trouble: "" };
  } catch (error) {
    if (!(error instanceof HeaderTrouble)) throw error;
    return { name: file.name, header: null, pictures: [], trouble: error.message };
  }
}

/** One after the other: a phone has little memory. @param {File[]} files */
export async function readFiles(files) {
  /** @type {ReadFile[]} */
  const read = [];
  for (const file of files) read.push(await readOne(file));
  return read;
}

/** @param {ReadFile} file @returns {HTMLElement[]} */
function headerTables({ name, header, pictures, trouble }) {
  if (!header) return [element("p", { class: "trouble note" }, `${name}: ${trouble}`)];
  const more = pictures.map((picture, i) => headerTable(`picture ${i + 1} of ${pictures.length}`, picture, false));
  return [headerTable(name, header, true), ...more];
}

/** @param {string} name @param {Header} header @param {boolean} isOpen */
function headerTable(name, header, isOpen) {
  const rows = Object.entries(header).map(([keyword, value]) =>
    element("tr", {}, element("th", { scope: "row" }, keyword), element("td", {}, String(value))),
  );
  return element(
    "details",
    { open: isOpen, class: "header-shown" },
    element("summary", {}, `${name}: ${rows.length} header values`),
    element("table", { class: "header-table" }, element("tbody", {}, rows)),
  );
}

const PRIVACY =
  "Exactly these values are sent. The picture, the file’s name, your place, your name and everything else in the header stay on this device.";

/** @param {ReadFile[]} files @param {() => void} onDrop */
export function filesShown(files, onDrop) {
  const hasHeader = files.some(({ header }) => header !== null);
  return element(
    "div",
    { class: "stack" },
    hasHeader ? element("p", { class: "small" }, PRIVACY) : null,
    files.flatMap(headerTables),
    element("p", {}, element("button", { type: "button", onclick: onDrop }, "leave the file out, type instead")),
  );
}

/** @param {(files: File[]) => void} onFiles */
export function frameDrop(onFiles) {
  return fileDrop({
    words: "Drop the FITS file of the frame here (.fits, .fz or .gz).",
    button: "choose the file",
    note: "Only its header is read, on this device.",
    onFiles,
  });
}
