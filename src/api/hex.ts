/** What hosts bring: newer JavaScript engines decode base64 themselves, Node by its own kind of byte array. */
interface Decoders {
  Uint8Array: { fromBase64?(text: string): Uint8Array<ArrayBuffer> };
  Buffer?: { from(text: string, encoding: "base64"): Uint8Array<ArrayBuffer> };
}

/**
 * The bytes of base64 text, by the host's own decoder where it has one: a loop over the characters runs before the JavaScript engine
 * has compiled it and would take most of the time that loading a core takes.
 *
 * Source    RFC 4648, §4 (the alphabet)
 */
export function bytesOfBase64(text: string): Uint8Array<ArrayBuffer> {
  const { Uint8Array: bytes, Buffer: nodeBytes } = globalThis as unknown as Decoders;
  if (typeof bytes.fromBase64 === "function") return bytes.fromBase64(text);
  if (typeof nodeBytes?.from === "function") return nodeBytes.from(text, "base64");
  const characters = atob(text);
  const decoded = new Uint8Array(characters.length);
  for (let k = 0; k < decoded.length; k++) decoded[k] = characters.charCodeAt(k);
  return decoded;
}
