/**
 * Asks for pixels and coverage: at the start, after a new region, and when the live messages were not enough.
 */

const AGAIN_MS = 5000;

export class CoverageReader {
  #isReading = false;
  #isWanted = false;

  /**
   * @param {string} campaign
   * @param {import("./board_model.js").BoardModel} model
   * @param {(path: string) => Promise<any>} ask
   */
  constructor(campaign, model, ask) {
    this.campaign = campaign;
    this.model = model;
    this.ask = ask;
    this.wantAll();
  }

  /** Wishes that come while one is being answered become one more. */
  wantAll() {
    this.#isWanted = true;
    if (!this.#isReading) void this.#read();
  }

  async #read() {
    this.#isReading = true;
    while (this.#isWanted) {
      this.#isWanted = false;
      try {
        await this.#readOnce();
      } catch {
        setTimeout(() => this.wantAll(), AGAIN_MS);
        break;
      }
    }
    this.#isReading = false;
  }

  async #readOnce() {
    const path = `campaigns/${this.campaign}`;
    const wanted = this.model.state?.region?.revision;
    const isKnown = this.model.region !== null && this.model.region.revision === wanted;
    const [region, coverage] = await Promise.all([
      isKnown ? null : this.ask(`${path}/region`),
      this.ask(`${path}/coverage`),
    ]);
    if (region) this.model.setRegion(region);
    // Another region came between the two answers: ask for both anew.
    if (!this.model.setCoverage(coverage)) this.#isWanted = true;
  }
}
