/** What hosts bring: newer JavaScript engines decode hexadecimal text themselves, Node by its own kind of byte array. */
interface Decoders {
  Uint8Array: { fromHex?(text: string): Uint8Array<ArrayBuffer> };
  Buffer?: { from(text: string, encoding: "hex"): Uint8Array<ArrayBuffer> };
}

/** 0…15 for the character code of 0…9 or a…f. */
const digitOf = (code: number): number => (code < 97 ? code - 48 : code - 87);

/**
 * The bytes of hexadecimal text, by the host's own decoder where it has one: a loop over the characters runs before the JavaScript engine
 * has compiled it and would take most of the time that loading a core takes.
 *
 * Cores travel as hexadecimal text because it is compressed on the way: whole bytes repeat in it as they do in the binary, in base64 only
 * every third of them.
 */
export function bytesOfHex(text: string): Uint8Array<ArrayBuffer> {
  const { Uint8Array: bytes, Buffer: nodeBytes } = globalThis as unknown as Decoders;
  if (typeof bytes.fromHex === "function") return bytes.fromHex(text);
  if (typeof nodeBytes?.from === "function") return nodeBytes.from(text, "hex");
  const decoded = new Uint8Array(text.length / 2);
  for (let k = 0; k < decoded.length; k++) decoded[k] = 16 * digitOf(text.charCodeAt(2 * k)) + digitOf(text.charCodeAt(2 * k + 1));
  return decoded;
}
