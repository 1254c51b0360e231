import { expect, expectTypeOf, test } from "vitest";
import { box } from "../../src/index.js";
import { engines } from "../support/engines.js";

const engine = engines.simd;
const pixels = { data: new Uint8ClampedArray(64), width: 4, height: 4 };
const bytes = { data: new Uint8Array(64), width: 4, height: 4 };
const words = { data: new Uint16Array(16), width: 4, height: 4 };

test("results have the array type that they are declared with, on a buffer that ImageData takes", () => {
  const plain = engine.convolve(pixels, box(3));
  expectTypeOf(plain.data).toEqualTypeOf<Uint8ClampedArray<ArrayBuffer>>();
  expectTypeOf(plain.data).toExtend<ImageDataArray>();
  expect(plain.data).toBeInstanceOf(Uint8ClampedArray);

  const own = engine.correlate(bytes, box(3), { border: "zero" });
  expectTypeOf(own.data).toEqualTypeOf<Uint8Array<ArrayBuffer>>();
  expect(own.data).toBeInstanceOf(Uint8Array);

  const signed = engine.convolve(bytes, box(3), { output: { sample: "f32" } });
  expectTypeOf(signed.data).toEqualTypeOf<Float32Array<ArrayBuffer>>();
  expect(signed.data).toBeInstanceOf(Float32Array);

  const shown = engine.convolve(words, box(3), { output: { sample: "u8", gain: 1 / 257 } });
  expectTypeOf(shown.data).toEqualTypeOf<Uint8ClampedArray<ArrayBuffer>>();
  expect(shown.data).toBeInstanceOf(Uint8ClampedArray);
});

test("so do those of a prepared filter, and a target comes back as it is", () => {
  const filter = engine.prepare(box(3), { width: 4, height: 4, channels: 4 }, { output: { sample: "u16", gain: 257 } });
  const result = filter.run(pixels);
  expectTypeOf(result.data).toEqualTypeOf<Uint16Array<ArrayBuffer>>();
  expect(result.data).toBeInstanceOf(Uint16Array);
  const target = { data: new Uint16Array(64), width: 4, height: 4, note: "mine" };
  expectTypeOf(filter.run(pixels, target)).toEqualTypeOf<typeof target>();
  expect(filter.run(pixels, target)).toBe(target);
  filter.dispose();
});
