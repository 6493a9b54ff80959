/** Every campaign that the reader may see, and what to do when there is none. */

import { ask } from "../../api/request.js";
import { messagePlace, showProblem } from "../shell/controls.js";
import { span, utcDay } from "../shell/clock.js";
import { element, fill } from "../shell/element.js";
import { invitationPanel } from "./invitation.js";

/**
 * @typedef {object} Listed
 * @property {string} id
 * @property {string} title
 * @property {string} status
 * @property {boolean} is_rehearsal
 * @property {string} kind
 * @property {string} event_time
 */

/** @typedef {{isSignedIn: boolean, isCoordinator: boolean}} Reader */

const GROUPS = [
  { status: "live", heading: "Live now" },
  { status: "draft", heading: "Drafts, not yet open" },
  { status: "closed", heading: "Closed" },
];

/** @returns {Reader} */
function reader() {
  const { person = "", role = "" } = document.body.dataset;
  return { isSignedIn: person !== "", isCoordinator: role === "coordinator" };
}

/** @param {Listed} campaign */
function sinceEvent(campaign) {
  const event = new Date(campaign.event_time);
  return `event ${utcDay(event)}, ${span(Date.now() - event.getTime())} ago`;
}

/** @param {Listed} campaign @param {Reader} who */
function campaignCard(campaign, who) {
  const way = `/c/${encodeURIComponent(campaign.id)}/`;
  const isTonight = who.isSignedIn && campaign.status === "live";
  const kind = [campaign.is_rehearsal ? "rehearsal" : "", campaign.kind ?? ""].filter(Boolean).join(" · ");
  return element(
    "li",
    { class: "panel campaign-card" },
    element(
      "div",
      {},
      element("h3", {}, element("a", { href: way }, campaign.title)),
      element("p", { class: "quiet small" }, kind ? `${kind} · ` : "", campaign.is_rehearsal ? `event ${utcDay(new Date(campaign.event_time))}` : sinceEvent(campaign)),
    ),
    element(
      "div",
      { class: "row" },
      isTonight ? element("a", { class: "button main", href: `${way}tonight/` }, "Tonight") : null,
      element("a", { class: "button", href: way }, "Board"),
    ),
  );
}

/** @param {Reader} who */
function emptyList(who) {
  if (who.isCoordinator) {
    return element(
      "div",
      { class: "panel stack" },
      element("p", {}, "No campaign yet. When an alert arrives, drop its file on Launch: the region is drawn before anything goes live."),
      element("p", { class: "row" }, element("a", { class: "button main", href: "/launch/" }, "launch from an alert"), element("a", { class: "button", href: "/gear/" }, "describe my gear")),
    );
  }
  if (who.isSignedIn) {
    return element(
      "div",
      { class: "panel stack" },
      element("p", {}, "Nothing to search at the moment. Describe your site and instruments now, so that tiles fit them when an alert comes."),
      element("p", {}, element("a", { class: "button main", href: "/gear/" }, "describe my gear")),
    );
  }
  return element(
    "div",
    { class: "panel stack" },
    element("p", {}, "No campaign is open to onlookers at the moment. Members see more after signing in."),
    element("p", {}, element("a", { class: "button main", href: "/sign-in/" }, "sign in")),
  );
}

/** @param {Listed[]} campaigns @param {Reader} who */
function groupsOf(campaigns, who) {
  return GROUPS.map(({ status, heading }) => {
    const members = campaigns.filter((campaign) => campaign.status === status);
    if (members.length === 0) return null;
    return element(
      "section",
      { class: "stack" },
      element("h2", {}, heading),
      element("ul", { class: "stack" }, members.map((campaign) => campaignCard(campaign, who))),
    );
  });
}

const INTRODUCTION =
  "Many observers search one region of the sky, tile by tile, and the board keeps the account of what has been searched and how deep.";

/** @param {HTMLElement} page */
export async function showHome(page) {
  const who = reader();
  const said = messagePlace();
  const list = element("div", { class: "stack" }, element("p", { class: "quiet" }, "reading the list of campaigns…"));
  const head = element(
    "div",
    { class: "spread" },
    element("h1", {}, "Campaigns"),
    who.isCoordinator ? element("a", { class: "button", href: "/launch/" }, "launch from an alert") : null,
  );
  fill(page, head, element("p", { class: "quiet" }, INTRODUCTION), said, list, who.isCoordinator ? invitationPanel() : null, cautions());
  try {
    const campaigns = await ask("campaigns");
    fill(list, ...(campaigns.length > 0 ? groupsOf(campaigns, who) : [emptyList(who)]));
  } catch (error) {
    fill(list, element("p", {}, element("a", { class: "button", href: "/" }, "read the list again")));
    showProblem(said, error);
  }
}

/** What everybody should have read once. */
function cautions() {
  return element(
    "p",
    { class: "small quiet" },
    "Never point optics or eyes near the Sun. Work in the dark in pairs, or tell someone where you are; mind cold, traffic, wildlife and property. ",
    "Lasers and drones are regulated: local rules and licensed practice come first. Depths and probabilities are estimates under the stated model.",
  );
}
