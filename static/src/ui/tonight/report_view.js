/** Reporting a frame: by its file or by hand; the answer shows what it changed. */

import { SendOnce } from "../../api/send_once.js";
import { ask } from "../../api/request.js";
import { Problem } from "../../api/problem.js";
import { markField, messagePlace, readFields, showProblem, whileBusy } from "../shell/controls.js";
import { readUtc, utcTyped } from "../shell/clock.js";
import { now } from "../shell/campaign_clock.js";
import { forgetDraft, keepDraft, listDrafts, recallDraft } from "../shell/draft.js";
import { element, fill } from "../shell/element.js";
import { perCent, readAngle } from "../shell/numbers.js";
import { offerUndo } from "../shell/undo.js";
import { depthFields, frameFields, lookedFields } from "./report_fields.js";
import { headerMidTime, offeredShifts, typedFromHeader } from "./header_time.js";
import { filesShown, frameDrop, readFiles } from "./report_files.js";
import { prefilled, reportBody } from "./report_values.js";

/** @typedef {import("./shots.js").Shot} Shot */
/** @typedef {import("./report_files.js").ReadFile} ReadFile */
/** @typedef {import("./tonight_data.js").TonightData} TonightData */

/** @typedef {{data: TonightData, path: string, campaign: string, body: HTMLElement, buttons: HTMLElement, undo: HTMLElement, chosen: Shot|null, draw: () => void, go: (view: string) => void}} Page */

const HOUR_MS = 3_600_000;

/** A tile that is no longer in my night, for a report begun when it was. @param {number} tile @param {Record<string, any>} kept @param {any} gear @returns {Shot} */
function bareShot(tile, kept, gear) {
  const ra_deg = readAngle(String(kept.ra_deg ?? ""), { isHours: true }) ?? 0;
  const dec_deg = readAngle(String(kept.dec_deg ?? ""), { isHours: false }) ?? 0;
  const { width_deg, height_deg, exposure_s, n_exposures } = gear;
  const then = readUtc(String(kept.mid_time ?? "")) ?? now();
  return { tile, ra_deg, dec_deg, width_deg, height_deg, exposure_s, n_exposures, standing: "alternative", claim: null, starts_at: then, ends_at: then, gain: null, reason: "", limit_forecast_mag: null };
}

/** What the answer says, in words. @param {{number: number, frame: any, searched: number, searched_before: number, imaged: number, notes?: string[]}} answer */
export function answerWords(answer) {
  return [countedWords(answer), ...(answer.notes ?? [])].join(" ");
}

/** @param {{number: number, frame: any, searched: number, searched_before: number}} answer */
function countedWords(answer) {
  const { number, frame, searched, searched_before } = answer;
  if (!frame.is_examined) return `Frame ${number} counts as imaged. It counts as searched once somebody has looked at it.`;
  if (frame.m_eff === null || frame.m_eff === undefined) return `Frame ${number} counts as imaged. Without a limit it cannot count as searched.`;
  return `Frame ${number} counts: searched ${perCent(searched_before)} before, ${perCent(searched)} now.`;
}

export class ReportView {
  /** @type {Shot|null} */ shot = null;
  /** @type {ReadFile[]} */ files = [];
  /** Whole hours by which the clock of the files was wrong. */
  shift_h = 0;
  isShown = false;
  said = messagePlace();
  form = element("form", { class: "stack report", novalidate: true });
  /** One key for each file, kept through retries. @type {Map<string, SendOnce>} */
  senders = new Map();

  /** @param {Page} page */
  constructor(page) {
    this.page = page;
    keepDraft(this.form, () => this.draft);
    this.form.addEventListener("submit", (event) => {
      event.preventDefault();
      const button = /** @type {HTMLButtonElement} */ (page.buttons.querySelector("[data-send]"));
      void whileBusy(button, () => this.send());
    });
  }

