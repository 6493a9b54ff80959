import assert from "node:assert/strict";
import { test } from "node:test";
import { Connection } from "../../../static/src/live/connection.js";
import { anEvent, aState } from "../state/a_state.js";

const event = (seq) => anEvent(seq, "observer.status", { observer: 7, status: "in" });

/** Lets answered requests be taken in. */
async function settle() {
  for (let i = 0; i < 20; i += 1) await Promise.resolve();
}

/** A browser of which everything is told, and a server that knows events 1 to `newest`. */
function stage() {
  const log = { states: [], ways: [], stale: 0, clocks: [], faults: [], coverage: [] };
  const sockets = [];
  const timers = [];
  const asked = [];
  const server = { newest: 5, isDown: false, isTooOld: false };
  const around = {
    openSocket(url) {
      const socket = { url, close() { socket.isClosed = true; } };
      sockets.push(socket);
      return socket;
    },
    async ask(path) {
      asked.push(path);
      if (server.isDown) throw new Error("no way");
      const since = /since=(\d+)/.exec(path);
      if (!since) return { seq: server.newest, now: "2027-03-14T20:00:00Z", state: aState() };
      if (server.isTooOld) return { ask_again: true };
      const events = [];
      for (let seq = Number(since[1]) + 1; seq <= server.newest; seq += 1) events.push(event(seq));
      return { seq: server.newest, now: "2027-03-14T20:00:00Z", events };
    },
    later(work, after_ms) {
      const timer = { work, after_ms };
      timers.push(timer);
      return timer;
    },
    forget(timer) {
      const at = timers.indexOf(timer);
      if (at >= 0) timers.splice(at, 1);
    },
  };
  const listener = {
    onState: (held, applied) => log.states.push([held.seq, applied.length]),
    onCoverage: (message) => log.coverage.push(message),
    onClock: (now) => log.clocks.push(now),
    onWay: (way) => log.ways.push(way),
    onStale: () => { log.stale += 1; },
    onFault: (error) => log.faults.push(error.message),
  };
  const connection = new Connection("ember", listener, around);
  const say = (message) => sockets.at(-1).onmessage({ data: JSON.stringify(message) });
  const run = (after_ms) => {
    const timer = timers.find((each) => each.after_ms === after_ms);
    assert.ok(timer, `no timer of ${after_ms} ms`);
    around.forget(timer);
    timer.work();
  };
  return { log, sockets, timers, asked, server, connection, say, run };
}

/** A stage with an open socket that has told its snapshot at event 5. */
function live() {
  const it = stage();
  it.connection.start();
  it.sockets[0].onopen();
  it.say({ type: "snapshot", seq: 5, now: "2027-03-14T20:00:00Z", state: aState() });
  return it;
}

test("a snapshot and the events after it, by socket alone", () => {
  const { log, say, asked } = live();
  say({ type: "event", event: event(6) });
  assert.deepEqual(log.states, [[5, 0], [6, 1]]);
  assert.deepEqual(log.ways, ["live"]);
  assert.deepEqual(asked, []);
});

test("an event told twice is applied once", () => {
  const { log, say } = live();
  say({ type: "event", event: event(6) });
  say({ type: "event", event: event(6) });
  assert.deepEqual(log.states, [[5, 0], [6, 1]]);
});

test("a gap is asked for", async () => {
  const { log, say, asked, server } = live();
  server.newest = 8;
  say({ type: "event", event: event(8) });
  await settle();
  assert.deepEqual(asked, ["campaigns/ember/events?since=5"]);
  assert.deepEqual(log.states.at(-1), [8, 3]);
});

test("a heartbeat that knows more makes the page ask", async () => {
  const { log, say, server } = live();
  server.newest = 7;
  say({ type: "heartbeat", seq: 7, now: "2027-03-14T20:01:00Z" });
  await settle();
  assert.deepEqual(log.states.at(-1), [7, 2]);
  assert.equal(log.clocks.at(-1), "2027-03-14T20:00:00Z");
});

test("ask-again brings a new snapshot and new coverage", async () => {
  const { log, say, server } = live();
  server.newest = 50;
  say({ type: "ask-again" });
  await settle();
  assert.deepEqual(log.states.at(-1), [50, 0]);
  assert.equal(log.stale, 1);
});

test("without a socket it asks every five seconds", async () => {
  const { log, sockets, server, connection, run } = stage();
  connection.start();
  sockets[0].onclose();
  await settle();
  assert.deepEqual(log.states, [[5, 0]]);
  assert.deepEqual(log.ways, ["asking"]);
  server.newest = 6;
  run(5000);
  await settle();
  assert.deepEqual(log.states.at(-1), [6, 1]);
  assert.equal(log.stale, 2, "coverage is asked for with every news");
});

test("too far behind, it takes a snapshot", async () => {
  const { log, sockets, server, run } = live();
  sockets[0].onclose();
  await settle();
  server.isTooOld = true;
  server.newest = 900;
  run(5000);
  await settle();
  assert.deepEqual(log.states.at(-1), [900, 0]);
});

test("with no server it says so, goes on trying, and comes back by itself", async () => {
  const { log, sockets, server, run, timers } = live();
  server.isDown = true;
  sockets[0].onclose();
  await settle();
  assert.equal(log.ways.at(-1), "offline");
  server.isDown = false;
  server.newest = 6;
  run(1000);
  assert.match(sockets[1].url, /\?since=5$/);
  sockets[1].onopen();
  assert.equal(log.ways.at(-1), "live");
  assert.equal(log.stale, 1, "coverage may have moved while the line was down");
  assert.ok(!timers.some(({ after_ms }) => after_ms === 5000), "no more asking while live");
});

test("a silent socket is given up", async () => {
  const { sockets, log, run } = live();
  run(70_000);
  await settle();
  assert.equal(sockets[0].isClosed, true);
  assert.equal(log.ways.at(-1), "asking");
});

test("every message winds up the waiting for silence anew", () => {
  const { say, timers } = live();
  const before = timers.find(({ after_ms }) => after_ms === 70_000);
  say({ type: "heartbeat", seq: 5, now: "2027-03-14T20:01:00Z" });
  const after = timers.filter(({ after_ms }) => after_ms === 70_000);
  assert.equal(after.length, 1);
  assert.notEqual(after[0], before);
});

test("an event of a newer server is a fault that the page tells", () => {
  const { log, say } = live();
  say({ type: "event", event: anEvent(6, "candidate.raised", {}) });
  assert.match(log.faults[0], /Reload/);
});

test("a refusal is told once and ends the trying", () => {
  const { log, say, timers } = live();
  say({ type: "problem", problem: { detail: "This campaign is not public.", advice: "Sign in." } });
  assert.deepEqual(log.faults, ["This campaign is not public. Sign in."]);
  assert.equal(timers.length, 0);
});

test("coverage messages are passed on", () => {
  const { log, say } = live();
  say({ type: "coverage", through_seq: 6 });
  assert.equal(log.coverage[0].through_seq, 6);
});
