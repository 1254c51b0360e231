/** Reads an unsigned LEB128 number: its value and the position after it. */
function readUnsigned(bytes, position) {
  let value = 0;
  for (let factor = 1; ; factor *= 128) {
    const byte = bytes[position++];
    value += (byte & 127) * factor;
    if (byte < 128) return { value, position };
  }
}

/** Every section of a WebAssembly binary: its id, and where it starts and ends. */
function* sectionsOf(bytes) {
  for (let start = 8; start < bytes.length;) {
    const header = readUnsigned(bytes, start + 1);
    const end = header.position + header.value;
    yield { id: bytes[start], start, end };
    start = end;
  }
}

/** The data section's id. */
export const dataSection = 11;

export function sectionIds(bytes) {
  return [...sectionsOf(bytes)].map(({ id }) => id);
}

/**
 * Leaves the custom sections (names, producers, source map address) out of a WebAssembly binary.
 *
 * Source    WebAssembly Core Specification 2.0, §5.5.2 (section = id byte, size as LEB128, contents), §5.5.3 (custom sections have id 0)
 */
export function withoutCustomSections(bytes) {
  const kept = [...sectionsOf(bytes)].filter(({ id }) => id !== 0).map(({ start, end }) => bytes.subarray(start, end));
  return Buffer.concat([bytes.subarray(0, 8), ...kept]);
}
