/**
 * Runs before the first paint, in the head: the stored theme and dimmer step are on <html> before
 * anything is drawn. Modules reach it as `globalThis.quarterskyTheme`.
 */

const THEMES = ["day", "dusk", "night"];
const DIM_STEPS = 3;
const GROUNDS = { day: "#f7f5f0", dusk: "#0c1322", night: "#000000" };
const root = document.documentElement;

/** A browser may forbid storage: then the choice lasts for the page. @param {string} key */
function recall(key) {
  try {
    return localStorage.getItem(key);
  } catch {
    return null;
  }
}

/** @param {string} key @param {string} value */
function keep(key, value) {
  try {
    localStorage.setItem(key, value);
  } catch {
    // Nothing to do: the theme still holds on this page.
  }
}

/** Tells canvas code to read its colours again. */
function announce() {
  document.dispatchEvent(new CustomEvent("quartersky:theme", { detail: currentTheme() }));
}

/** @returns {{theme: string, dim: number}} */
function currentTheme() {
  return { theme: root.dataset.theme ?? "dusk", dim: Number(root.dataset.dim ?? 0) };
}

/** @param {string|null} wanted */
function showTheme(wanted) {
  const theme = /** @type {"day"|"dusk"|"night"} */ (
    wanted !== null && THEMES.includes(wanted) ? wanted : "dusk"
  );
  root.dataset.theme = theme;
  document.querySelector("meta[name=theme-color]")?.setAttribute("content", GROUNDS[theme]);
}

/** @param {number} step */
function showDim(step) {
  root.dataset.dim = String(Number.isInteger(step) && step >= 0 && step < DIM_STEPS ? step : 0);
}

/** @param {string} theme */
function chooseTheme(theme) {
  showTheme(theme);
  keep("quartersky.theme", theme);
  announce();
}

/** The next of the three brightness steps, then the brightest again. */
function stepDimmer() {
  showDim((currentTheme().dim + 1) % DIM_STEPS);
  keep("quartersky.dim", String(currentTheme().dim));
  announce();
}

showTheme(recall("quartersky.theme"));
showDim(Number(recall("quartersky.dim") ?? 0));
Object.assign(globalThis, { quarterskyTheme: { currentTheme, chooseTheme, stepDimmer, THEMES } });
