/** Labels that never collide: earlier ones keep their place, later ones move or stay away. */

/**
 * @typedef {object} Box
 * @property {number} left
 * @property {number} top
 * @property {number} right
 * @property {number} bottom
 * @typedef {object} Label
 * @property {string} text
 * @property {number} width_px
 * @property {number} height_px
 * @property {[number, number][]} places    wished positions of the lower left corner, best first
 * @property {string} kind
 */

/** @param {Box} a @param {Box} b @returns {boolean} */
export function overlaps(a, b) {
  return a.left < b.right && b.left < a.right && a.top < b.bottom && b.top < a.bottom;
}

/** @param {Label} label @param {[number, number]} at @returns {Box} */
function boxAt(label, at) {
  return { left: at[0], right: at[0] + label.width_px, top: at[1] - label.height_px, bottom: at[1] };
}

/** @param {Box} box @param {{width_px: number, height_px: number}} size */
function isWithin(box, size) {
  return box.left >= 0 && box.top >= 0 && box.right <= size.width_px && box.bottom <= size.height_px;
}

/**
 * Places what can be placed.
 * @param {Label[]} labels    the important first
 * @param {{width_px: number, height_px: number}} size
 * @param {Box[]} taken    boxes that are already in use
 * @returns {{label: Label, box: Box}[]}
 */
export function placeLabels(labels, size, taken = []) {
  /** @type {{label: Label, box: Box}[]} */
  const placed = [];
  const used = [...taken];
  for (const label of labels) {
    const box = label.places
      .map((at) => boxAt(label, at))
      .find((wish) => isWithin(wish, size) && !used.some((other) => overlaps(wish, other)));
    if (!box) continue;
    used.push(box);
    placed.push({ label, box });
  }
  return placed;
}
