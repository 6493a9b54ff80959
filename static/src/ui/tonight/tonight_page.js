/** Tonight: shows one card at a time and carries out what its buttons ask for. */

import { Problem } from "../../api/problem.js";
import { ask } from "../../api/request.js";
import { SendOnce } from "../../api/send_once.js";
import { moonAt } from "../../sky/sun_moon.js";
import { now } from "../shell/campaign_clock.js";
import { bothClocks } from "../shell/clock.js";
import { choice, messagePlace, showProblem } from "../shell/controls.js";
import { element, fill } from "../shell/element.js";
import { guardAgainstMissedDrops } from "../shell/file_drop.js";
import { closeUndo, offerUndo } from "../shell/undo.js";
import { actionButtons, wayText } from "./action_bar.js";
import { curveFrom, curveOver, withMargins } from "./altitudes.js";
import { countdownText, countTo, shotCard } from "./card.js";
import { ReportView } from "./report_view.js";
import { othersSection, restSection } from "./rest_of_night.js";
import { keepForecasts, nightOf, otherTiles, restOfNight, shotForCard } from "./shots.js";
import { TonightData } from "./tonight_data.js";
import { keepAwake } from "./wake.js";

/** @typedef {import("./shots.js").Shot} Shot */

const NOT_LIVE = {
  draft: "This campaign is a draft: tiles can be taken once a coordinator opens it. This page follows by itself.",
  closed: "This campaign is closed: nothing more to shoot. What was found, or not, is on the Board.",
};
const HALF_NIGHT_MS = 8 * 3_600_000;

class TonightPage {
  said = messagePlace();
  body = element("div", { class: "tonight-body" });
  undo = element("div", { class: "undo-place" });
  buttons = element("div", {});
  way = element("span", { role: "status" });
  /** @type {Shot|null} */ chosen = null;
  /** @type {Shot|null} */ shot = null;
  /** @type {Map<number, any>} */ forecasts = new Map();
  pending = "";
  once = new SendOnce();

  /** @param {HTMLElement} page @param {string} campaign */
  constructor(page, campaign) {
    this.campaign = campaign;
    this.path = `campaigns/${encodeURIComponent(campaign)}`;
    this.data = new TonightData(campaign, {
      onChange: () => this.draw(),
      onWay: () => this.drawWay(),
      onProblem: (error) => this.sayUnlessAway(error),
    });
    this.report = new ReportView(this);
    const dimmer = element("button", { type: "button", class: "link", "data-dimmer": true, hidden: true }, "dimmer");
    const bar = element("div", { class: "bar" }, this.undo, this.buttons, element("div", { class: "foot-line" }, this.way, dimmer));
    fill(page, element("h1", { class: "seen-by-readers-only" }, "Tonight"), this.said, this.body, bar);
    document.dispatchEvent(new CustomEvent("quartersky:drawn"));
    globalThis.addEventListener("hashchange", () => this.turn());
    for (const kind of ["online", "offline"]) globalThis.addEventListener(kind, () => this.drawWay());
    guardAgainstMissedDrops();
    setInterval(() => this.tick(), 1000);
  }

  async start() {
    fill(this.body, element("p", { class: "quiet" }, "reading your night…"));
    this.drawWay();
    try {
      await this.data.start();
    } catch (error) {
      this.say(error);
      fill(this.body, element("p", {}, element("button", { type: "button", onclick: () => location.reload() }, "read it again")));
    }
  }

  /** That the server is away stands in the foot line already; nothing was asked for by hand. @param {unknown} error */
  sayUnlessAway(error) {
    if (error instanceof Problem && error.isUnanswered) this.drawWay();
    else this.say(error);
  }

  /** @param {unknown} error */
  say(error) {
    showProblem(this.said, error);
  }

  get view() {
    return location.hash.replace("#", "");
  }

  /** Another view of this page: the browser's own way back leads to the card. */
  turn() {
    this.said.replaceChildren();
    this.draw();
    globalThis.scrollTo(0, 0);
  }

  /** @param {string} view */
  go(view) {
    if (this.view === view) this.turn();
    else if (view === "") history.back();
    else location.hash = view;
  }

