import { bytesOfHex } from "../../src/api/hex.js";
import { code as simdCode } from "../../src/generated/simd.js";
import { describe, expect, test } from "vitest";
import { createEngine, delta, type Raster, type SampleType } from "../../src/index.js";
import { applicable, run } from "../support/answers.js";
import { builds, engines } from "../support/engines.js";
import { kernelsOfEveryKind, noiseKernel } from "../support/kernels.js";
import { noiseImage } from "../support/noise.js";
import { layoutOf, type Question } from "../support/questions.js";

const { simd: engine } = engines;
const smoothing = noiseKernel(3, 3, 7);

describe("results", () => {
  test("have the source's kind of array and their own tight memory", () => {
    for (const data of [new Uint8Array(12), new Uint8ClampedArray(12), new Uint16Array(12), new Float32Array(12)]) {
      const result = engine.convolve({ data, width: 4, height: 3 }, smoothing);
      expect(result.data.constructor).toBe(data.constructor);
      expect([result.width, result.height, result.channels]).toEqual([4, 3, 1]);
      expect([result.data.byteOffset, result.data.buffer.byteLength]).toEqual([0, result.data.byteLength]);
      expect(result.data.buffer).not.toBe(data.buffer);
    }
  });

  test.each<[SampleType, object]>([
    ["u8", Uint8ClampedArray],
    ["u16", Uint16Array],
    ["f32", Float32Array],
  ])("are of the type that output asks for, bytes of the one that ImageData takes: %s", (sample, array) => {
    expect(engine.convolve(noiseImage("u16", 5, 4), smoothing, { output: { sample } }).data.constructor).toBe(array);
  });

  test("carry the colour space through", () => {
    const image: Raster = { ...noiseImage("u8", 4, 4, 4), colorSpace: "display-p3" };
    expect(engine.convolve(image, smoothing).colorSpace).toBe("display-p3");
    expect("colorSpace" in engine.convolve(noiseImage("u8", 4, 4, 4), smoothing)).toBe(false);
  });

  test("take their channels from the data where none are given", () => {
    const result = engine.convolve({ data: new Uint8Array(4 * 3 * 2), width: 4, height: 3 }, delta());
    expect(result.channels).toBe(2);
  });

  test("go to a target as they are returned; gaps between its rows stay as they were", () => {
    for (const build of builds) {
      for (const [name, kernel] of kernelsOfEveryKind) {
        const question: Question = { image: noiseImage("u8", 21, 9, 3, 4), kernel };
        for (const { method } of applicable(build, question)) {
          const wanted = run(build, question, method).data;
          const filter = engines[build].prepare(kernel, layoutOf(question.image), { method });
          const [stride, start] = [70, 3];
          const all = new Uint8ClampedArray(start + 9 * stride).fill(77);
          filter.run(question.image, { data: all.subarray(start), width: 21, height: 9, channels: 3, stride });
          const rows = Array.from({ length: 9 }, (_, r) => Array.from(all.subarray(start + r * stride, start + r * stride + 63)));
          expect(rows.flat(), `${build} ${method} ${name}`).toEqual(Array.from(wanted));
          const gaps = Array.from({ length: 8 }, (_, r) => Array.from(all.subarray(start + r * stride + 63, start + (r + 1) * stride)));
          expect(new Set([...all.subarray(0, start), ...gaps.flat()])).toEqual(new Set([77]));
          filter.dispose();
        }
      }
    }
  });
});

describe("explanations", () => {
  const explanation = engine.explain(smoothing, { width: 640, height: 480, channels: 3, sample: "u8" });

  test("name every method once, each with its promise or its refusal", () => {
    expect(explanation.candidates.map(({ method }) => method).toSorted()).toEqual(["direct", "fft", "running-sum", "separable"]);
    for (const { refused, milliseconds, setupMilliseconds, bytes, errorBound, arithmetic } of explanation.candidates) {
      if (refused === undefined) {
        for (const number of [milliseconds, setupMilliseconds, bytes, errorBound]) expect(number).toBeGreaterThanOrEqual(0);
        expect(arithmetic).toMatch(/\w/);
      } else expect(refused).toMatch(/^[A-Z].*\.$/s);
    }
  });

  test("repeat the chosen candidate's figures", () => {
    const chosen = explanation.candidates.find(({ method }) => method === explanation.method)!;
    const { milliseconds, setupMilliseconds, bytes, errorBound, arithmetic } = explanation;
    expect({ milliseconds, setupMilliseconds, bytes, errorBound, arithmetic }).toEqual({
      milliseconds: chosen.milliseconds,
      setupMilliseconds: chosen.setupMilliseconds,
      bytes: chosen.bytes,
      errorBound: chosen.errorBound,
      arithmetic: chosen.arithmetic,
    });
    expect(explanation.build).toBe("simd");
    expect(explanation.because).toMatch(/\w.*\.$/s);
  });

  test("choose the least time among what applies", () => {
    const times = explanation.candidates.flatMap(({ milliseconds }) => (milliseconds === undefined ? [] : [milliseconds]));
    expect(explanation.milliseconds).toBe(Math.min(...times));
  });

  test("print as a table that names the choice and every method, and survive JSON", () => {
    const printed = String(explanation);
    for (const { method } of explanation.candidates) expect(printed).toContain(method);
    expect(printed).toContain(explanation.because);
    const copied = JSON.parse(JSON.stringify(explanation)) as Record<string, unknown>;
    expect(copied["candidates"]).toEqual(JSON.parse(JSON.stringify(explanation.candidates)));
    expect(structuredClone({ ...explanation, toString: undefined })).toBeDefined();
  });
});

test("auto takes SIMD where the host has it; another build only by name", async () => {
  const automatic = await createEngine();
  const scalar = await createEngine({ build: "scalar" });
  expect([automatic.build, scalar.build]).toEqual(["simd", "scalar"]);
  expect(() => Object.assign(automatic, { build: "other" })).toThrow(TypeError);
  automatic.dispose();
  scalar.dispose();
});

test("a compiled module of the caller's is used instead of the bundled one", async () => {
  const own = await createEngine({ module: new WebAssembly.Module(bytesOfHex(simdCode)) });
  const image = noiseImage("u8", 30, 20, 4, 5);
  expect(own.convolve(image, smoothing).data).toEqual(engine.convolve(image, smoothing).data);
  own.dispose();
});

test("an engine of another build does not disturb the first, and importing has no side effects on globals", async () => {
  const before = Object.keys(globalThis).toSorted();
  const image = noiseImage("u8", 30, 20, 4, 5);
  const first = engine.convolve(image, smoothing).data;
  const other = await createEngine({ build: "scalar" });
  other.convolve(image, smoothing);
  other.dispose();
  expect(engine.convolve(image, smoothing).data).toEqual(first);
  expect(Object.keys(globalThis).toSorted()).toEqual(before);
});
