import assert from "node:assert/strict";
import { test } from "node:test";
import { Problem, problemFromAnswer, problemOfConnection, problemText } from "../../../static/src/api/problem.js";
import { newKey, SendOnce } from "../../../static/src/api/send_once.js";

/** A server that answers from a list, and remembers the keys. @param {(object|Problem)[]} answers */
function pretendServer(answers) {
  /** @type {string[]} */
  const keys = [];
  return {
    keys,
    /** @param {string} _path @param {any} outgoing */
    async ask(_path, outgoing) {
      keys.push(outgoing.key);
      const answer = answers.shift();
      if (answer instanceof Problem) throw answer;
      return answer;
    },
  };
}

test("a key is a version 4 UUID (RFC 9562, section 5.4)", () => {
  assert.match(newKey(), /^[0-9a-f]{8}-[0-9a-f]{4}-4[0-9a-f]{3}-[89ab][0-9a-f]{3}-[0-9a-f]{12}$/);
  assert.notEqual(newKey(), newKey());
});

test("a retry after a lost answer repeats the key", async () => {
  const server = pretendServer([problemOfConnection(), { number: 1 }, { number: 2 }]);
  const once = new SendOnce(server.ask);
  await assert.rejects(once.post("frames", { a: 1 }));
  assert.deepEqual(await once.post("frames", { a: 1 }), { number: 1 });
  await once.post("frames", { a: 1 });
  assert.equal(server.keys[0], server.keys[1]);
  assert.notEqual(server.keys[1], server.keys[2]);
});

test("a changed body or a refusal starts a new key", async () => {
  const refusal = problemFromAnswer(409, { code: "tile-taken", detail: "Taken.", alternative: { tile: 7 } });
  const server = pretendServer([problemOfConnection(), refusal, { ok: true }]);
  const once = new SendOnce(server.ask);
  await assert.rejects(once.post("claims", { tile: 1 }));
  await assert.rejects(once.post("claims", { tile: 2 }), (error) => error === refusal);
  await once.post("claims", { tile: 2 });
  assert.equal(new Set(server.keys).size, 3);
});

test("two taps on one button make one request", async () => {
  const server = pretendServer([{ number: 1 }, { number: 2 }]);
  const once = new SendOnce(server.ask);
  const both = await Promise.all([once.post("frames", { a: 1 }), once.post("frames", { a: 1 })]);
  assert.deepEqual(both, [{ number: 1 }, { number: 1 }]);
  assert.equal(server.keys.length, 1);
});

test("a problem says what happened and what to do, and keeps what else was sent", () => {
  const problem = problemFromAnswer(409, { detail: "Tile 12 is held", advice: "Take tile 7", alternative: { tile: 7 } });
  assert.equal(problemText(problem), "Tile 12 is held. Take tile 7.");
  assert.deepEqual(problem.extras, { alternative: { tile: 7 } });
});

test("an advice that the detail holds already is not said twice", () => {
  assert.equal(problemText(problemFromAnswer(400, { detail: "Too short. What to do: fetch it again.", advice: "fetch it again" })), "Too short. What to do: fetch it again.");
});

test("an answer that is no problem object still says what to do", () => {
  assert.match(problemText(problemFromAnswer(502, null)), /still here/);
  assert.equal(problemFromAnswer(502, null).isUnanswered, true);
  assert.equal(problemFromAnswer(400, "text").isUnanswered, false);
});
