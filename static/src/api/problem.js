/** What went wrong, in one shape, whether the server said it or the way to it broke. */

/**
 * @typedef {object} ProblemFields
 * @property {number} status      HTTP status; 0 when no answer came
 * @property {string} code
 * @property {string} title
 * @property {string} detail
 * @property {string} advice
 * @property {{field: string, detail: string}[]} errors
 * @property {Record<string, any>} extras    anything else the server added, such as "alternative"
 */

const KNOWN = new Set(["type", "title", "status", "detail", "code", "advice", "errors", "instance"]);

/** A refused or failed request. */
export class Problem extends Error {
  /** @param {Partial<ProblemFields>} fields */
  constructor(fields) {
    super(fields.detail || fields.title || "That did not work.");
    this.status = fields.status ?? 0;
    this.code = fields.code ?? "unknown";
    this.title = fields.title ?? "";
    this.detail = fields.detail ?? "";
    this.advice = fields.advice ?? "";
    this.errors = fields.errors ?? [];
    this.extras = fields.extras ?? {};
  }

  /** True when nothing is known of what the server did: the same request may be sent again. */
  get isUnanswered() {
    return this.status === 0 || this.status >= 502;
  }
}

/** Text of an advice by status, for answers that are not problem details. @param {number} status */
function adviceFor(status) {
  if (status === 401 || status === 403) return "Sign in again; what you typed stays here.";
  if (status === 404) return "It may have been removed: go back and open it again.";
  if (status === 413) return "The file is too large for this server.";
  if (status === 429) return "Wait a minute, then try again.";
  return "What you typed is still here. Try again in a moment.";
}

/** @param {unknown} value @returns {string} */
function asText(value) {
  return typeof value === "string" ? value : "";
}

/** @param {unknown} value @returns {{field: string, detail: string}[]} */
function asErrors(value) {
  if (!Array.isArray(value)) return [];
  return value
    .filter((item) => item && typeof item === "object")
    .map((item) => ({ field: asText(item.field), detail: asText(item.detail) }));
}

/**
 * A Problem from an answer's status and parsed body (null when it was not JSON).
 * @param {number} status @param {any} body @returns {Problem}
 */
export function problemFromAnswer(status, body) {
  const given = body && typeof body === "object" ? body : {};
  const extras = Object.fromEntries(Object.entries(given).filter(([key]) => !KNOWN.has(key)));
  return new Problem({
    status,
    code: asText(given.code) || `http-${status}`,
    title: asText(given.title) || "The server refused this",
    detail: asText(given.detail),
    advice: asText(given.advice) || adviceFor(status),
    errors: asErrors(given.errors),
    extras,
  });
}

/** No answer at all: no signal, or the server is away. @returns {Problem} */
export function problemOfConnection() {
  return new Problem({
    status: 0,
    code: "no-connection",
    title: "No connection to the server",
    detail: "The server did not answer.",
    advice: "What you typed is still here. Try again when there is signal: it is never counted twice.",
  });
}

/** One readable paragraph: what happened, then what to do. @param {Problem} problem */
export function problemText(problem) {
  const what = problem.detail || problem.title;
  const isSaid = problem.advice && what.includes(problem.advice);
  return [what, isSaid ? "" : problem.advice]
    .filter(Boolean)
    .map((part) => (/[.!?]$/.test(part) ? part : `${part}.`))
    .join(" ");
}
