/** Runs every *.test.js under tests/static/ with node's own runner (its folder rules differ by version). */

import { spawnSync } from "node:child_process";
import { readdirSync } from "node:fs";
import { dirname, join } from "node:path";
import { fileURLToPath } from "node:url";

/** Test files under a folder. @param {string} folder @returns {string[]} */
function testFiles(folder) {
  return readdirSync(folder, { withFileTypes: true }).flatMap((entry) => {
    const path = join(folder, entry.name);
    if (entry.isDirectory()) return testFiles(path);
    return entry.name.endsWith(".test.js") ? [path] : [];
  });
}

const root = join(dirname(fileURLToPath(import.meta.url)), "..", "tests", "static");
const wanted = process.argv.slice(2);
const files = testFiles(root).filter(
  (path) => wanted.length === 0 || wanted.some((part) => path.includes(part)),
);
const { status } = spawnSync(process.execPath, ["--test", ...files.sort()], { stdio: "inherit" });
process.exit(status ?? 1);
