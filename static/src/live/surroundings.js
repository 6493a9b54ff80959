/** The browser as a Connection sees it. */

import { ask } from "../api/request.js";

/** @param {string} path */
function openSocket(path) {
  const url = new URL(path, location.href);
  url.protocol = url.protocol === "https:" ? "wss:" : "ws:";
  return new WebSocket(url);
}

/** @type {import("./connection.js").Surroundings} */
export const browser = {
  ask: (path) => ask(path),
  openSocket,
  later: (work, after_ms) => setTimeout(work, after_ms),
  forget: (timer) => clearTimeout(timer),
};
