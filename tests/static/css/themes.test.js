import assert from "node:assert/strict";
import { readdirSync, readFileSync } from "node:fs";
import { test } from "node:test";

const folder = new URL("../../../static/src/css/", import.meta.url);
const read = (/** @type {string} */ name) => readFileSync(new URL(name, folder), "utf8");

/** Custom properties of each theme; a dimmed night inherits what it does not change. */
function palettes() {
  const blocks = [...read("themes.css").replace(/\/\*[\s\S]*?\*\//g, "").matchAll(/([^{}]+)\{([^}]*)\}/g)];
  const values = (/** @type {string} */ body) => Object.fromEntries([...body.matchAll(/--([\w-]+):\s*(#[0-9a-f]{6})/g)].map((m) => [m[1], m[2]]));
  const named = Object.fromEntries(blocks.map(([, selector, body]) => [selector.trim().replace(/\s+/g, " "), values(body)]));
  const night = named['[data-theme="night"]'];
  return {
    day: named['[data-theme="day"]'],
    dusk: named[':root, [data-theme="dusk"]'],
    night,
    "night, dimmer": { ...night, ...named['[data-theme="night"][data-dim="1"]'] },
    "night, dimmest": { ...night, ...named['[data-theme="night"][data-dim="2"]'] },
  };
}

/** Relative luminance. Source: WCAG 2.2, definition of relative luminance. @param {string} hex */
function luminance(hex) {
  const channels = [1, 3, 5].map((at) => Number.parseInt(hex.slice(at, at + 2), 16) / 255);
  const [r, g, b] = channels.map((c) => (c <= 0.04045 ? c / 12.92 : ((c + 0.055) / 1.055) ** 2.4));
  return 0.2126 * r + 0.7152 * g + 0.0722 * b;
}

/** Source: WCAG 2.2, definition of contrast ratio. @param {string} a @param {string} b */
function contrast(a, b) {
  const [low, high] = [luminance(a), luminance(b)].sort((x, y) => x - y);
  return (high + 0.05) / (low + 0.05);
}

const all = palettes();

for (const name of /** @type {const} */ (["day", "dusk", "night"])) {
  test(`${name}: words reach 4.5:1 and lines that mean something 3:1 (WCAG 2.2, 1.4.3 and 1.4.11)`, () => {
    const colours = all[name];
    for (const ground of ["ground", "panel"]) {
      for (const word of ["text", "quiet", "accent"]) assert.ok(contrast(colours[word], colours[ground]) >= 4.5, `${word} on ${ground}`);
      assert.ok(contrast(colours.edge, colours[ground]) >= 3, `edge on ${ground}`);
    }
    assert.ok(contrast(colours["on-accent"], colours.accent) >= 4.5, "words on a filled button");
    assert.ok(contrast(colours.text, colours.choice) >= (name === "night" ? 3 : 4.5), "selected words");
  });

  test(`${name}: the glow grows in lightness from the ground to its brightest step`, () => {
    const ramp = [0, 1, 2, 3, 4].map((step) => luminance(all[name][`glow-${step}`]));
    const sorted = [...ramp].sort((a, b) => (name === "day" ? b - a : a - b));
    assert.deepEqual(ramp, sorted);
    assert.equal(all[name]["glow-0"], all[name].ground);
  });
}

for (const name of /** @type {const} */ (["night", "night, dimmer", "night, dimmest"])) {
  test(`${name}: green and blue are zero and no luminance is over 0.20`, () => {
    for (const [property, hex] of Object.entries(all[name])) {
      assert.equal(hex.slice(3), "0000", `--${property}: ${hex}`);
      assert.ok(luminance(hex) <= 0.2, `--${property}: ${hex}`);
    }
  });
}

test("every step of the dimmer is darker than the one before", () => {
  const steps = /** @type {const} */ (["night", "night, dimmer", "night, dimmest"]).map((name) => luminance(all[name].text));
  assert.ok(steps[0] > steps[1] && steps[1] > steps[2]);
});

test("colours are named in themes.css alone: every other sheet uses the properties", () => {
  const words = /#[0-9a-f]{3,8}\b|\b(?:rgb|hsl|oklch|lab)a?\(|:\s*(?:white|black|gray|grey|red|blue|green)\b/i;
  for (const name of readdirSync(folder).filter((file) => file !== "themes.css")) {
    assert.doesNotMatch(read(name).replace(/\/\*[\s\S]*?\*\//g, ""), words, name);
  }
});
