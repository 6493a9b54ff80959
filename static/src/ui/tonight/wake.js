/** Keeps the screen awake while a countdown runs, where the browser can. */

/** @type {WakeLockSentinel|null} */
let lock = null;

/** @param {boolean} isWanted */
export async function keepAwake(isWanted) {
  if (!isWanted) {
    const held = lock;
    lock = null;
    await held?.release();
    return;
  }
  if (lock || !("wakeLock" in navigator) || document.visibilityState !== "visible") return;
  try {
    lock = await navigator.wakeLock.request("screen");
    lock.addEventListener("release", () => { lock = null; });
  } catch {
    // The battery is low or the browser refuses: the countdown runs on without it.
  }
}
