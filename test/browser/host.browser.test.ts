import { expect, test } from "vitest";

test("the tests of this project run in a page that is isolated from others", () => {
  expect(typeof document).toBe("object");
  expect(globalThis.crossOriginIsolated).toBe(true);
  expect(typeof SharedArrayBuffer).toBe("function");
});