  drawWay() {
    this.way.textContent = wayText(navigator.onLine ? this.data.way : "offline");
  }

  draw() {
    if (this.view === "report") return this.report.show();
    this.report.leave();
    const { data } = this;
    if (data.gear === null) return this.drawWithoutGear();
    if (!data.answer || !data.state) return undefined;
    showStatus(data.state.campaign.status);
    keepForecasts(data.answer, this.forecasts);
    const night = nightOf(data.answer, data.state.tiles, data.gear, this.forecasts);
    this.shot = shotForCard(night, this.chosen);
    const choose = (/** @type {Shot} */ shot) => this.choose(shot);
    if (this.view === "another") fill(this.body, othersSection(otherTiles(night, this.shot), choose, () => this.go("")));
    else fill(this.body, ...this.unsentNotes(night), this.instrumentChoice(), this.cardOrReason(), restSection(restOfNight(night, this.shot, this.dawn), choose));
    this.drawButtons();
    return undefined;
  }

  /** @param {import("./shots.js").Night} night */
  unsentNotes({ held, offered, suggested }) {
    const find = (/** @type {number} */ tile) => [...held, ...offered, ...suggested].find((shot) => shot.tile === tile) ?? null;
    return this.report.unsentNotes(find);
  }

  /** When the light comes, as far as the server knows. @returns {number|null} */
  get dawn() {
    const dawn = this.data.answer?.night?.dawn;
    return dawn ? Date.parse(dawn) : null;
  }

  drawButtons() {
    const { data, shot } = this;
    const isIdle = data.state?.campaign.status !== "live" || this.view === "another";
    fill(this.buttons, isIdle ? null : actionButtons({ shot, status: data.status, isPending: this.pending !== "", acts: this }));
    void keepAwake(!isIdle && shot !== null);
  }

  drawWithoutGear() {
    const words = this.data.instruments.length === 0 && this.data.sites.length === 0
      ? "Tiles are cut to the field of what you observe with. Describe your site and an instrument first; it takes a minute."
      : "None of your instruments is in use. Put one to use, or add one.";
    fill(this.body, element("div", { class: "note stack" }, element("p", {}, words), element("p", {}, element("a", { class: "button main", href: "/gear/" }, "to my gear"))));
    fill(this.buttons);
  }

  instrumentChoice() {
    const { data } = this;
    if (data.instruments.length < 2) return null;
    return choice({
      name: "instrument",
      label: "with",
      value: String(data.instrument),
      options: data.instruments.map(({ id, name }) => ({ value: String(id), label: name })),
      onchange: (id) => void data.chooseInstrument(Number(id)),
    });
  }

  cardOrReason() {
    const { data } = this;
    const status = data.state?.campaign.status;
    if (status === "draft" || status === "closed") return element("p", { class: "note" }, NOT_LIVE[status]);
    if (!this.shot) {
      return element("div", { class: "note stack" }, element("p", {}, data.answer?.why_not || "No tile for this instrument at the moment."), element("p", { class: "small quiet" }, "This page follows by itself: a tile appears here as soon as one is worth having."));
    }
    return shotCard(this.shot, this.skyOf(this.shot), { now_ms: now().getTime(), pending: this.pending });
  }

  /** @param {Shot} shot */
  skyOf(shot) {
    const { answer, site } = this.data;
    const now_ms = now().getTime();
    const dawn_ms = this.dawn;
    const darkens_ms = answer?.night?.dusk ? Date.parse(answer.night.dusk) : now_ms;
    // When it is dark already its dusk is past.
    const dusk_ms = darkens_ms > now_ms + 120_000 ? darkens_ms : null;
    const span = { from_ms: Math.min(now_ms, dusk_ms ?? now_ms) - 1_800_000, to_ms: (dawn_ms ?? now_ms + HALF_NIGHT_MS) + 1_800_000 };
    const said = answer?.curves?.[shot.tile] ?? [];
    const own = site ? curveOver(site, () => shot, span) : [];
    const curve = said.length > 1 ? withMargins(curveFrom(said), own) : own;
    return { curve: curve.length > 1 ? curve : null, moon: site ? curveOver(site, moonAt, span) : null, dusk_ms, dawn_ms, least_deg: site?.min_altitude_deg ?? 20 };
  }

