/** The sign-in form. */

import { Problem } from "../../api/problem.js";
import { send } from "../../api/request.js";
import { field, messagePlace, readFields, showProblem, whileBusy } from "../shell/controls.js";
import { element, fill } from "../shell/element.js";

/** Only a path of this site: never an address that somebody put into a link. */
export function wayAfterSignIn(search = globalThis.location.search) {
  const wanted = new URLSearchParams(search).get("next") ?? "/";
  return /^\/(?![/\\])[^\s\\]*$/.test(wanted) ? wanted : "/";
}

/** The server's advice is for programs too; here a person forgot something. @param {Problem} problem */
function forSigningIn(problem) {
  if (problem.code !== "bad-sign-in") return problem;
  return new Problem({ ...problem, detail: problem.detail, advice: "Try again, or ask a coordinator for a link that sets a new password." });
}

/** @param {HTMLElement} page */
export function showSignIn(page) {
  const said = messagePlace();
  const button = element("button", { type: "submit", class: "main" }, "sign in");
  const form = element(
    "form",
    { class: "stack", novalidate: true },
    field({ name: "name", label: "name", autocomplete: "username" }),
    field({ name: "password", label: "password", type: "password", autocomplete: "current-password" }),
    button,
    said,
  );
  form.addEventListener("submit", (event) => {
    event.preventDefault();
    void whileBusy(button, async () => {
      try {
        await send("session", readFields(form));
        location.assign(wayAfterSignIn());
      } catch (error) {
        showProblem(said, error instanceof Problem ? forSigningIn(error) : error, form);
      }
    });
  });
  const help = element("p", { class: "quiet small" }, "No account, or no password any more? Ask a coordinator for a link: it needs no e-mail address.");
  fill(page, element("h1", {}, "Sign in"), form, help);
}
