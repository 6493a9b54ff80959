/** A place to drop a file on, with a button for those who pick. */

import { element } from "./element.js";

/**
 * @param {{words: string, button: string, accept?: string, note?: string,
 *          onFiles: (files: File[]) => void}} options
 * @returns {HTMLElement}
 */
export function fileDrop({ words, button, accept, note, onFiles }) {
  const input = element("input", { type: "file", hidden: true, accept, multiple: true });
  const pick = element("button", { type: "button", onclick: () => input.click() }, button);
  const place = element(
    "div",
    { class: "drop" },
    element("p", {}, words),
    pick,
    note ? element("p", { class: "small quiet" }, note) : null,
    element("p", { class: "small quiet night-only" }, "The system’s file picker is bright: shade the screen first."),
    input,
  );
  const give = (/** @type {FileList|null|undefined} */ files) => files && files.length > 0 && onFiles([...files]);
  input.addEventListener("change", () => {
    give(input.files);
    input.value = "";
  });
  place.addEventListener("dragover", (event) => {
    event.preventDefault();
    place.classList.add("is-over");
  });
  place.addEventListener("dragleave", () => place.classList.remove("is-over"));
  place.addEventListener("drop", (event) => {
    event.preventDefault();
    place.classList.remove("is-over");
    give(event.dataTransfer?.files);
  });
  return place;
}

/** A file that misses its place must not replace the page, and what was typed with it. */
export function guardAgainstMissedDrops() {
  for (const kind of ["dragover", "drop"]) {
    document.addEventListener(kind, (event) => event.preventDefault());
  }
}
