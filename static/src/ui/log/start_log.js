/** Brings the Log to life: all events and all frames, kept in step. */

import { ask } from "../../api/request.js";
import { Connection } from "../../live/connection.js";
import { browser } from "../../live/surroundings.js";
import { setNow } from "../shell/campaign_clock.js";
import { EventTable } from "./event_table.js";
import { FrameTable } from "./frame_table.js";

/** The server gives 500 events at once and no more; some may come while one asks. */
const N_AT_ONCE = 450;

/** @param {string} name @returns {HTMLElement} */
function place(name) {
  return /** @type {HTMLElement} */ (document.querySelector(`[data-place="${name}"]`));
}

/**
 * What happened before this page was opened.
 * @param {string} campaign
 * @param {number} seq
 * @param {EventTable} table
 */
async function readEarlier(campaign, seq, table) {
  const since = Math.max(0, seq - N_AT_ONCE);
  const { events } = await ask(`campaigns/${campaign}/events?since=${since}`);
  if (since > 0) place("note").textContent = `The newest ${N_AT_ONCE} of ${seq} events.`;
  table.add(events);
}

/** Called by the Log's page script. */
export function startLog() {
  const { campaign = "", person = "", role = "" } = document.body.dataset;
  const events = new EventTable(place("events"));
  const reader = { campaign, me: person ? Number(person) : null, isCoordinator: role === "coordinator" };
  const frames = new FrameTable(place("frames"), reader);
  const note = place("note");
  const connection = new Connection(
    campaign,
    {
      onState: ({ seq, state }, applied) => {
        frames.show(state);
        if (applied.length > 0) events.add(applied);
        else readEarlier(campaign, seq, events).catch(() => { note.textContent = "Earlier events could not be read: reload the page to try again."; });
      },
      onCoverage: () => {},
      onClock: setNow,
      onWay: (way) => {
        if (way === "offline") note.textContent = "No connection: what you see may be old. It goes on by itself.";
        else if (note.textContent?.startsWith("No connection")) note.textContent = "";
      },
      onStale: () => {},
      onFault: (error) => { note.textContent = error.message; },
    },
    browser,
  );
  connection.start();
}