  /** What is typed for one tile is kept apart from the others. */
  get draft() {
    return `${this.draftStart}${this.shot?.tile ?? ""}`;
  }

  get draftStart() {
    return `report-${this.page.campaign}-`;
  }

  /** Reports that were typed and never sent: to go on with, or to throw away. @param {(tile: number) => Shot|null} find */
  unsentNotes(find) {
    return listDrafts(this.draftStart).map((name) => {
      const tile = name.slice(this.draftStart.length);
      const goOn = () => {
        this.begin(find(Number(tile)) ?? (tile ? bareShot(Number(tile), recallDraft(name) ?? {}, this.page.data.gear) : null));
        this.page.go("report");
      };
      const throwAway = () => {
        forgetDraft(name);
        this.page.draw();
      };
      return element(
        "div",
        { class: "note stack" },
        element("p", {}, `A report${tile ? ` for tile ${tile}` : ""} was begun and not sent. It is kept in this tab.`),
        element("p", { class: "row" }, element("button", { type: "button", onclick: goOn }, "go on with it"), element("button", { type: "button", onclick: throwAway }, "throw it away")),
      );
    });
  }

  /** @param {Shot|null} shot */
  begin(shot) {
    this.shot = shot;
    this.files = [];
    this.shift_h = 0;
    this.isShown = false;
  }

  leave() {
    this.isShown = false;
  }

  /** Draws once on entering; events that arrive meanwhile do not disturb what is being typed. */
  show() {
    const { page } = this;
    if (this.isShown || !page.data.gear) return;
    this.isShown = true;
    this.said.replaceChildren();
    fill(page.body, this.form);
    this.draw(this.startingValues());
    const send = element("button", { type: "button", class: "large main", "data-send": true, onclick: () => this.form.requestSubmit() }, "send it");
    const back = element("button", { type: "button", class: "large", onclick: () => page.go("") }, "back");
    fill(page.buttons, element("div", { class: "large-buttons" }, back, send));
  }

  startingValues() {
    const fresh = prefilled(this.shot, this.page.data.gear, now().getTime());
    const kept = recallDraft(this.draft);
    return { ...fresh, ...kept };
  }

  /** @param {Record<string, any>} values */
  draw(values) {
    const { shot, form, page } = this;
    const gear = page.data.gear;
    const where = shot ? `tile ${shot.tile}, with ${gear.name}` : `with ${gear.name}`;
    const byFile = this.files.length > 0;
    const forget = () => {
      const [first] = this.files.filter(({ header }) => header !== null);
      this.files = [];
      this.said.replaceChildren();
      this.draw({ ...values, ...readFields(form), ...(first?.header ? typedFromHeader(first.header) : {}) });
    };
    fill(
      form,
      element("h2", {}, `Report a frame: ${where}`),
      byFile ? filesShown(this.files, forget) : frameDrop((files) => void this.take(files)),
      byFile ? null : element("section", { class: "stack" }, element("h3", {}, "Or by hand"), frameFields(values)),
      depthFields(values, form, { instrument: Number(page.data.instrument), typed: () => this.told }),
      lookedFields(values),
      this.said,
    );
  }

  /** Position, time and exposure of the first file, for whoever asks before it is sent. */
  get told() {
    const [first] = this.files.filter(({ header }) => header !== null);
    return first?.header ? typedFromHeader(first.header) : {};
  }

  /** @param {File[]} files */
  async take(files) {
    this.said.replaceChildren(element("p", {}, files.length === 1 ? "reading its header…" : `reading ${files.length} headers…`));
    this.files = await readFiles(files);
    this.shift_h = 0;
    this.said.replaceChildren();
    this.draw({ ...this.startingValues(), ...readFields(this.form) });
  }

  /** @returns {(ReadFile|null)[]} what is to be sent: each readable file, or the typed frame */
  get parts() {
    return this.files.length > 0 ? this.files.filter(({ header }) => header !== null) : [null];
  }

