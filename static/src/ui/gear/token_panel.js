/** Tokens: how a robotic observatory or another program signs in as its owner. */

import { ask, send } from "../../api/request.js";
import { field, messagePlace, readFields, showProblem, whileBusy } from "../shell/controls.js";
import { utcDay } from "../shell/clock.js";
import { copyAndSay } from "../shell/copy.js";
import { element, fill } from "../shell/element.js";

/** @typedef {{id: number, label: string, made_at: string, revoked_at: string|null}} Token */

/** @param {Token} token @param {() => void} onRevoked @param {HTMLElement} said */
function tokenLine(token, onRevoked, said) {
  const button = element("button", { type: "button", "aria-label": `revoke ${token.label}` }, "revoke");
  button.addEventListener("click", () =>
    whileBusy(button, async () => {
      try {
        await ask(`tokens/${token.id}`, { method: "DELETE" });
        onRevoked();
      } catch (error) {
        showProblem(said, error);
      }
    }),
  );
  const state = token.revoked_at ? `revoked ${utcDay(new Date(token.revoked_at))}` : `made ${utcDay(new Date(token.made_at))}`;
  const words = element("div", {}, element("p", {}, token.label), element("p", { class: "quiet small" }, state));
  return element("li", { class: "panel gear-card" }, words, token.revoked_at ? null : button);
}

/** @param {string} secret */
function madeToken(secret) {
  const button = element("button", { type: "button" }, "copy the token");
  button.addEventListener("click", () => copyAndSay(button, secret));
  return element(
    "div",
    { class: "note stack" },
    element("p", { class: "invitation-link" }, secret),
    element("p", { class: "small quiet" }, "Shown only now. Send it as “Authorization: Bearer …”, never inside an address."),
    element("p", {}, button),
  );
}

/** @param {HTMLElement} list @param {HTMLElement} said */
async function showTokens(list, said) {
  try {
    /** @type {Token[]} */
    const tokens = await ask("tokens");
    const again = () => void showTokens(list, said);
    const empty = element("p", { class: "note" }, "No token yet. Make one for each program, so that each can be revoked alone.");
    fill(list, tokens.length === 0 ? empty : element("ul", { class: "stack" }, tokens.map((token) => tokenLine(token, again, said))));
  } catch (error) {
    showProblem(said, error);
  }
}

/** @returns {HTMLElement} */
export function tokenPanel() {
  const said = messagePlace();
  const list = element("div", {});
  const made = element("div", {});
  const button = element("button", { type: "submit" }, "make a token");
  const form = element("form", { class: "stack", novalidate: true }, field({ name: "label", label: "for which program", hint: "such as: dome, north pier" }), element("p", {}, button), said, made);
  form.addEventListener("submit", (event) => {
    event.preventDefault();
    void whileBusy(button, async () => {
      try {
        fill(made, madeToken((await send("tokens", { label: readFields(form).label })).token));
        said.replaceChildren();
        await showTokens(list, said);
      } catch (error) {
        showProblem(said, error, form);
      }
    });
  });
  const panel = element("details", {}, element("summary", {}, "tokens for programs"), element("div", { class: "stack" }, list, form));
  panel.addEventListener("toggle", () => panel.open && showTokens(list, said));
  return panel;
}
