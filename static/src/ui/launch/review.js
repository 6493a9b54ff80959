/** The region as read, and what becomes of it. */

import { SendOnce } from "../../api/send_once.js";
import { choice, field, messagePlace, markField, readFields, showProblem, tick, whileBusy } from "../shell/controls.js";
import { localClock, span, utcDay } from "../shell/clock.js";
import { forgetDraft } from "../shell/draft.js";
import { element, fill } from "../shell/element.js";
import { perCent, squareDegrees } from "../shell/numbers.js";
import { decimalText, decText, raText } from "../../sky/sexagesimal.js";
import { ALERT_DRAFT, CONTAINMENTS } from "./alert_form.js";
import { campaignBody, isExercise } from "./campaign_body.js";
import { regionMap } from "./region_map.js";
import { SourceSection } from "./source_section.js";

/** @typedef {import("./launch_page.js").RegionRead} RegionRead */
/** @typedef {import("./launch_page.js").Given} Given */
/** @typedef {{read: (given: Given) => Promise<void>, showStart: () => void, typed: Record<string, any>}} Page */

/** @param {any} alert */
function eventLine(alert) {
  if (!alert.event_time) return "not given";
  const date = new Date(alert.event_time);
  const ago = Date.now() - date.getTime();
  return `${utcDay(date)} (${localClock(date)} here), ${ago >= 0 ? `${span(ago)} ago` : "in the future"}`;
}

/** What else a message says. Its links are words to read: nothing here follows them. @param {any} alert @returns {[string, string][]} */
export function messageRows(alert) {
  const cited = (alert.citations ?? []).map((/** @type {any} */ one) => `${one.cite} ${one.id}`);
  const links = (alert.links ?? []).map((/** @type {any} */ one) => (one.name ? `${one.name}: ${one.uri}` : one.uri));
  /** @type {[string, string][]} */
  const rows = [
    ["cites", cited.join(", ")],
    ["importance", typeof alert.importance === "number" ? `${alert.importance} of 1, as the sender sees it` : ""],
    ["links, not followed", links.join(" · ")],
  ];
  return rows.filter(([, words]) => words !== "");
}

/** @param {RegionRead} read */
function facts({ alert, region }) {
  const { peak, area_deg2 } = region;
  const areas = ["50", "90", "99"].map((share) => `${squareDegrees(area_deg2[share])} hold ${share} %`).join(", ");
  /** @type {[string, string][]} */
  const rows = [
    ["alert", [alert.kind, alert.identifier ?? alert.id].filter(Boolean).join(" · ") || "a map without a name"],
    ["event", eventLine(alert)],
    ["area", areas],
    ["brightest at", `${raText(peak.ra_deg)} ${decText(peak.dec_deg)} (${decimalText(peak)})`],
  ];
  rows.push(...messageRows(alert));
  if (region.outside > 0) rows.push(["outside", `${perCent(region.outside)} lies outside what can be searched, and is kept in the account`]);
  return element("dl", { class: "facts" }, rows.flatMap(([name, value]) => [element("dt", {}, name), element("dd", {}, value)]));
}

/** @param {string[]} notes */
function notesList(notes) {
  if (notes.length === 0) return null;
  return element("ul", { class: "note stack small" }, notes.map((note) => element("li", {}, note)));
}

/** @param {any} constraint */
function isOpenRadius(constraint) {
  return ["cone", "ellipse"].includes(constraint?.type) && (constraint.containment ?? null) === null;
}

/** Radii whose meaning the message left open. @param {any} alert @returns {any[]} */
export function openRadii(alert) {
  return Array.isArray(alert.constraints) ? alert.constraints.filter(isOpenRadius) : [];
}

/** The alert with every open radius given its meaning. @param {any} alert @param {number} containment */
export function withContainment(alert, containment) {
  const constraints = alert.constraints.map((/** @type {any} */ one) => (isOpenRadius(one) ? { ...one, containment } : one));
  return { ...alert, constraints };
}

/** @param {Given} given @param {Page} page */
function containmentQuestion(given, page) {
  const message = "json" in given ? given.json : given.message;
  if (!message || openRadii(message).length === 0) return null;
  const answer = (/** @type {string} */ share) => void page.read({ json: withContainment(message, Number(share)) });
  const asked = choice({ name: "containment", label: "The message does not say what its radius means. Drawn as 68 %; choose to be sure.", value: "", options: CONTAINMENTS, onchange: answer });
  return element("div", { class: "note" }, asked);
}

