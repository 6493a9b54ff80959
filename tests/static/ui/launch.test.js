import assert from "node:assert/strict";
import { test } from "node:test";
import { typedAlert } from "../../../static/src/ui/launch/alert_form.js";
import { campaignBody, isExercise } from "../../../static/src/ui/launch/campaign_body.js";
import { messageRows, openRadii, withContainment } from "../../../static/src/ui/launch/review.js";
import { wayAfterSignIn } from "../../../static/src/ui/home/sign_in.js";

const words = { ra_deg: "17 45 40", dec_deg: "-29 00 28", radius_deg: "5", containment: "0.9", event_time: "2027-03-14 05:06:07", role: "test", kind: "", id: "" };

test("a typed direction becomes an alert of the documented shape", () => {
  const { alert, unread } = typedAlert(words);
  assert.deepEqual(unread, []);
  assert.equal(alert.event_time, "2027-03-14T05:06:07Z");
  assert.equal(alert.role, "test");
  const [cone] = alert.constraints;
  assert.deepEqual([cone.type, cone.radius_deg, cone.containment], ["cone", 5, 0.9]);
  assert.ok(Math.abs(/** @type {number} */ (cone.ra_deg) - 266.4166667) < 1e-6);
});

test("what cannot be read is named, not guessed", () => {
  assert.deepEqual(typedAlert({ ...words, event_time: "last night", radius_deg: "" }).unread, ["event_time", "radius_deg"]);
});

test("a test message becomes a rehearsal whatever is ticked", () => {
  const choices = { read: /** @type {any} */ ({ upload: "ab", alert: { role: "test" } }), given: /** @type {any} */ ({ file: { name: "sky.fits" } }), typed: { title: "T", is_rehearsal: false }, source: { preset: "steady", parameters: { magnitude: 14 } }, prior: "flat" };
  const body = campaignBody(choices);
  assert.equal(body.is_rehearsal, true);
  assert.equal(/** @type {any} */ (body).upload, "ab");
  assert.equal(/** @type {any} */ (body).filename, "sky.fits");
  assert.deepEqual([body.source, body.prior], [choices.source, "flat"]);
  assert.equal(campaignBody({ ...choices, read: /** @type {any} */ ({ alert: { role: "observation" } }) }).is_rehearsal, false);
});

test("a radius without its meaning is asked about, a map is not", () => {
  const constraints = [{ type: "cone", radius_deg: 5 }, { type: "ellipse", containment: null }, { type: "cone", containment: 0.9 }, { type: "map" }];
  assert.equal(openRadii({ constraints }).length, 2);
  assert.equal(openRadii({}).length, 0);
  assert.deepEqual(withContainment({ constraints }, 0.68).constraints.map((/** @type {any} */ one) => one.containment), [0.68, 0.68, 0.9, undefined]);
});

test("after signing in one stays on this site", () => {
  assert.equal(wayAfterSignIn("?next=/c/abc/tonight/"), "/c/abc/tonight/");
  for (const bad of ["?next=https://elsewhere.example/", "?next=//elsewhere.example", "?next=/%5Celsewhere.example", ""]) {
    assert.equal(wayAfterSignIn(bad), "/");
  }
});

test("a prediction becomes a rehearsal as well, whatever is ticked", () => {
  assert.deepEqual(["test", "prediction", "observation"].map((role) => isExercise({ role })), [true, true, false]);
});

test("what a message cites and links is shown as words", () => {
  const alert = { citations: [{ cite: "supersedes", id: "ivo://a/b#1" }], importance: 0, links: [{ uri: "https://a.example/", name: "map" }, { uri: "ivo://c", name: "" }] };
  assert.deepEqual(messageRows(alert), [
    ["cites", "supersedes ivo://a/b#1"],
    ["importance", "0 of 1, as the sender sees it"],
    ["links, not followed", "map: https://a.example/ · ivo://c"],
  ]);
  assert.deepEqual(messageRows({ importance: null, citations: [], links: [] }), []);
  assert.deepEqual(messageRows({}), []);
});
