/** The form behind an invitation link. */

import { send } from "../../api/request.js";
import { field, markField, messagePlace, readFields, showProblem, whileBusy } from "../shell/controls.js";
import { element, fill } from "../shell/element.js";

const INTRODUCTION =
  "Somebody who coordinates searches here has invited you. Choose a name, which others will see, and a password. Nothing else is asked.";

/** @param {HTMLFormElement} form @param {Record<string, any>} values */
function isRepeated(form, values) {
  if (values.password === values.again) return true;
  return !markField(form, "again", "The two passwords differ.");
}

/** @param {HTMLFormElement} form @param {string} token @param {Element} said */
async function accept(form, token, said) {
  const values = readFields(form);
  if (!isRepeated(form, values)) return;
  try {
    await send("invitations/accept", { token, ...(values.name ? { name: values.name } : {}), password: values.password });
    location.assign("/gear/");
  } catch (error) {
    showProblem(said, error, form);
  }
}

/** @param {HTMLElement} page */
export function showJoin(page) {
  const said = messagePlace();
  const token = document.body.dataset.token ?? "";
  const isReset = document.body.dataset.reset !== undefined;
  const button = element("button", { type: "submit", class: "main" }, isReset ? "set the password" : "join");
  const form = element(
    "form",
    { class: "stack", novalidate: true },
    isReset ? null : field({ name: "name", label: "name, as others will see it", autocomplete: "username" }),
    field({ name: "password", label: "password", type: "password", autocomplete: "new-password" }),
    field({ name: "again", label: "the same password again", type: "password", autocomplete: "new-password" }),
    button,
    said,
  );
  form.addEventListener("submit", (event) => {
    event.preventDefault();
    void whileBusy(button, () => accept(form, token, said));
  });
  const words = isReset ? "This link gives your account a new password." : INTRODUCTION;
  fill(page, element("h1", {}, isReset ? "New password" : "Join"), element("p", {}, words), form);
}
