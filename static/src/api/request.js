/** The one way to the server: JSON or a file out, JSON or a Problem back. */

import { problemFromAnswer, problemOfConnection } from "./problem.js";

const ROOT = "/api/v1/";

/**
 * @typedef {object} Outgoing
 * @property {string} [method]
 * @property {any} [json]
 * @property {FormData} [form]
 * @property {string} [key]       Idempotency-Key
 * @property {AbortSignal} [signal]
 */

/** The token against forged requests, put on the page by the server. @returns {string} */
function csrfToken() {
  return document.body.dataset.csrf ?? "";
}

/** @param {Outgoing} outgoing @returns {RequestInit} */
function requestInit({ method = "GET", json, form, key, signal }) {
  /** @type {Record<string, string>} */
  const headers = { Accept: "application/json" };
  if (method !== "GET") headers["X-CSRFToken"] = csrfToken();
  if (key) headers["Idempotency-Key"] = key;
  if (json !== undefined) headers["Content-Type"] = "application/json";
  const body = form ?? (json === undefined ? undefined : JSON.stringify(json));
  return { method, headers, body, signal, credentials: "same-origin" };
}

/** @param {Response} response */
async function parsed(response) {
  const text = await response.text();
  if (!text) return null;
  try {
    return JSON.parse(text);
  } catch {
    return null;
  }
}

/**
 * Asks the API. Throws a Problem for every refusal and for every failed connection.
 * @param {string} path      under /api/v1/
 * @param {Outgoing} [outgoing]
 * @returns {Promise<any>}
 */
export async function ask(path, outgoing = {}) {
  let response;
  let body;
  try {
    response = await fetch(ROOT + path, requestInit(outgoing));
    body = await parsed(response);
  } catch (error) {
    if (error instanceof DOMException && error.name === "AbortError") throw error;
    throw problemOfConnection();
  }
  if (!response.ok) throw problemFromAnswer(response.status, body);
  return body;
}

/** @param {string} path @param {any} json */
export function send(path, json) {
  return ask(path, { method: "POST", json });
}
