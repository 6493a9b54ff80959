import assert from "node:assert/strict";
import { test } from "node:test";
import { dataBytes, readCard } from "../../../static/src/fits/cards.js";

const card = (/** @type {string} */ text) => readCard(text.padEnd(80));

test("values of every kind are read as FITS Standard 4.0, section 4.2 writes them", () => {
  assert.deepEqual(card("FILTER  = 'O''Neill '           / name"), { keyword: "FILTER", value: "O'Neill" });
  assert.deepEqual(card("EXPTIME =              1.25D+02"), { keyword: "EXPTIME", value: 125 });
  assert.deepEqual(card("SIMPLE  =                    T / yes"), { keyword: "SIMPLE", value: true });
  assert.deepEqual(card("RA      = '10:00 / 2'"), { keyword: "RA", value: "10:00 / 2" });
  assert.deepEqual(card("CRVAL1  =                      / undefined"), { keyword: "CRVAL1", value: null });
  assert.equal(card("COMMENT not a value = 'keyword'"), null);
  assert.equal(card(""), null);
});

test("data take whole blocks of 2880 bytes (FITS Standard 4.0, eq. 2)", () => {
  const cards = [["BITPIX", -32], ["NAXIS", 2], ["NAXIS1", 100], ["NAXIS2", 100], ["PCOUNT", 1000], ["GCOUNT", 1]].map(
    ([keyword, value]) => ({ keyword: String(keyword), value: Number(value) }),
  );
  assert.equal(dataBytes(cards), Math.ceil((4 * 11000) / 2880) * 2880);
  assert.equal(dataBytes([{ keyword: "NAXIS", value: 1e15 }, { keyword: "BITPIX", value: 8 }]), 0);
});
