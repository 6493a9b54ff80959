/**
 * Keeps a page in step with its campaign: by socket, and by asking every five seconds while the socket is away.
 * Whatever happens, the state is a snapshot plus every event after it, each once and in order.
 */

import { advanced } from "../state/sequence.js";
import { Lifeline } from "./lifeline.js";

/**
 * @typedef {import("../state/sequence.js").Held} Held
 * @typedef {import("../state/shapes.js").Event} Event
 * @typedef {"starting" | "live" | "asking" | "offline"} Way
 * @typedef {object} Listener
 * @property {(held: Held, applied: Event[]) => void} onState    applied is empty after a snapshot
 * @property {(message: any) => void} onCoverage
 * @property {(now: string) => void} onClock
 * @property {(way: Way) => void} onWay
 * @property {() => void} onStale    coverage must be asked for again
 * @property {(error: Error) => void} onFault    this page is too old to go on
 * @typedef {object} Surroundings
 * @property {(path: string) => Promise<any>} ask    GET under /api/v1/
 * @property {(url: string) => WebSocket} openSocket
 * @property {(work: () => void, after_ms: number) => any} later
 * @property {(timer: any) => void} forget
 */

const ASK_EVERY_MS = 5000;

export class Connection {
  /** @type {Held | null} */ held = null;
  /** @type {Way} */ way = "starting";
  #isAsking = false;
  #wantsMore = false;
  #isStopped = false;
  #wasLost = false;
  /** @type {any} */ #timer = null;

  /** @param {string} campaign @param {Listener} listener @param {Surroundings} around */
  constructor(campaign, listener, around) {
    this.campaign = campaign;
    this.listener = listener;
    this.around = around;
    this.lifeline = new Lifeline(
      () => `/live/campaigns/${campaign}/${this.held ? `?since=${this.held.seq}` : ""}`,
      {
        onMessage: (message) => this.#take(message),
        onOpen: () => this.#opened(),
        onClosed: () => this.#closed(),
      },
      around,
    );
  }

  /** @param {Held | null} held    a snapshot that the page already has */
  start(held = null) {
    this.held = held;
    this.lifeline.open();
  }

  stop() {
    this.#isStopped = true;
    this.around.forget(this.#timer);
    this.lifeline.close();
  }

  #opened() {
    this.around.forget(this.#timer);
    this.#setWay("live");
    // What moved while the line was down is not told again.
    if (this.#wasLost) this.listener.onStale();
    this.#wasLost = false;
  }

  #closed() {
    if (this.#isStopped) return;
    this.#wasLost = true;
    if (this.way !== "offline") this.#setWay("asking");
    void this.#askAndGoOn();
  }

  async #askAndGoOn() {
    this.around.forget(this.#timer);
    await this.catchUp();
    if (this.#isStopped || this.lifeline.isOpen) return;
    this.#timer = this.around.later(() => void this.#askAndGoOn(), ASK_EVERY_MS);
  }

  /** @param {Way} way */
  #setWay(way) {
    if (way === this.way) return;
    this.way = way;
    this.listener.onWay(way);
  }

  /** @param {any} message one message of the socket */
  #take(message) {
    if (message.now) this.listener.onClock(message.now);
    if (message.type === "snapshot") this.#replace(message);
    else if (message.type === "event" && this.#advance([message.event])) void this.catchUp();
    else if (message.type === "coverage") this.listener.onCoverage(message);
    else if (message.type === "heartbeat" && message.seq > (this.held?.seq ?? 0)) void this.catchUp();
    else if (message.type === "ask-again") void this.#askForAll().catch(() => this.#closed());
    else if (message.type === "problem") this.#refused(message.problem);
  }

  /** The server will not have this screen: saying why beats trying for ever. @param {any} problem */
  #refused(problem) {
    this.stop();
    this.listener.onFault(new Error([problem.detail, problem.advice].filter(Boolean).join(" ")));
  }

  /** @param {{seq: number, state: any}} snapshot */
  #replace({ seq, state }) {
    if (this.held && seq < this.held.seq) return;
    this.held = { seq, state };
    this.listener.onState(this.held, []);
  }

  /** @param {Event[]} events @returns {boolean} whether some are missing before the last of them */
  #advance(events) {
    if (!this.held) return true;
    try {
      const { held, applied, is_gap } = advanced(this.held, events);
      this.held = held;
      if (applied.length > 0) this.listener.onState(held, applied);
      return is_gap;
    } catch (error) {
      this.listener.onFault(/** @type {Error} */ (error));
      return false;
    }
  }

  /** Asks for what is missing. Two wishes at once become one request and one more after it. */
  async catchUp() {
    if (this.#isAsking) {
      this.#wantsMore = true;
      return;
    }
    this.#isAsking = true;
    try {
      await this.#askOnce();
      if (!this.lifeline.isOpen) this.#setWay("asking");
    } catch {
      this.#setWay(this.lifeline.isOpen ? "live" : "offline");
    }
    this.#isAsking = false;
    if (this.#wantsMore && !this.#isStopped) {
      this.#wantsMore = false;
      await this.catchUp();
    }
  }

  async #askOnce() {
    if (!this.held) return this.#askForAll();
    const answer = await this.around.ask(`campaigns/${this.campaign}/events?since=${this.held.seq}`);
    if (answer.now) this.listener.onClock(answer.now);
    if (answer.ask_again) return this.#askForAll();
    if (this.#advance(answer.events)) return this.#askForAll();
    if (answer.events.length > 0 && !this.lifeline.isOpen) this.listener.onStale();
  }

  async #askForAll() {
    const answer = await this.around.ask(`campaigns/${this.campaign}`);
    if (answer.now) this.listener.onClock(answer.now);
    this.#replace(answer);
    this.listener.onStale();
  }
}
