import { mostPages } from "./memory.js";

/** Numbers of five bytes at most in the LEB128 form of the format. */
function unsignedBytes(value: number): number[] {
  const bytes: number[] = [];
  for (let rest = value; ; rest = Math.floor(rest / 128)) {
    if (rest < 128) return [...bytes, rest];
    bytes.push((rest % 128) + 128);
  }
}

function readUnsigned(bytes: Uint8Array, start: number): { value: number; end: number } {
  let value = 0;
  let end = start;
  for (let factor = 1; ; factor *= 128) {
    const byte = bytes[end++]!;
    value += (byte & 127) * factor;
    if (byte < 128) return { value, end };
  }
}

const importSection = 2;
/** Limits of the imported memory: "no maximum", and "shared, with a maximum". */
const plainLimits = 0;
const sharedLimits = 3;

/**
 * The core that links with a shared memory: the same code, whose one import, the memory with no maximum, is rewritten to a shared one.
 * A module that imports one kind does not link with the other, and nothing else tells them apart.
 *
 *     import section:  02 length  01  "env" "memory"  02  00 minimum      →      02 length  01  "env" "memory"  02  03 minimum maximum
 *
 * Requires  the memory is the only import, as .build/core.mjs sees to; without that the bytes come back as they are
 * Source    WebAssembly Core Specification 2.0, §5.5.5 (imports), §5.3.8 (limits); threads proposal, limits 0x03 (shared)
 */
export function sharedForm(bytes: Uint8Array<ArrayBuffer>): Uint8Array<ArrayBuffer> {
  for (let start = 8; start < bytes.length;) {
    const { value: byteLength, end: contents } = readUnsigned(bytes, start + 1);
    const end = contents + byteLength;
    if (bytes[start] !== importSection) {
      start = end;
      continue;
    }
    const limits = end - 2;
    if (bytes[limits] !== plainLimits || bytes[limits + 1]! >= 128) return bytes;
    const section = [...bytes.subarray(contents, limits), sharedLimits, bytes[limits + 1]!, ...unsignedBytes(mostPages)];
    return Uint8Array.from([...bytes.subarray(0, start), importSection, ...unsignedBytes(section.length), ...section, ...bytes.subarray(end)]);
  }
  return bytes;
}
