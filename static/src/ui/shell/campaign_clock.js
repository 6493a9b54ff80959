/**
 * The campaign's own clock: the real one, or a rehearsal's, which its driver moves on. What the
 * server last said is kept on <html>, because each page's scripts are bundled apart.
 */

/** The campaign's time now. @returns {Date} */
export function now() {
  const offset = Number(document.documentElement.dataset.clockOffset ?? 0);
  return new Date(Date.now() + offset);
}

/** Sets the clock by what the server says. @param {string} iso */
export function setNow(iso) {
  const said = Date.parse(iso);
  if (Number.isNaN(said)) return;
  document.documentElement.dataset.clockOffset = String(said - Date.now());
  document.dispatchEvent(new CustomEvent("quartersky:clock"));
}