  /** @param {ReadFile|null} part */
  bodyOf(part) {
    const instrument = Number(this.page.data.instrument);
    const header = part?.header ?? null;
    const middle = header && this.shift_h !== 0 ? headerMidTime(header) : null;
    const mid_time = middle === null ? undefined : new Date(middle + this.shift_h * HOUR_MS).toISOString();
    return reportBody(readFields(this.form), { instrument, claim: this.shot?.claim ?? null, header, pictures: part?.pictures ?? [], mid_time });
  }

  /** Local time for UT is the commonest error: the hours that would fit, one tap each. @param {number[]} shifts_h */
  offerShifts(shifts_h) {
    const offset_h = -new Date().getTimezoneOffset() / 60;
    const buttons = offeredShifts(shifts_h, offset_h).map((shift) =>
      element("button", { type: "button", onclick: () => this.shiftBy(shift) }, `${shift > 0 ? "+" : "−"}${Math.abs(shift)} h`),
    );
    const words = "If the time was local time, or the clock was wrong by whole hours: move the middle of the exposure by one of these, which fit, and send again.";
    const offer = element("div", { class: "note stack" }, element("p", {}, words), element("p", { class: "row" }, buttons));
    this.said.append(offer);
    offer.scrollIntoView({ block: "center" });
  }

  /** @param {number} shift_h */
  shiftBy(shift_h) {
    const input = /** @type {HTMLInputElement|null} */ (this.form.querySelector("input[name=mid_time]"));
    const middle = input && readUtc(input.value);
    if (input && middle) input.value = utcTyped(new Date(middle.getTime() + shift_h * HOUR_MS));
    else this.shift_h += shift_h;
    this.form.requestSubmit();
  }

  async send() {
    if (this.parts.length === 0) {
      this.said.replaceChildren(element("p", { class: "trouble alarm" }, "None of these files can be used. Choose another, or type the frame by hand."));
      return;
    }
    const { unread } = this.bodyOf(this.parts[0]);
    for (const name of unread) markField(this.form, name, "This cannot be read: see the example.");
    this.form.querySelector("[aria-invalid=true]")?.scrollIntoView({ block: "center" });
    if (unread.length === 0) await this.sendAll();
  }

  async sendAll() {
    /** @type {any[]} */
    const answers = [];
    /** @type {ReadFile|null} */
    let sending = null;
    try {
      for (const part of this.parts) {
        sending = part;
        answers.push(await this.sender(part).post(`${this.page.path}/frames`, this.bodyOf(part).body));
        // A file that was accepted is not sent again when a later one fails.
        if (part) this.files = this.files.filter((file) => file !== part);
      }
      this.done(answers);
    } catch (error) {
      showProblem(this.said, error, this.form);
      if (error instanceof Problem && Array.isArray(error.extras.fitting_shifts_h)) this.offerShifts(error.extras.fitting_shifts_h);
      if (sending) this.said.prepend(element("p", {}, `${sending.name} was not accepted:`));
      if (answers.length > 0) this.said.prepend(element("p", {}, `${answers.length} of the files were accepted before this one.`));
    }
  }

  /** @param {ReadFile|null} part */
  sender(part) {
    const key = part?.name ?? "typed";
    const sender = this.senders.get(key) ?? new SendOnce();
    this.senders.set(key, sender);
    return sender;
  }

  /** @param {any[]} answers */
  done(answers) {
    forgetDraft(this.draft);
    const { page } = this;
    const last = answers[answers.length - 1];
    const words = answers.length === 1 ? answerWords(last) : `${answers.length} frames sent. ${answerWords(last)}`;
    offerUndo(page.undo, words, async () => {
      for (const { number } of answers) await ask(`${page.path}/frames/${number}/withdraw`, { method: "POST", json: {} });
      await page.data.refresh();
    });
    page.chosen = null;
    page.go("");
    void page.data.refresh();
  }
}