  /** Once a second: only the two lines that change. */
  tick() {
    if (!this.shot || this.view !== "") return;
    const now_ms = now().getTime();
    const count = this.body.querySelector("[data-countdown]");
    const words = this.body.querySelector("[data-count-words]");
    if (count) count.textContent = countdownText(this.shot, now_ms);
    if (words) words.textContent = countTo(this.shot, now_ms).words;
  }

  /** @param {Shot} shot */
  choose(shot) {
    this.chosen = shot;
    if (this.view === "") this.turn();
    else this.go("");
  }

  showOthers() {
    this.go("another");
  }

  /** @param {Shot|null} shot */
  openReport(shot) {
    this.report.begin(shot);
    this.go("report");
  }

  /**
   * Runs one wish: pending until its answer comes, then undoable for ten seconds.
   * @param {string} pending @param {() => Promise<{said: string, undo: () => Promise<any>}|null>} work
   */
  async wish(pending, work) {
    closeUndo();
    this.said.replaceChildren();
    this.pending = pending;
    this.draw();
    try {
      const done = await work();
      if (done) offerUndo(this.undo, done.said, () => this.wish("taking it back…", async () => (await done.undo(), null)));
    } catch (error) {
      this.say(error);
      // The server's alternative is the best now: the card shows it when nothing else is chosen.
      if (error instanceof Problem && error.code === "tile-taken") this.chosen = null;
    }
    this.pending = "";
    this.draw();
    await this.data.refresh();
  }

  /** @param {Shot} shot */
  take(shot) {
    this.chosen = shot;
    const body = { tile: shot.tile, instrument: this.data.instrument, ...(shot.starts_at > now() ? { starts_at: shot.starts_at.toISOString() } : {}) };
    return this.wish("asked for, not yet yours…", async () => {
      const claim = await this.once.post(`${this.path}/claims`, body);
      return { said: `Tile ${shot.tile} is yours.`, undo: () => this.release(claim.id) };
    });
  }

  /** @param {number} claim */
  release(claim) {
    return ask(`${this.path}/claims/${claim}/release`, { method: "POST", json: {} });
  }

  /** @param {Shot} shot */
  giveBack(shot) {
    const again = { tile: shot.tile, instrument: this.data.instrument };
    return this.wish("giving it back…", async () => {
      await this.release(Number(shot.claim));
      return { said: `Tile ${shot.tile} is free again.`, undo: () => new SendOnce().post(`${this.path}/claims`, again) };
    });
  }

  /** @param {Shot} shot */
  extend(shot) {
    return this.wish("asking for more time…", async () => {
      const claim = await ask(`${this.path}/claims/${shot.claim}/extend`, { method: "POST", json: {} });
      this.said.replaceChildren(element("p", {}, `Tile ${shot.tile} is yours until ${bothClocks(new Date(claim.until))}.`));
      return null;
    });
  }

  /** @param {"in"|"clouded"} status */
  setStatus(status) {
    const opposite = status === "in" ? "clouded" : "in";
    const before = this.data.status === "silent" ? opposite : this.data.status;
    const tell = (/** @type {string} */ word) => ask(`${this.path}/status`, { method: "POST", json: { status: word } });
    return this.wish(status === "in" ? "saying that you are in…" : "saying that you are clouded…", async () => {
      await tell(status);
      return { said: status === "in" ? "You are in." : "You are clouded: your tiles can go to others.", undo: () => tell(before) };
    });
  }
}

/** The head of the page says what the campaign is now. @param {string} status */
function showStatus(status) {
  const place = document.querySelector("[data-campaign-state]");
  if (place) place.textContent = status;
}

/** @param {HTMLElement} page */
export function showTonight(page) {
  if (location.hash) history.replaceState(null, "", location.pathname);
  void new TonightPage(page, document.body.dataset.campaign ?? "").start();
}
