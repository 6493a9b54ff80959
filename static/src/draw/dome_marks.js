/** Names of the quarters around the dome. North is up, east to the left, as one sees it lying on the back. */

/**
 * @param {import("../sky/view.js").View} view
 * @returns {{text: string, x_px: number, y_px: number, kind: "ra"}[]}
 */
export function horizonMarks(view) {
  const radius = view.projection.half_width * view.scale_px;
  const [x, y] = [view.width_px / 2, view.height_px / 2];
  return [
    { text: "north", x_px: x + 4, y_px: y - radius + 22 },
    { text: "south", x_px: x + 4, y_px: y + radius - 8 },
    { text: "east", x_px: x - radius + 8, y_px: y - 4 },
    { text: "west", x_px: x + radius - 44, y_px: y - 4 },
    { text: "zenith", x_px: x + 4, y_px: y - 4 },
  ].map((mark) => ({ ...mark, kind: /** @type {const} */ ("ra") }));
}