/** @param {RegionRead} read */
function titleFor({ alert }) {
  return [alert.kind, (alert.event_time ?? "").slice(0, 10)].filter(Boolean).join(" ");
}

/** @param {string} role of a message that is no observation @param {Record<string, any>} typed */
function rehearsalChoice(role, typed) {
  if (role) {
    return element("p", { class: "alarm" }, element("strong", {}, `A ${role} message. `), "It can only become a rehearsal; every page of it will say so.");
  }
  return tick({ name: "is_rehearsal", label: "This is a rehearsal.", hint: "every page of it will say so", isOn: typed.is_rehearsal === true });
}

/** Asks once more before anything is public. @param {HTMLElement} place @param {() => Promise<void>} go */
function confirmLive(place, go) {
  const yes = element("button", { type: "button", class: "main" }, "yes, go live");
  const no = element("button", { type: "button", onclick: () => place.replaceChildren() }, "not yet");
  yes.addEventListener("click", () => whileBusy(yes, go));
  fill(place, element("div", { class: "alarm stack" }, element("p", {}, "From now on every member sees it, and tiles are planned and offered."), element("p", { class: "row" }, yes, no)));
  yes.focus({ preventScroll: true });
  place.scrollIntoView({ block: "center" });
}

/** @param {HTMLFormElement} form @param {RegionRead} read @param {Given} given @param {SourceSection} section */
function readChoices(form, read, given, section) {
  const typed = readFields(form);
  const { source, prior, unread } = section.read();
  for (const name of unread) {
    markField(form, name, "A number is needed here.");
    form.querySelector(`[data-field="${CSS.escape(name)}"]`)?.closest("details")?.setAttribute("open", "");
  }
  if (!typed.title) markField(form, "title", "A campaign needs a name.");
  if (unread.length > 0 || !typed.title) return null;
  return campaignBody({ read, given, typed, source, prior });
}

/** @param {RegionRead} read @param {Given} given @param {Page} page */
function choicesForm(read, given, page) {
  const role = isExercise(read.alert) ? read.alert.role : "";
  const said = messagePlace();
  const asked = element("div", {});
  const once = new SendOnce();
  const draft = element("button", { type: "button" }, "keep as a draft");
  const section = new SourceSection(page.typed);
  const form = element(
    "form",
    { class: "stack panel", novalidate: true },
    field({ name: "title", label: "name of the campaign", value: page.typed.title ?? titleFor(read) }),
    section.node,
    rehearsalChoice(role, page.typed),
    tick({ name: "is_public", label: "Onlookers without an account may watch.", hint: "places are shown to 0.1 degree", isOn: page.typed.is_public === true }),
    element("p", { class: "row" }, element("button", { type: "submit", class: "main" }, "go live"), draft),
    asked,
    said,
  );
  form.addEventListener("input", () => {
    page.typed = readFields(form);
  });
  const open = async (/** @type {boolean} */ isDraft) => {
    const body = readChoices(form, read, given, section);
    if (!body) return;
    try {
      const made = await once.post("campaigns", { ...body, draft: isDraft });
      forgetDraft(ALERT_DRAFT);
      location.assign(`/c/${encodeURIComponent(made.campaign)}/`);
    } catch (error) {
      asked.replaceChildren();
      showProblem(said, error, form);
    }
  };
  form.addEventListener("submit", (event) => {
    event.preventDefault();
    if (readChoices(form, read, given, section)) confirmLive(asked, () => open(false));
  });
  draft.addEventListener("click", () => whileBusy(draft, () => open(true)));
  return form;
}

/** @param {RegionRead} read @param {Given} given @param {Page} page */
export function reviewSection(read, given, page) {
  const notes = [...new Set([...(read.notes ?? []), ...(read.region.notes ?? []), ...(read.alert.notes ?? [])])];
  const back = element("button", { type: "button", onclick: () => page.showStart() }, "another alert");
  return element(
    "div",
    { class: "launch-review" },
    element("section", { class: "stack" }, regionMap(read), facts(read), containmentQuestion(given, page), notesList(notes), element("p", {}, back)),
    choicesForm(read, given, page),
  );
}
