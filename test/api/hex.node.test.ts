import { afterEach, describe, expect, test, vi } from "vitest";
import { bytesOfHex } from "../../src/api/hex.js";

/** The examples of RFC 4648, §10, in small letters. */
const vectors: [string, string][] = [
  ["", ""],
  ["f", "66"],
  ["fo", "666f"],
  ["foo", "666f6f"],
  ["foob", "666f6f62"],
  ["fooba", "666f6f6261"],
  ["foobar", "666f6f626172"],
];

function byHand(text: string): Uint8Array<ArrayBuffer> {
  return Uint8Array.from(text.match(/../g) ?? [], (pair) => Number.parseInt(pair, 16));
}

const hosts = {
  "Node": () => undefined,
  "a page without decoder": () => vi.stubGlobal("Buffer", undefined),
  "a host whose arrays decode": () => {
    vi.stubGlobal("Buffer", undefined);
    vi.stubGlobal("Uint8Array", Object.assign(class extends Uint8Array<ArrayBuffer> {}, { fromHex: byHand }));
  },
};

afterEach(() => vi.unstubAllGlobals());

describe.each(Object.entries(hosts))("hexadecimal text in %s", (_, enter) => {
  test.each(vectors)("%j is read from %j", (text, encoded) => {
    enter();
    expect([...bytesOfHex(encoded)]).toEqual([...new TextEncoder().encode(text)]);
  });

  test("every byte comes back", () => {
    const every = Uint8Array.from({ length: 256 }, (_value, k) => k);
    const encoded = Buffer.from(every).toString("hex");
    enter();
    expect([...bytesOfHex(encoded)]).toEqual([...every]);
  });
});
