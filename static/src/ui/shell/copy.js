/** Tap to copy. */

/** The old way, for pages on plain http. @param {string} text */
function copyBySelection(text) {
  const area = document.createElement("textarea");
  area.value = text;
  area.className = "seen-by-readers-only";
  document.body.append(area);
  area.select();
  const isDone = document.execCommand("copy");
  area.remove();
  return isDone;
}

/** @param {string} text @returns {Promise<boolean>} whether it is on the clipboard */
export async function copyText(text) {
  try {
    await navigator.clipboard.writeText(text);
    return true;
  } catch {
    return copyBySelection(text);
  }
}

/**
 * Copies and says so on the button itself, for a moment.
 * @param {HTMLElement} said @param {string} text
 */
export async function copyAndSay(said, text) {
  const before = said.textContent;
  said.textContent = (await copyText(text)) ? "copied" : "select it by hand";
  setTimeout(() => {
    said.textContent = before;
  }, 1500);
}
