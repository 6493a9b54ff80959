/** Step one: an alert. Step two: its region, seen, and the choices that make a campaign of it. */

import { Problem } from "../../api/problem.js";
import { ask } from "../../api/request.js";
import { messagePlace, showProblem } from "../shell/controls.js";
import { element, fill } from "../shell/element.js";
import { fileDrop, guardAgainstMissedDrops } from "../shell/file_drop.js";
import { alertForm } from "./alert_form.js";
import { reviewSection } from "./review.js";

/**
 * What POST region answers.
 * @typedef {object} RegionRead
 * @property {string} [upload]
 * @property {any} alert
 * @property {any} region
 * @property {{order: number, pixels_b64: string, probabilities_b64: string}} map
 * @property {string[]} notes
 */

/**
 * What was dropped or typed; `message` is the alert inside a dropped JSON file, read here.
 * @typedef {{json: any}|{file: File, message: any}} Given
 */

/** As the server (campaigns/ingest/uploads.py). */
const MAX_FILE_BYTES = 256 * 1024 ** 2;

/** @param {number} bytes */
function sizeText(bytes) {
  return bytes >= 1e6 ? `${(bytes / 1e6).toFixed(1)} MB` : `${Math.ceil(bytes / 1e3)} kB`;
}

/** @param {Given} given @returns {Promise<RegionRead>} */
function readRegion(given) {
  if ("json" in given) return ask("region", { method: "POST", json: given.json });
  const form = new FormData();
  form.append("file", given.file, given.file.name);
  return ask("region", { method: "POST", form });
}

const MAX_MESSAGE_BYTES = 1_000_000;

/** The alert of a small JSON file, for what it leaves open; the server reads the file itself. @param {File} file */
async function messageIn(file) {
  if (file.size > MAX_MESSAGE_BYTES) return null;
  try {
    return JSON.parse(await file.text());
  } catch {
    return null;
  }
}

/** @param {Given} given */
function progressText(given) {
  if ("json" in given) return "drawing the region…";
  return `sending ${given.file.name} (${sizeText(given.file.size)}) and drawing its region…`;
}

/** @param {File} file */
function refuseHuge(file) {
  if (file.size <= MAX_FILE_BYTES) return;
  throw new Problem({
    code: "too-large",
    detail: `${file.name} has ${sizeText(file.size)}; an alert file may have ${sizeText(MAX_FILE_BYTES)}.`,
    advice: "Choose the map file alone, or a multi-order version of it.",
  });
}

class LaunchPage {
  said = messagePlace();
  body = element("div", { class: "stack launch-body" });
  /** What was typed about the campaign, kept while its region is drawn anew. @type {Record<string, any>} */
  typed = {};

  /** @param {HTMLElement} page */
  constructor(page) {
    fill(page, element("h1", {}, "Launch"), this.said, this.body);
    guardAgainstMissedDrops();
    this.showStart();
  }

  showStart() {
    this.typed = {};
    const drop = fileDrop({
      words: "Drop the alert file here: a VOEvent message, a sky map or MOC, or the alert as JSON.",
      button: "choose the file",
      note: "Nothing is announced yet. You see the region first, then decide.",
      onFiles: ([file]) => void this.take(file),
    });
    fill(this.body, drop, alertForm((json) => this.read({ json })));
  }

  /** @param {File} file */
  async take(file) {
    await this.read({ file, message: await messageIn(file) });
  }

  /** @param {Given} given */
  async read(given) {
    this.said.replaceChildren(element("p", {}, progressText(given)));
    try {
      if ("file" in given) refuseHuge(given.file);
      const read = await readRegion(given);
      this.said.replaceChildren();
      fill(this.body, reviewSection(read, given, this));
      this.body.scrollIntoView({ block: "nearest" });
    } catch (error) {
      showProblem(this.said, error);
    }
  }
}

/** @param {HTMLElement} page */
export function showLaunch(page) {
  return new LaunchPage(page);
}
