/**
 * Equal-area projections of the sphere seen from its centre, without trigonometry in the inner loop.
 *
 * A view vector u has u[0] to the middle of the map, u[1] to its east, u[2] to its north. Plane coordinates: x to the
 * east, y to the north, one unit per radian in the middle. (East goes left on the screen; that is the screen's affair.)
 *
 * @typedef {import("./vectors.js").Vector} Vector
 * @typedef {object} Projection
 * @property {string} name
 * @property {number} half_width    plane units from the middle to the edge
 * @property {number} half_height
 * @property {(u: Vector) => [number, number] | null} forward    null: not on this map
 * @property {(x: number, y: number) => Vector | null} inverse    null: outside the outline
 * @property {boolean} has_seam    whether the antimeridian is cut open
 */

const ROOT_2 = Math.SQRT2;

/**
 * Half of the longitude, as cosine and sine, from cos(dec)cos(lon), cos(dec)sin(lon) and cos(dec).
 * @param {number} x
 * @param {number} y
 * @param {number} flat
 */
function halfLongitude(x, y, flat) {
  if (flat < 1e-15) return [1, 0];
  const cosine = x / flat;
  if (cosine >= 0) {
    const c = Math.sqrt((1 + cosine) / 2);
    return [c, y / (2 * flat * c)];
  }
  const s = Math.sqrt((1 - cosine) / 2) * (y < 0 ? -1 : 1);
  return [y / (2 * flat * s), s];
}

/**
 * The whole sky in one ellipse twice as wide as high.
 * Source: Hammer 1892, Petermanns Mitteilungen 38, 85 (from memory): Lambert's equal-area map of half the longitudes, stretched.
 * @type {Projection}
 */
export const wholeSky = {
  name: "whole sky",
  half_width: 2 * ROOT_2,
  half_height: ROOT_2,
  has_seam: true,
  forward(u) {
    const flat = Math.hypot(u[0], u[1]);
    const [c, s] = halfLongitude(u[0], u[1], flat);
    const scale = Math.sqrt(2 / (1 + flat * c));
    return [2 * scale * flat * s, scale * u[2]];
  },
  inverse(x, y) {
    const squared = (x * x) / 4 + y * y;
    if (squared > 2) return null;
    const root = Math.sqrt(1 - squared / 4);
    const b = 1 - squared / 2;
    const a = (x / 2) * root;
    const flat = Math.hypot(a, b);
    if (flat < 1e-12) return [0, 0, y < 0 ? -1 : 1];
    return [(b * b - a * a) / flat, (2 * a * b) / flat, y * root];
  },
};

/**
 * The half of the sky around the middle: the dome over a site when the middle is its zenith.
 * Source: Lambert 1772, Beytraege zum Gebrauche der Mathematik III (from memory), azimuthal equal-area.
 * @type {Projection}
 */
export const dome = {
  name: "dome",
  half_width: ROOT_2,
  half_height: ROOT_2,
  has_seam: false,
  forward(u) {
    if (u[0] < 0) return null;
    const scale = Math.sqrt(2 / (1 + u[0]));
    return [scale * u[1], scale * u[2]];
  },
  inverse(x, y) {
    const squared = x * x + y * y;
    if (squared > 2) return null;
    const root = Math.sqrt(1 - squared / 4);
    return [1 - squared / 2, x * root, y * root];
  },
};
