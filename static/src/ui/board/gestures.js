/** Fingers, mouse, wheel and keys on the map become movements of the view. */

/**
 * @typedef {{x_px: number, y_px: number}} Spot
 * @typedef {object} Hands
 * @property {(at: Spot) => void} onGrab
 * @property {(at: Spot) => void} onDrag    to here, what was grabbed under the pointer
 * @property {(factor: number, at: Spot) => void} onZoom
 * @property {() => void} onRest    a movement has ended
 * @property {(at: Spot | null) => void} onHover
 * @property {(at: Spot) => void} onTap
 * @property {(key: string) => boolean} onKey    whether the key meant something
 */

const TAP_PX = 6;
const WHEEL_REST_MS = 160;
const WHEEL_STEP = 0.0016;
const LINE_PX = 16;

/** @param {PointerEvent | WheelEvent} event @param {HTMLElement} target @returns {Spot} */
function spotOf(event, target) {
  const box = target.getBoundingClientRect();
  return { x_px: event.clientX - box.left, y_px: event.clientY - box.top };
}

/** @param {Spot} a @param {Spot} b */
function apart(a, b) {
  return Math.hypot(a.x_px - b.x_px, a.y_px - b.y_px);
}

/** @param {Spot} a @param {Spot} b @returns {Spot} */
function middle(a, b) {
  return { x_px: (a.x_px + b.x_px) / 2, y_px: (a.y_px + b.y_px) / 2 };
}

export class Gestures {
  /** @type {Map<number, Spot>} */ #down = new Map();
  /** @type {Spot | null} */ #start = null;
  #span = 0;
  #isTap = false;
  /** @type {any} */ #wheelRest = null;

  /** @param {HTMLElement} target @param {Hands} hands */
  constructor(target, hands) {
    this.target = target;
    this.hands = hands;
    target.addEventListener("pointerdown", (event) => this.#press(event));
    target.addEventListener("pointermove", (event) => this.#move(event));
    target.addEventListener("pointerup", (event) => this.#lift(event));
    target.addEventListener("pointercancel", (event) => this.#lift(event));
    target.addEventListener("pointerleave", () => hands.onHover(null));
    target.addEventListener("wheel", (event) => this.#wheel(event), { passive: false });
    target.addEventListener("keydown", (event) => {
      if (!event.ctrlKey && !event.metaKey && !event.altKey && hands.onKey(event.key)) event.preventDefault();
    });
  }

  /** @param {PointerEvent} event */
  #press(event) {
    if (event.button !== 0) return;
    this.target.setPointerCapture(event.pointerId);
    const spot = spotOf(event, this.target);
    this.#down.set(event.pointerId, spot);
    this.#isTap = this.#down.size === 1;
    this.#start = spot;
    this.#regrab();
  }

  /** What is held: the spot of one finger, the middle of two. */
  #regrab() {
    const [a, b] = [...this.#down.values()];
    if (!a) return;
    this.#span = b ? apart(a, b) : 0;
    this.hands.onGrab(b ? middle(a, b) : a);
  }

  /** @param {PointerEvent} event */
  #move(event) {
    const spot = spotOf(event, this.target);
    if (!this.#down.has(event.pointerId)) {
      if (event.pointerType === "mouse") this.hands.onHover(spot);
      return;
    }
    this.#down.set(event.pointerId, spot);
    if (this.#start && apart(spot, this.#start) > TAP_PX) this.#isTap = false;
    if (this.#isTap) return;
    const [a, b] = [...this.#down.values()];
    if (b) this.#pinch(a, b);
    else this.hands.onDrag(a);
  }

  /** @param {Spot} a @param {Spot} b */
  #pinch(a, b) {
    const span = apart(a, b);
    const at = middle(a, b);
    this.hands.onDrag(at);
    if (this.#span > 0 && span > 0) this.hands.onZoom(span / this.#span, at);
    this.#span = span;
    this.hands.onGrab(at);
  }

  /** @param {PointerEvent} event */
  #lift(event) {
    if (!this.#down.delete(event.pointerId)) return;
    if (this.#isTap && event.type === "pointerup") this.hands.onTap(spotOf(event, this.target));
    this.#isTap = false;
    if (this.#down.size > 0) this.#regrab();
    else this.hands.onRest();
  }

  /** @param {WheelEvent} event */
  #wheel(event) {
    event.preventDefault();
    const step = event.deltaMode === WheelEvent.DOM_DELTA_LINE ? event.deltaY * LINE_PX : event.deltaY;
    this.hands.onZoom(Math.exp(-Math.max(-300, Math.min(300, step)) * WHEEL_STEP), spotOf(event, this.target));
    clearTimeout(this.#wheelRest);
    this.#wheelRest = setTimeout(() => this.hands.onRest(), WHEEL_REST_MS);
  }
}
