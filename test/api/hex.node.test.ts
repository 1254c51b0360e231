import { afterEach, describe, expect, test, vi } from "vitest";
import { bytesOfBase64 } from "../../src/api/base64.js";

/** The examples of RFC 4648, §10. */
const vectors: [string, string][] = [
  ["", ""],
  ["f", "Zg=="],
  ["fo", "Zm8="],
  ["foo", "Zm9v"],
  ["foob", "Zm9vYg=="],
  ["fooba", "Zm9vYmE="],
  ["foobar", "Zm9vYmFy"],
];

const everyByte = Uint8Array.from({ length: 1024 }, (_, k) => (k * 167) % 256);
const hosts = {
  "Node": () => undefined,
  "a page without decoder": () => vi.stubGlobal("Buffer", undefined),
  "a host whose arrays decode": () => {
    vi.stubGlobal("Buffer", undefined);
    vi.stubGlobal("Uint8Array", Object.assign(class extends Uint8Array<ArrayBuffer> {}, { fromBase64: byHand }));
  },
};

function byHand(text: string): Uint8Array<ArrayBuffer> {
  return Uint8Array.from(atob(text), (character) => character.charCodeAt(0));
}

afterEach(() => vi.unstubAllGlobals());

describe.each(Object.entries(hosts))("base64 in %s", (_, enter) => {
  test.each(vectors)("%j is read from %j", (text, encoded) => {
    enter();
    expect([...bytesOfBase64(encoded)]).toEqual([...new TextEncoder().encode(text)]);
  });

  test("every byte comes back", () => {
    const encoded = btoa(String.fromCharCode(...everyByte));
    enter();
    expect([...bytesOfBase64(encoded)]).toEqual([...everyByte]);
  });
});
