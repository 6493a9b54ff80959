/** Coordinators make links that make accounts. */

import { send } from "../../api/request.js";
import { choice, messagePlace, readFields, showProblem, whileBusy } from "../shell/controls.js";
import { utcDay } from "../shell/clock.js";
import { copyAndSay } from "../shell/copy.js";
import { element, fill } from "../shell/element.js";

const ROLES = [
  { value: "observer", label: "observer" },
  { value: "coordinator", label: "coordinator" },
  { value: "onlooker", label: "onlooker" },
];

/** @param {{link: string, expires_at: string}} invitation */
function madeLink(invitation) {
  const link = new URL(invitation.link, location.href).href;
  const button = element("button", { type: "button" }, "copy the link");
  button.addEventListener("click", () => copyAndSay(button, link));
  return element(
    "div",
    { class: "note stack" },
    element("p", { class: "invitation-link" }, link),
    element("p", { class: "small quiet" }, `For one person, once, until ${utcDay(new Date(invitation.expires_at))}. It is shown only here and only now.`),
    element("p", {}, button),
  );
}

/** @returns {HTMLElement} */
export function invitationPanel() {
  const said = messagePlace();
  const made = element("div", {});
  const button = element("button", { type: "submit" }, "make a link");
  const form = element("form", { class: "stack" }, choice({ name: "role", label: "as", value: "observer", options: ROLES }), element("p", {}, button), said, made);
  form.addEventListener("submit", (event) => {
    event.preventDefault();
    void whileBusy(button, async () => {
      try {
        fill(made, madeLink(await send("invitations", { role: readFields(form).role })));
        said.replaceChildren();
      } catch (error) {
        showProblem(said, error);
      }
    });
  });
  return element("details", { class: "invite" }, element("summary", {}, "invite somebody"), form);
}
