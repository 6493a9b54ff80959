import assert from "node:assert/strict";
import { readFileSync } from "node:fs";
import { test } from "node:test";
import { allowedKeywords, NAMES } from "../../../static/src/fits/allow_list.js";

/** The server's own list, from its source. */
function serverPattern() {
  const source = readFileSync(new URL("../../../campaigns/ingest/header_keywords.py", import.meta.url), "utf8");
  const block = /re\.compile\(([\s\S]*?)\n\)/.exec(source)?.[1] ?? "";
  const pattern = [...block.matchAll(/r"([^"]*)"/g)].map((match) => match[1]).join("");
  return new RegExp(`^(?:${pattern})$`);
}

/** Every name that a pattern of plain letters, [..] and {1,2} stands for. @param {string} pattern */
function namesOf(pattern) {
  const pieces = [...pattern.matchAll(/(\[[^\]]+\]|[^[{])(\{1,2\})?/g)];
  return pieces.reduce((names, [, piece, twice]) => {
    const letters = piece.length === 1 ? [piece] : piece === "[0-9]" ? [..."0123456789"] : [...piece.slice(1, -1)];
    const pairs = twice ? letters.filter((letter) => letter !== "0").flatMap((first) => letters.map((second) => first + second)) : [];
    return names.flatMap((name) => [...letters, ...pairs].map((letter) => name + letter));
  }, [""]);
}

/** The device brings the sizes of a compressed picture into NAXISn itself. */
const ONLY_ON_THE_SERVER = new Set(["ZNAXIS", "ZNAXIS1", "ZNAXIS2"]);

test("the device sends nothing that the server would drop", () => {
  const pattern = serverPattern();
  assert.deepEqual([...NAMES].filter((name) => !pattern.test(name)), []);
});

test("the device drops nothing that the server would take", () => {
  const taken = serverPattern().source.slice(4, -2).split("|").flatMap(namesOf);
  assert.ok(taken.length > 400 && taken.includes("PC001002") && taken.includes("PV2_39") && taken.includes("B_0_3"));
  assert.deepEqual(taken.filter((name) => !NAMES.has(name) && !ONLY_ON_THE_SERVER.has(name)), []);
});

test("no keyword of a person, a place or a file is on the list", () => {
  for (const name of ["OBSERVER", "SITELAT", "SITELONG", "LAT-OBS", "LONG-OBS", "OBSGEO-X", "TELESCOP", "OBJECT", "FILENAME", "SWOWNER", "COMMENT", "HISTORY", "AUTHOR"]) {
    assert.ok(!NAMES.has(name), name);
  }
});

test("a path, an address or a long text never leaves even under an allowed keyword", () => {
  const cards = ["/home/me/R", "C:\\me\\R", "me@example.org", "x".repeat(41), ""].map((value, i) => ({ keyword: ["FILTER", "FILTER1", "BAND", "TIMESYS", "RADESYS"][i], value }));
  assert.deepEqual(allowedKeywords(cards), {});
  assert.deepEqual(allowedKeywords([{ keyword: "FILTER", value: "H-alpha 7nm" }, { keyword: "FILTER", value: "later" }]), { FILTER: "H-alpha 7nm" });
});
