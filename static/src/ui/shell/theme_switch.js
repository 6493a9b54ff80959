/** Day, dusk, night, and how bright the night is. */

/** @typedef {{currentTheme: () => {theme: string, dim: number}, chooseTheme: (theme: string) => void, stepDimmer: () => void}} ThemeScript */

const DIM_WORDS = ["dimmer ●", "dimmer ◐", "dimmer ○"];

/** What the blocking script left for us. @returns {ThemeScript} */
function themeScript() {
  return /** @type {any} */ (globalThis).quarterskyTheme;
}

/** Shows the choice on every switch of the page. */
function showChoice() {
  const { theme, dim } = themeScript().currentTheme();
  for (const button of document.querySelectorAll("[data-theme-choice]")) {
    button.setAttribute("aria-pressed", String(button.getAttribute("data-theme-choice") === theme));
  }
  for (const button of document.querySelectorAll("[data-dimmer]")) {
    /** @type {HTMLElement} */ (button).hidden = theme !== "night";
    button.textContent = DIM_WORDS[dim];
    button.setAttribute("aria-label", `dimmer, step ${dim + 1} of 3`);
  }
}

/** @param {MouseEvent} event */
function onClick(event) {
  const target = event.target instanceof Element ? event.target.closest("button") : null;
  const theme = target?.getAttribute("data-theme-choice");
  if (theme) themeScript().chooseTheme(theme);
  if (target?.hasAttribute("data-dimmer")) themeScript().stepDimmer();
}

/** @param {Document} document */
export function startThemeSwitch(document) {
  document.addEventListener("click", onClick);
  document.addEventListener("quartersky:theme", showChoice);
  document.addEventListener("quartersky:drawn", showChoice);
  showChoice();
}
