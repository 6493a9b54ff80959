/** Arrays that travel as base64 of little-endian bytes. */

/** @param {string} text @returns {Uint8Array} */
export function bytesOf(text) {
  const binary = atob(text);
  const bytes = new Uint8Array(binary.length);
  for (let i = 0; i < binary.length; i += 1) bytes[i] = binary.charCodeAt(i);
  return bytes;
}

/** @param {string} text @returns {Uint32Array} */
export function uint32Of(text) {
  return new Uint32Array(bytesOf(text).buffer);
}

/** @param {string} text @returns {Float32Array} */
export function float32Of(text) {
  return new Float32Array(bytesOf(text).buffer);
}
