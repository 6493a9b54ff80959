/** The glow by WebGL2, where there is a graphics processor; null where there is none. */

import { rotationOf } from "../sky/view.js";
import { FRAGMENT, VERTEX } from "./shaders.js";

/** @param {WebGL2RenderingContext} gl @param {number} kind @param {string} source */
function compiled(gl, kind, source) {
  const shader = /** @type {WebGLShader} */ (gl.createShader(kind));
  gl.shaderSource(shader, source);
  gl.compileShader(shader);
  if (!gl.getShaderParameter(shader, gl.COMPILE_STATUS)) throw new Error(gl.getShaderInfoLog(shader) ?? "");
  return shader;
}

/** @param {WebGL2RenderingContext} gl @returns {WebGLProgram} */
function linked(gl) {
  const program = /** @type {WebGLProgram} */ (gl.createProgram());
  gl.attachShader(program, compiled(gl, gl.VERTEX_SHADER, VERTEX));
  gl.attachShader(program, compiled(gl, gl.FRAGMENT_SHADER, FRAGMENT));
  gl.bindAttribLocation(program, 0, "corner");
  gl.linkProgram(program);
  if (!gl.getProgramParameter(program, gl.LINK_STATUS)) throw new Error(gl.getProgramInfoLog(program) ?? "");
  return program;
}

/** One triangle that covers the screen. @param {WebGL2RenderingContext} gl */
function coverScreen(gl) {
  gl.bindBuffer(gl.ARRAY_BUFFER, gl.createBuffer());
  gl.bufferData(gl.ARRAY_BUFFER, new Float32Array([-1, -1, 3, -1, -1, 3]), gl.STATIC_DRAW);
  gl.enableVertexAttribArray(0);
  gl.vertexAttribPointer(0, 2, gl.FLOAT, false, 0, 0);
}

/** @param {WebGL2RenderingContext} gl */
function levelTexture(gl) {
  gl.bindTexture(gl.TEXTURE_2D_ARRAY, gl.createTexture());
  for (const [name, value] of [
    [gl.TEXTURE_MIN_FILTER, gl.LINEAR],
    [gl.TEXTURE_MAG_FILTER, gl.LINEAR],
    [gl.TEXTURE_WRAP_S, gl.CLAMP_TO_EDGE],
    [gl.TEXTURE_WRAP_T, gl.CLAMP_TO_EDGE],
  ]) gl.texParameteri(gl.TEXTURE_2D_ARRAY, name, value);
  gl.pixelStorei(gl.UNPACK_ALIGNMENT, 1);
}

export class ShaderGlow {
  /** @type {{glow: import("../draw/glow_levels.js").GlowLevels, version: number} | null} */ #uploaded = null;
  #ramp = new Float32Array(15);

  /** @param {HTMLCanvasElement} canvas @param {WebGL2RenderingContext} gl */
  constructor(canvas, gl) {
    this.canvas = canvas;
    this.gl = gl;
    this.program = linked(gl);
    coverScreen(gl);
    levelTexture(gl);
  }

  /** @param {import("../draw/palette.js").Palette} palette */
  setPalette(palette) {
    this.#ramp.set(palette.glow.flat().map((part) => part / 255));
  }

  /**
   * @param {import("../sky/view.js").View} view
   * @param {import("../draw/glow_levels.js").GlowLevels | null} glow
   */
  draw(view, glow) {
    const { gl, canvas } = this;
    gl.viewport(0, 0, canvas.width, canvas.height);
    gl.clearColor(0, 0, 0, 0);
    gl.clear(gl.COLOR_BUFFER_BIT);
    if (!glow) return;
    gl.useProgram(this.program);
    this.#upload(glow);
    this.#setUniforms(view, glow);
    gl.drawArrays(gl.TRIANGLES, 0, 3);
  }

  /** @param {import("../draw/glow_levels.js").GlowLevels} glow */
  #upload(glow) {
    if (this.#uploaded?.glow === glow && this.#uploaded.version === glow.version) return;
    const { gl } = this;
    const { side, levels } = glow;
    gl.texImage3D(gl.TEXTURE_2D_ARRAY, 0, gl.R8, side, side, 12, 0, gl.RED, gl.UNSIGNED_BYTE, levels);
    this.#uploaded = { glow, version: glow.version };
  }

  /** @param {import("../sky/view.js").View} view @param {import("../draw/glow_levels.js").GlowLevels} glow */
  #setUniforms(view, glow) {
    const { gl, program, canvas } = this;
    const at = (/** @type {string} */ name) => gl.getUniformLocation(program, name);
    const ratio = canvas.width / view.width_px;
    gl.uniform2f(at("size_px"), view.width_px * ratio, view.height_px * ratio);
    gl.uniform1f(at("scale_px"), view.scale_px * ratio);
    // Rows of the rotation are columns of its inverse, which is what column-major wants.
    gl.uniformMatrix3fv(at("to_sky"), false, Float32Array.from(rotationOf(view)));
    gl.uniform1i(at("is_dome"), view.projection.has_seam ? 0 : 1);
    gl.uniform1f(at("side"), glow.side);
    gl.uniform3fv(at("ramp"), this.#ramp);
  }
}

/**
 * A renderer that paints on the processor is slower than the raster: it counts as none.
 * @param {WebGL2RenderingContext} gl
 */
function isSoftware(gl) {
  const info = gl.getExtension("WEBGL_debug_renderer_info");
  const name = info ? String(gl.getParameter(info.UNMASKED_RENDERER_WEBGL)) : "";
  return /swiftshader|llvmpipe|softpipe|software|basic render/i.test(name);
}

/**
 * The shader where there is a graphics processor for it, or `?glow=shader` asks for it.
 * @returns {ShaderGlow | null}
 */
export function shaderGlow() {
  const wish = new URLSearchParams(location.search).get("glow");
  const canvas = document.createElement("canvas");
  const gl = wish === "raster" ? null : canvas.getContext("webgl2", { alpha: true, premultipliedAlpha: true });
  if (!gl || (isSoftware(gl) && wish !== "shader")) return null;
  try {
    return new ShaderGlow(canvas, gl);
  } catch {
    return null;
  }
}
