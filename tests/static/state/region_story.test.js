import assert from "node:assert/strict";
import { test } from "node:test";
import { apply } from "../../../static/src/state/apply.js";
import { choicesFor, constraintText, regionStory } from "../../../static/src/state/region_story.js";
import { aState } from "./a_state.js";

const constraint = (number, more = {}) => ({ number, kind: "cone", label: "invented-1", is_on: true, ending: "", ...more });

test("a region without a change is as the alert came", () => {
  const region = { .../** @type {any} */ (aState().region), overlap: null, change: null };
  const { headline, is_trouble } = regionStory(region);
  assert.match(headline, /^As the alert came: 90 % within/);
  assert.equal(is_trouble, false);
});

test("a revision says what changed, and what contradicts it only once", () => {
  const said = "Added. 90 % within 3 square degrees (before: 28); tiles: 9 dropped out. They contradict each other.";
  const notes = ["They contradict each other.", "Another note."];
  const region = { .../** @type {any} */ (aState().region), revision: 2, overlap: 0.001, notes, change: { said } };
  const story = regionStory(region);
  assert.equal(story.headline, `Revision 2: ${said}`);
  assert.deepEqual(story.notes, ["Another note."]);
  assert.equal(story.is_trouble, true);
});

test("a constraint says what it is and whether it counts", () => {
  assert.equal(constraintText(constraint(1)), "1: cone of invented-1, in use");
  assert.equal(constraintText(constraint(2, { is_on: false })), "2: cone of invented-1, switched off");
  assert.equal(constraintText(constraint(3, { is_on: false, ending: "retracted", label: "" })), "3: cone, retracted");
});

test("the last constraint in use can only be replaced; an ended one not at all", () => {
  const [one, two] = [constraint(1), constraint(2, { is_on: false })];
  assert.deepEqual(choicesFor([one, two], one), ["replace by a file"]);
  assert.deepEqual(choicesFor([one, two], two), ["switch on", "replace by a file", "retract"]);
  assert.deepEqual(choicesFor([one, constraint(2)], one), ["switch off", "replace by a file", "retract"]);
  const ended = constraint(3, { is_on: false, ending: "replaced" });
  assert.deepEqual(choicesFor([one, ended], ended), []);
});

test("a revision moves old tiles and leaves claims and frames alone", () => {
  const state = aState();
  const region = { .../** @type {any} */ (state.region), revision: 2 };
  const tiles = { 1: { probability: 0, is_dropped: true } };
  const after = apply(state, { seq: 9, kind: "region.revised", at: "2027-03-14T21:00:00Z", said: "", payload: { region, tiles } });
  assert.equal(after.tiles[1].is_dropped, true);
  assert.equal(after.tiles[1].ra_deg, state.tiles[1].ra_deg);
  assert.equal(after.tiles[2], state.tiles[2]);
  assert.equal(after.claims, state.claims);
  assert.equal(after.frames, state.frames);
  assert.equal(state.tiles[1].is_dropped, false);
});
