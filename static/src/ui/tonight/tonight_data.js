/** What Tonight knows: my gear, the campaign as it goes, and the answer for my instrument. */

import { ask } from "../../api/request.js";
import { browser } from "../../live/surroundings.js";
import { Connection } from "../../live/connection.js";
import { setNow } from "../shell/campaign_clock.js";

/** @typedef {import("./shots.js").TonightAnswer} TonightAnswer */
/** @typedef {import("../../state/shapes.js").State} State */

/** Events after which my night may look different. */
const MINE = /^(claim|plan|frame|campaign|region|tiles)\./;
const SETTLE_MS = 400;
const REFRESH_MS = 60_000;

export class TonightData {
  /** @type {any[]} */ instruments = [];
  /** @type {any[]} */ sites = [];
  /** @type {number|null} */ instrument = null;
  /** @type {TonightAnswer|null} */ answer = null;
  /** @type {State|null} */ state = null;
  /** @type {"starting"|"live"|"asking"|"offline"} */ way = "starting";
  #asked = 0;
  /** @type {any} */ #timer = null;

  /** @param {string} campaign @param {{onChange: () => void, onWay: () => void, onProblem: (error: unknown) => void}} listener */
  constructor(campaign, listener) {
    this.campaign = campaign;
    this.listener = listener;
  }

  async start() {
    [this.instruments, this.sites] = await Promise.all([ask("instruments"), ask("sites")]);
    this.instruments = this.instruments.filter(({ is_in_use }) => is_in_use);
    this.instrument = this.#rememberedInstrument();
    this.#follow();
    await this.refresh();
    setInterval(() => void this.refresh(), REFRESH_MS);
  }

  #follow() {
    const nothing = () => {};
    new Connection(
      this.campaign,
      {
        onState: (held, applied) => this.#take(held.state, applied),
        onCoverage: nothing,
        onClock: setNow,
        onWay: (way) => {
          this.way = way;
          this.listener.onWay();
        },
        onStale: nothing,
        onFault: () => location.reload(),
      },
      browser,
    ).start();
  }

  /** @param {State} state @param {{kind: string}[]} applied */
  #take(state, applied) {
    this.state = state;
    this.listener.onChange();
    if (applied.length === 0 || applied.some(({ kind }) => MINE.test(kind))) this.#refreshSoon();
  }

  /** A burst of events asks once, when it has settled. */
  #refreshSoon() {
    clearTimeout(this.#timer);
    this.#timer = setTimeout(() => void this.refresh(), SETTLE_MS);
  }

  /** Asks anew; an older answer that comes late is dropped. */
  async refresh() {
    if (this.instrument === null) return this.listener.onChange();
    this.#asked += 1;
    const mine = this.#asked;
    try {
      const answer = await ask(`campaigns/${encodeURIComponent(this.campaign)}/tonight?instrument=${this.instrument}`);
      if (mine !== this.#asked) return;
      this.answer = answer;
      if (/** @type {any} */ (answer).now) setNow(/** @type {any} */ (answer).now);
      this.listener.onChange();
    } catch (error) {
      if (mine === this.#asked) this.listener.onProblem(error);
    }
  }

  /** @param {number} instrument */
  async chooseInstrument(instrument) {
    this.instrument = instrument;
    this.answer = null;
    try {
      localStorage.setItem("quartersky.instrument", String(instrument));
    } catch {
      // Chosen again next time.
    }
    this.listener.onChange();
    await this.refresh();
  }

  #rememberedInstrument() {
    let kept = null;
    try {
      kept = Number(localStorage.getItem("quartersky.instrument"));
    } catch {
      kept = null;
    }
    const found = this.instruments.find(({ id }) => id === kept) ?? this.instruments[0];
    return found ? found.id : null;
  }

  /** The instrument in use, as its owner described it. */
  get gear() {
    return this.instruments.find(({ id }) => id === this.instrument) ?? null;
  }

  get site() {
    return this.sites.find(({ id }) => id === this.gear?.site) ?? null;
  }

  /** What I last said of my sky. @returns {string} */
  get status() {
    const person = document.body.dataset.person ?? "";
    return this.state?.observers[person]?.status ?? "silent";
  }
}
