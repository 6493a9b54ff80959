/** A creating request that is never carried out twice, however often its button is pressed. */

import { Problem } from "./problem.js";
import { ask } from "./request.js";

/** A random UUID; `crypto.randomUUID` is missing on plain http from another machine. */
export function newKey() {
  const bytes = crypto.getRandomValues(new Uint8Array(16));
  bytes[6] = (bytes[6] & 0x0f) | 0x40;
  bytes[8] = (bytes[8] & 0x3f) | 0x80;
  const hex = Array.from(bytes, (byte) => byte.toString(16).padStart(2, "0")).join("");
  return [8, 12, 16, 20].reduceRight((text, at) => `${text.slice(0, at)}-${text.slice(at)}`, hex);
}

/**
 * Keeps one key for one body: a retry after a lost answer repeats the key, a changed body or an
 * answered request starts a new one.
 */
export class SendOnce {
  #key = "";
  #body = "";
  /** @type {Promise<any>|null} */
  #inFlight = null;

  /** @param {typeof ask} [asker]  replaced in tests */
  constructor(asker = ask) {
    this.asker = asker;
  }

  /**
   * Pressing twice while the first is on its way gives the first one's answer.
   * @param {string} path @param {any} json
   */
  post(path, json) {
    const body = `${path} ${JSON.stringify(json)}`;
    if (this.#inFlight && body === this.#body) return this.#inFlight;
    if (!this.#key || body !== this.#body) this.#key = newKey();
    this.#body = body;
    const sent = this.#carry(path, json, this.#key).finally(() => {
      if (this.#inFlight === sent) this.#inFlight = null;
    });
    this.#inFlight = sent;
    return sent;
  }

  /** @param {string} path @param {any} json @param {string} key */
  async #carry(path, json, key) {
    try {
      const answer = await this.asker(path, { method: "POST", json, key });
      this.#forget(key);
      return answer;
    } catch (error) {
      if (!(error instanceof Problem) || !error.isUnanswered) this.#forget(key);
      throw error;
    }
  }

  /** @param {string} key */
  #forget(key) {
    if (this.#key === key) this.#key = "";
  }
}
