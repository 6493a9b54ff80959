/** Bundles src/ into dist/: one ES module a page, the theme script, one style sheet. */

import { existsSync, mkdirSync, readdirSync, rmSync } from "node:fs";
import { basename, dirname, join } from "node:path";
import { fileURLToPath } from "node:url";
import { build } from "esbuild";

const here = dirname(fileURLToPath(import.meta.url));
const dist = join(here, "dist");

/** What every bundle shares. @type {import("esbuild").BuildOptions} */
const shared = { bundle: true, minify: true, target: ["es2022"], logLevel: "warning", outdir: dist };

/** Entry files of the pages. @returns {string[]} */
function pageEntries() {
  const folder = join(here, "src", "pages");
  return readdirSync(folder)
    .filter((name) => name.endsWith(".js"))
    .sort()
    .map((name) => join(folder, name));
}

/** Removes files of an earlier build that this one did not write. @param {Set<string>} written */
function removeStale(written) {
  for (const name of readdirSync(dist)) {
    if (/\.(js|css)$/.test(name) && !written.has(name)) rmSync(join(dist, name));
  }
}

/** @param {string[]} entries @param {import("esbuild").BuildOptions} options */
async function bundle(entries, options) {
  const present = entries.filter((entry) => existsSync(entry));
  if (present.length === 0) return [];
  await build({ ...shared, ...options, entryPoints: present });
  return present.map((entry) => basename(entry));
}

mkdirSync(dist, { recursive: true });
const written = await Promise.all([
  bundle(pageEntries(), { format: "esm" }),
  bundle([join(here, "src", "theme.js")], { format: "iife" }),
  bundle([join(here, "src", "css", "quartersky.css")], {}),
]);
removeStale(new Set(written.flat()));
process.stderr.write(`built ${written.flat().length} files into static/dist\n`);
