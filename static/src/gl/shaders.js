/** The glow as a fragment shader: screen to sky to HEALPix to level to colour. The twin of raster_glow.js. */

export const VERTEX = `#version 300 es
in vec2 corner;
void main() { gl_Position = vec4(corner, 0.0, 1.0); }
`;

/** Sources: sky/projections.js (inverses) and sky/healpix.js (place of a direction). */
export const FRAGMENT = `#version 300 es
precision highp float;
precision highp sampler2DArray;
uniform vec2 size_px;
uniform float scale_px;
uniform mat3 to_sky;
uniform bool is_dome;
uniform float side;
uniform sampler2DArray levels;
uniform vec3 ramp[5];
out vec4 colour;

const float HALF_PI = 1.5707963267948966;

bool on_map(vec2 p, out vec3 u) {
  vec2 q = is_dome ? p : vec2(p.x / 2.0, p.y);
  float squared = dot(q, q);
  if (squared > 2.0) return false;
  float root = sqrt(1.0 - squared / 4.0);
  float b = 1.0 - squared / 2.0;
  if (is_dome) { u = vec3(b, p * root); return true; }
  float a = q.x * root;
  float flat_part = max(length(vec2(a, b)), 1e-9);
  u = vec3((b * b - a * a) / flat_part, 2.0 * a * b / flat_part, p.y * root);
  return true;
}

vec3 belt(float z, float tt) {
  float up = side * (0.5 + tt);
  float slope = side * z * 0.75;
  float jp = up - slope;
  float jm = up + slope;
  float ifp = floor(jp / side);
  float ifm = floor(jm / side);
  float face = ifp == ifm ? mod(ifp, 4.0) + 4.0 : ifp < ifm ? mod(ifp, 4.0) : mod(ifm, 4.0) + 8.0;
  return vec3(jm - ifm * side, side - (jp - ifp * side), face);
}

vec3 cap(vec3 v, float tt) {
  float quarter = min(3.0, floor(tt));
  float reach = side * sqrt(3.0 * dot(v.xy, v.xy) / (1.0 + abs(v.z)));
  float jp = min(side, (tt - quarter) * reach);
  float jm = min(side, (1.0 - tt + quarter) * reach);
  return v.z >= 0.0 ? vec3(side - jm, side - jp, quarter) : vec3(jp, jm, quarter + 8.0);
}

float level(vec3 v) {
  float tt = atan(v.y, v.x) / HALF_PI;
  if (tt < 0.0) tt += 4.0;
  vec3 at = abs(v.z) <= 2.0 / 3.0 ? belt(v.z, tt) : cap(v, tt);
  vec2 inside = clamp(at.xy, vec2(0.5), vec2(side - 0.5)) / side;
  return texture(levels, vec3(inside, at.z)).r;
}

void main() {
  vec2 p = (size_px / 2.0 - vec2(gl_FragCoord.x, size_px.y - gl_FragCoord.y)) / scale_px;
  vec3 u;
  if (!on_map(p, u)) { colour = vec4(0.0); return; }
  float at = level(to_sky * u) * 4.0;
  int below = int(min(3.0, floor(at)));
  colour = vec4(mix(ramp[below], ramp[below + 1], at - float(below)), 1.0);
}
`;
