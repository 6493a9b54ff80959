/** How this page hears of news: live, by asking, or not at all. */

import { utcMinute } from "../../state/words.js";

const WORDS = {
  starting: "connecting…",
  live: "live",
  asking: "asking every 5 s",
  offline: "no connection",
};

/** @param {HTMLElement} place @param {import("./board_model.js").BoardModel} model */
export function wayLine(place, model) {
  let lostAt = "";
  const show = () => {
    const { way, trouble } = model;
    if (way !== "offline") lostAt = "";
    else lostAt ||= utcMinute(new Date(model.now_ms).toISOString());
    const since = lostAt ? ` since ${lostAt} UTC: what you see is from then` : "";
    place.textContent = trouble ?? `${WORDS[way]}${since}`;
    place.classList.toggle("is-trouble", trouble !== null || way === "offline");
    const state = document.querySelector("[data-campaign-state]");
    if (state && model.state) state.textContent = model.state.campaign.status;
  };
  model.onChange(show);
  show();
}
