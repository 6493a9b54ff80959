/** Where I observe from, and with what. */

import { ask } from "../../api/request.js";
import { messagePlace, showProblem } from "../shell/controls.js";
import { element, fill } from "../shell/element.js";
import { instrumentForm } from "./instrument_form.js";
import { instrumentCard, siteCard } from "./gear_cards.js";
import { siteForm } from "./site_form.js";
import { tokenPanel } from "./token_panel.js";

/** @typedef {import("./gear_cards.js").Site} Site */
/** @typedef {import("./gear_cards.js").Instrument} Instrument */

/** @typedef {{sites: Site[], instruments: Instrument[], form: HTMLElement|null, said: HTMLElement, page: HTMLElement}} Gear */

/** Opens a form in the place of the lists' buttons. @param {Gear} gear @param {HTMLElement|null} form */
function openForm(gear, form) {
  gear.form = form;
  draw(gear);
  form?.scrollIntoView({ block: "start" });
  /** @type {HTMLElement|null} */ (form?.querySelector("input"))?.focus({ preventScroll: true });
}

/** @param {Gear} gear @param {Site|null} site */
function openSite(gear, site) {
  openForm(gear, siteForm(site, { onSaved: () => reload(gear), onLeft: () => openForm(gear, null) }));
}

/** @param {Gear} gear @param {Instrument|null} instrument */
function openInstrument(gear, instrument) {
  const ways = { onSaved: () => reload(gear), onLeft: () => openForm(gear, null) };
  openForm(gear, instrumentForm(instrument, gear.sites, ways));
}

/** @param {Gear} gear */
function sitesSection(gear) {
  const list = gear.sites.map((site) => siteCard(site, () => openSite(gear, site)));
  const empty = element("p", { class: "note" }, "No site yet. A site is where you stand at night: tiles are chosen by what rises there.");
  return element(
    "section",
    { class: "stack" },
    element("h2", {}, "Sites"),
    list.length > 0 ? element("ul", { class: "stack" }, list) : empty,
    element("p", {}, element("button", { type: "button", class: list.length > 0 ? "" : "main", onclick: () => openSite(gear, null) }, "add a site")),
  );
}

/** @param {Gear} gear */
function instrumentsSection(gear) {
  const hasSite = gear.sites.length > 0;
  const list = gear.instruments.map((instrument) =>
    instrumentCard(instrument, gear.sites, () => openInstrument(gear, instrument)),
  );
  const words = hasSite
    ? "No instrument yet. Tiles are cut to the field of what you observe with; a pair of binoculars or an eye counts too."
    : "Add a site first, then what you observe with there.";
  const add = element("button", { type: "button", class: hasSite && list.length === 0 ? "main" : "", onclick: () => openInstrument(gear, null) }, "add an instrument");
  return element(
    "section",
    { class: "stack" },
    element("h2", {}, "Instruments"),
    list.length > 0 ? element("ul", { class: "stack" }, list) : element("p", { class: "note" }, words),
    hasSite ? element("p", {}, add) : null,
  );
}

/** @param {Gear} gear */
function readyNote(gear) {
  if (!gear.instruments.some(({ is_in_use }) => is_in_use)) return null;
  return element("p", { class: "row" }, element("span", { class: "quiet" }, "You are ready: when a campaign is live, your tiles are on its Tonight page."), element("a", { class: "button", href: "/" }, "to the campaigns"));
}

/** @param {Gear} gear */
function draw(gear) {
  const head = element("h1", {}, "My gear");
  if (gear.form) {
    fill(gear.page, head, gear.form);
    return;
  }
  fill(gear.page, head, gear.said, sitesSection(gear), instrumentsSection(gear), readyNote(gear), tokenPanel());
}

/** @param {Gear} gear */
async function reload(gear) {
  try {
    [gear.sites, gear.instruments] = await Promise.all([ask("sites"), ask("instruments")]);
    gear.said.replaceChildren();
    gear.form = null;
    draw(gear);
  } catch (error) {
    draw(gear);
    showProblem(gear.said, error);
  }
}

/** @param {HTMLElement} page */
export async function showGear(page) {
  /** @type {Gear} */
  const gear = { sites: [], instruments: [], form: null, said: messagePlace(), page };
  fill(page, element("h1", {}, "My gear"), gear.said, element("p", { class: "quiet" }, "reading your gear…"));
  await reload(gear);
}
