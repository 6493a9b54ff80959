/** One socket that comes back: opened again after a loss, given up when it has gone silent. */

const SILENT_AFTER_MS = 70_000;
const FIRST_WAIT_MS = 1000;
const LONGEST_WAIT_MS = 20_000;

/**
 * @typedef {object} Ears
 * @property {(message: any) => void} onMessage
 * @property {() => void} onOpen
 * @property {() => void} onClosed    also when it could not be opened
 */

export class Lifeline {
  isOpen = false;
  #wait_ms = FIRST_WAIT_MS;
  #isWanted = false;
  /** @type {WebSocket | null} */ #socket = null;
  /** @type {any} */ #silence = null;
  /** @type {any} */ #retry = null;

  /**
   * @param {() => string} path
   * @param {Ears} ears
   * @param {Pick<import("./connection.js").Surroundings, "openSocket" | "later" | "forget">} around
   */
  constructor(path, ears, around) {
    this.path = path;
    this.ears = ears;
    this.around = around;
  }

  open() {
    this.#isWanted = true;
    const socket = this.around.openSocket(this.path());
    this.#socket = socket;
    socket.onopen = () => this.#opened(socket);
    socket.onmessage = ({ data }) => this.#heard(socket, data);
    socket.onclose = () => this.#lost(socket);
    this.#listenForSilence(socket);
  }

  close() {
    this.#isWanted = false;
    this.around.forget(this.#retry);
    this.around.forget(this.#silence);
    this.#socket?.close();
  }

  /** @param {WebSocket} socket */
  #opened(socket) {
    if (socket !== this.#socket) return;
    this.isOpen = true;
    this.#wait_ms = FIRST_WAIT_MS;
    this.ears.onOpen();
  }

  /** @param {WebSocket} socket @param {string} data */
  #heard(socket, data) {
    if (socket !== this.#socket) return;
    this.#listenForSilence(socket);
    this.ears.onMessage(JSON.parse(data));
  }

  /**
   * A heartbeat comes every 20 to 30 s: three missed ones mean that the line is dead.
   * @param {WebSocket} socket
   */
  #listenForSilence(socket) {
    this.around.forget(this.#silence);
    this.#silence = this.around.later(() => {
      socket.close();
      this.#lost(socket);
    }, SILENT_AFTER_MS);
  }

  /** @param {WebSocket} socket */
  #lost(socket) {
    if (socket !== this.#socket) return;
    this.#socket = null;
    this.isOpen = false;
    this.around.forget(this.#silence);
    if (!this.#isWanted) return;
    this.#retry = this.around.later(() => this.open(), this.#wait_ms);
    this.#wait_ms = Math.min(LONGEST_WAIT_MS, this.#wait_ms * 2);
    this.ears.onClosed();
  }
}
