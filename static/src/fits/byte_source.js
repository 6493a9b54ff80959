/** Bytes of a file from any place, without ever holding the file: plain, or unpacked from gzip. */

const MAX_EXPANDED_BYTES = 64 * 1024 * 1024;

/** @typedef {{read: (from: number, to: number) => Promise<Uint8Array>}} ByteSource */

/** A header that cannot be read, with what to do. */
export class HeaderTrouble extends Error {
  /** @param {string} what @param {string} advice */
  constructor(what, advice) {
    super(`${what} ${advice}`);
    this.what = what;
    this.advice = advice;
  }
}

/** @param {Blob} file @returns {ByteSource} */
function plainSource(file) {
  return {
    async read(from, to) {
      return new Uint8Array(await file.slice(from, to).arrayBuffer());
    },
  };
}

/** Unpacks as far as asked and keeps only that far. @param {Blob} file @returns {ByteSource} */
function gzipSource(file) {
  /** @type {Uint8Array[]} */
  const chunks = [];
  let held = 0;
  let isAtEnd = false;
  const reader = file.stream().pipeThrough(new DecompressionStream("gzip")).getReader();

  /** @param {number} to */
  async function unpackTo(to) {
    if (to > MAX_EXPANDED_BYTES) {
      throw new HeaderTrouble("The packed file is too large to look into.", "Unpack it and choose the unpacked file.");
    }
    while (held < to && !isAtEnd) {
      const { done, value } = await reader.read();
      isAtEnd = done;
      if (value) chunks.push(value);
      held += value?.length ?? 0;
    }
  }

  return {
    async read(from, to) {
      try {
        await unpackTo(to);
      } catch (error) {
        if (error instanceof HeaderTrouble) throw error;
        throw new HeaderTrouble("The packed file is damaged.", "Unpack it and choose the unpacked file.");
      }
      return between(chunks, from, Math.min(to, held));
    },
  };
}

/** @param {Uint8Array[]} chunks @param {number} from @param {number} to */
function between(chunks, from, to) {
  const out = new Uint8Array(Math.max(0, to - from));
  let at = 0;
  for (const chunk of chunks) {
    const first = Math.max(from, at);
    const last = Math.min(to, at + chunk.length);
    if (first < last) out.set(chunk.subarray(first - at, last - at), first - from);
    at += chunk.length;
  }
  return out;
}

/** Packed files are known by their first two bytes, never by their name. @param {Blob} file @returns {Promise<ByteSource>} */
export async function byteSource(file) {
  const [first, second] = await plainSource(file).read(0, 2);
  return first === 0x1f && second === 0x8b ? gzipSource(file) : plainSource(file);
}
