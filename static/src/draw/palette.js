/** The theme's colours, read from the style sheet's custom properties for canvas and WebGL. */

/**
 * @typedef {[number, number, number]} Rgb
 * @typedef {object} Palette
 * @property {string} ground
 * @property {string} text
 * @property {string} accent
 * @property {string} quiet
 * @property {string} line
 * @property {string} edge
 * @property {Rgb[]} glow    five steps, ground to brightest
 * @property {string} font    family of the page
 */

const GLOW_STEPS = [0, 1, 2, 3, 4];

/** @param {string} colour "#rrggbb" or "#rgb" @returns {Rgb} */
export function rgbOf(colour) {
  const hex = colour.trim().replace("#", "");
  const full = hex.length === 3 ? [...hex].map((digit) => digit + digit).join("") : hex;
  const value = Number.parseInt(full, 16);
  return [(value >> 16) & 255, (value >> 8) & 255, value & 255];
}

/** @returns {Palette} */
export function readPalette() {
  const style = getComputedStyle(document.documentElement);
  const read = (/** @type {string} */ name) => style.getPropertyValue(name).trim();
  return {
    ground: read("--ground"),
    text: read("--text"),
    accent: read("--accent"),
    quiet: read("--quiet"),
    line: read("--line"),
    edge: read("--edge"),
    glow: GLOW_STEPS.map((step) => rgbOf(read(`--glow-${step}`))),
    font: getComputedStyle(document.body).fontFamily,
  };
}

/** Colour of a glow 0..255 as the ramp gives it. @param {Rgb[]} glow @param {number} level @returns {Rgb} */
export function rampColour(glow, level) {
  const at = (level / 255) * (glow.length - 1);
  const step = Math.min(glow.length - 2, Math.floor(at));
  const mix = at - step;
  return /** @type {Rgb} */ (
    [0, 1, 2].map((i) => Math.round(glow[step][i] * (1 - mix) + glow[step + 1][i] * mix))
  );
}

/** 256 opaque pixels in the byte order of image data. @param {Rgb[]} glow @returns {Uint32Array} */
export function rampPixels(glow) {
  const bytes = new Uint8ClampedArray(4 * 256);
  for (let level = 0; level < 256; level += 1) {
    bytes.set([...rampColour(glow, level), 255], 4 * level);
  }
  return new Uint32Array(bytes.buffer);
}
