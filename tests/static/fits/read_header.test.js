import assert from "node:assert/strict";
import { test } from "node:test";
import { gzipSync } from "node:zlib";
import { readFrame, readHeader } from "../../../static/src/fits/read_header.js";
import { dataOf, headerBytes, picture } from "./fits_bytes.js";

/** @param {...Buffer} parts */
const file = (...parts) => new Blob(parts);

/** A Blob that tells how many bytes were taken out of it. */
class CountingBlob extends Blob {
  taken = 0;

  /** @param {number} from @param {number} to */
  slice(from, to) {
    this.taken += Math.max(0, Math.min(to, this.size) - from);
    return super.slice(from, to);
  }
}

test("a plain picture gives its allowed keywords", async () => {
  const header = await readHeader(file(picture([["DATE-OBS", "2027-03-14T05:06:07.5"], ["EXPTIME", 60.0], ["FILTER", "R"]])));
  assert.deepEqual(header, { NAXIS: 2, NAXIS1: 60, NAXIS2: 40, "DATE-OBS": "2027-03-14T05:06:07.5", EXPTIME: 60, FILTER: "R" });
});

test("home coordinates, names and paths never leave the device", async () => {
  const secrets = /** @type {[string, any][]} */ ([
    ["SITELAT", "51 28 40"], ["SITELONG", "-0 00 05"], ["OBSGEO-X", 3980000.0], ["LAT-OBS", 51.47],
    ["OBSERVER", "A. Person"], ["FILENAME", "/home/a.person/frame.fits"], ["FILTER", "/home/a.person/R"],
  ]);
  const header = await readHeader(file(picture(secrets)));
  assert.deepEqual(Object.keys(header).sort(), ["NAXIS", "NAXIS1", "NAXIS2"]);
});

test("a compressed picture gives its true sizes, not those of the table around it", async () => {
  const primary = headerBytes([["SIMPLE", true], ["BITPIX", 8], ["NAXIS", 0], ["EXTEND", true], ["EXPTIME", 30]]);
  const table = headerBytes([
    ["XTENSION", "BINTABLE"], ["BITPIX", 8], ["NAXIS", 2], ["NAXIS1", 8], ["NAXIS2", 4000], ["PCOUNT", 900], ["GCOUNT", 1],
    ["ZIMAGE", true], ["ZNAXIS", 2], ["ZNAXIS1", 6000], ["ZNAXIS2", 4000], ["CRVAL1", 83.6],
  ]);
  const header = await readHeader(file(primary, table));
  assert.deepEqual(header, { NAXIS: 2, NAXIS1: 6000, NAXIS2: 4000, CRVAL1: 83.6, EXPTIME: 30 });
});

test("a table before the picture is passed over", async () => {
  const primary = headerBytes([["SIMPLE", true], ["BITPIX", 8], ["NAXIS", 0], ["MJD-OBS", 61000.25]]);
  const table = headerBytes([["XTENSION", "BINTABLE"], ["BITPIX", 8], ["NAXIS", 2], ["NAXIS1", 10], ["NAXIS2", 500], ["PCOUNT", 0], ["GCOUNT", 1]]);
  const image = headerBytes([["XTENSION", "IMAGE"], ["BITPIX", -32], ["NAXIS", 2], ["NAXIS1", 7], ["NAXIS2", 5], ["PCOUNT", 0], ["GCOUNT", 1]]);
  const header = await readHeader(file(primary, table, dataOf(5000), image));
  assert.deepEqual(header, { NAXIS: 2, NAXIS1: 7, NAXIS2: 5, "MJD-OBS": 61000.25 });
});

test("a gzip file is unpacked only as far as its header", async () => {
  const packed = gzipSync(Buffer.concat([picture([["RA", "05 34 31.9"]]), Buffer.alloc(9_000_000)]));
  assert.equal((await readHeader(new Blob([packed]))).RA, "05 34 31.9");
});

test("the picture itself is not read", async () => {
  const blob = new CountingBlob([picture(), Buffer.alloc(30_000_000)]);
  await readHeader(blob);
  assert.ok(blob.taken < 20_000, `${blob.taken} bytes were taken`);
});

test("a long header is read to its end, one beyond 1 MB is refused", async () => {
  const many = (/** @type {number} */ n) => Array.from({ length: n }, () => /** @type {[string, any]} */ (["HISTORYX", 1]));
  assert.equal((await readHeader(file(picture([...many(2000), ["CRVAL2", -5.4]])))).CRVAL2, -5.4);
  await assert.rejects(readHeader(file(picture(many(13000)))), /longer than 1 MB/);
});

for (const [name, blob, expected] of /** @type {[string, Blob, RegExp][]} */ ([
  ["an empty file", new Blob([]), /not a FITS file/],
  ["another kind of file", new Blob(["\xff\xd8\xff\xe0 JFIF picture of something"]), /not a FITS file/],
  ["a cut-off header", new Blob([picture(Array.from({ length: 90 }, () => ["XX", 1])).subarray(0, 5000)]), /cut off/],
  ["a damaged gzip file", new Blob([Buffer.from([0x1f, 0x8b, 8, 0, 1, 2, 3, 4, 5, 6, 7, 8])]), /damaged|not a FITS/],
  ["a file without a picture", file(headerBytes([["SIMPLE", true], ["BITPIX", 8], ["NAXIS", 0]])), /no picture/],
])) {
  test(`${name} is refused with what to do, and nothing hangs`, async () => {
    await assert.rejects(readHeader(blob), expected);
  });
}

const SOLVED = /** @type {[string, any][]} */ ([["CTYPE1", "RA---TAN"], ["CTYPE2", "DEC--TAN"], ["CRVAL2", 20.0]]);

/** @param {number} ra_deg @param {[string, any][]} more */
function extension(ra_deg, more = SOLVED) {
  return headerBytes([["XTENSION", "IMAGE"], ["BITPIX", 8], ["NAXIS", 2], ["NAXIS1", 60], ["NAXIS2", 40], ["PCOUNT", 0], ["GCOUNT", 1], ["CRVAL1", ra_deg], ["OBSERVER", "A. Person"], ...more]);
}

test("each solved picture of a mosaic is given, and nothing private of any", async () => {
  const primary = headerBytes([["SIMPLE", true], ["BITPIX", 8], ["NAXIS", 0], ["EXPTIME", 30]]);
  const pictures = [150, 150.5, 151, 151.5, 152, 152.5, 153, 153.5, 154, 154.5].flatMap((ra_deg) => [extension(ra_deg), dataOf(2400)]);
  const frame = await readFrame(file(primary, ...pictures));
  assert.equal(frame.header.EXPTIME, 30);
  assert.deepEqual(frame.pictures.map(({ CRVAL1 }) => CRVAL1), [150, 150.5, 151, 151.5, 152, 152.5, 153, 153.5, 154, 154.5]);
  assert.ok(frame.pictures.every((cards) => !("OBSERVER" in cards)));
});

test("one picture with others that are not solved is no mosaic", async () => {
  const primary = headerBytes([["SIMPLE", true], ["BITPIX", 8], ["NAXIS", 0]]);
  const frame = await readFrame(file(primary, extension(150), dataOf(2400), extension(0, []), dataOf(2400)));
  assert.equal(frame.header.CRVAL1, 150);
  assert.deepEqual(frame.pictures, []);
});
