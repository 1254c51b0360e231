import { describe, expect, test } from "vitest";
import {
  box,
  createEngine,
  gaussian,
  kernel,
  outer,
  scaled,
  sharpen,
  type Build,
  type ConvolveOptions,
  type Filter,
  type Kernel,
  type Method,
  type SampleType,
} from "../../src/index.js";
import { builds, engines } from "../support/engines.js";
import { noiseKernel } from "../support/kernels.js";
import { firstDifference } from "../support/methods.js";
import { noiseImage } from "../support/noise.js";
import { layoutOf } from "../support/questions.js";

const origin = { x: 1, y: 5 };
/** Kernels of one size and origin for each method, to be exchanged for one another. */
const families: Record<Method, Kernel[]> = {
  direct: [noiseKernel(7, 6, 1, origin), noiseKernel(7, 6, 2, origin), scaled(noiseKernel(7, 6, 3, origin), 1e-3)],
  separable: [gaussian({ sigma: 2, radius: 6 }), gaussian({ sigma: 3, radius: 6 }), gaussian({ sigma: { x: 1, y: 4 }, radius: 6 })],
  "running-sum": [box({ width: 9, height: 4 }), scaled(box({ width: 9, height: 4 }), 0.75), scaled(box({ width: 9, height: 4 }), 0.3)],
  fft: [noiseKernel(19, 15, 4), noiseKernel(19, 15, 5), scaled(noiseKernel(19, 15, 6), 0.1)],
};
const positive = (taps: Kernel): Kernel => kernelFromTaps(taps, (tap) => Math.abs(tap) + 0.01);

function kernelFromTaps({ width, height, origin: at, taps }: Kernel, change: (tap: number) => number): Kernel {
  return kernel(
    Array.from({ length: height }, (_, j) => Array.from({ length: width }, (__, i) => change(taps[j * width + i]!))),
    { origin: at },
  );
}

const optionSets: ConvolveOptions[] = [
  { alpha: "none" },
  { alpha: "straight", border: "zero" },
  { alpha: "keep", border: { constant: 9 }, extent: "full" },
  { alpha: "premultiplied", light: "linear" },
  { alpha: "none", border: "renormalised" },
  { alpha: "straight", border: { rows: "periodic", columns: "renormalised" }, output: { sample: "f32", gain: 0.5, offset: 3 } },
];

function sameAsNew(build: Build, filter: Filter, taps: Kernel, method: Method, options: ConvolveOptions, sample: SampleType, label: string): void {
  const image = noiseImage(sample, 67, 45, 4, 21);
  const fresh = engines[build].prepare(taps, layoutOf(image), { ...options, method });
  expect(firstDifference(filter.run(image).data, fresh.run(image).data), label).toBeUndefined();
  const { arithmetic, errorBound } = filter.explanation;
  expect({ arithmetic, errorBound }, label).toEqual({ arithmetic: fresh.explanation.arithmetic, errorBound: fresh.explanation.errorBound });
  fresh.dispose();
}

describe.each(Object.entries(families) as [Method, Kernel[]][])("%s", (method, family) => {
  test.each<SampleType>(["u8", "u16", "f32"])("a filter with other taps gives the bytes of a new one that is forced to its method: %s", (sample) => {
    for (const options of optionSets) {
      const signed = method === "separable" || options.border === undefined || options.alpha === "keep";
      const kernels = signed && options.alpha !== "straight" ? family : family.map((taps) => (method === "separable" ? taps : positive(taps)));
      for (const build of builds) {
        const filter = engines[build].prepare(kernels[0]!, { width: 67, height: 45, channels: 4, sample }, { ...options, method }) as Filter;
        for (const taps of [...kernels.slice(1), kernels[0]!]) {
          filter.replaceKernel(taps);
          sameAsNew(build, filter, taps, method, options, sample, `${build} ${method} ${JSON.stringify(options)}`);
        }
        filter.dispose();
      }
    }
  });
});

test("panels take other taps too", async () => {
  const image = noiseImage("u8", 3000, 20, 4, 13);
  for (const [method, [first, second]] of Object.entries(families) as [Method, Kernel[]][]) {
    const { bytes } = engines.simd.explain(first!, layoutOf(image), { method });
    const engine = await createEngine({ memoryLimit: Math.max(65536, Math.ceil(0.4 * bytes)) });
    const filter = engine.prepare(first!, layoutOf(image), { method });
    expect(filter.explanation.bytes, method).toBeLessThan(bytes);
    filter.run(image);
    filter.replaceKernel(second!);
    const found = filter.run(image).data;
    filter.dispose();
    expect(firstDifference(found, engine.prepare(second!, layoutOf(image), { method }).run(image).data), method).toBeUndefined();
    engine.dispose();
  }
});

test("a refused kernel leaves the old taps in place", () => {
  const image = noiseImage("u8", 67, 45, 4, 22);
  const refusals: [Method, Kernel, Kernel, ConvolveOptions, string][] = [
    ["direct", noiseKernel(5, 5, 1), noiseKernel(5, 3, 1), {}, "kernel-mismatch"],
    ["direct", noiseKernel(5, 5, 1), noiseKernel(5, 5, 1, { x: 0, y: 2 }), {}, "kernel-mismatch"],
    ["separable", gaussian({ sigma: 2, radius: 9 }), noiseKernel(19, 19, 1), { output: { sample: "f32" } }, "method-not-applicable"],
    ["running-sum", box(5), gaussian({ sigma: 1, radius: 2 }), {}, "method-not-applicable"],
    ["direct", box(3), sharpen(), { border: "renormalised" }, "border-not-applicable"],
    [
      "direct",
      box(3),
      kernel([
        [0, 1, 0],
        [1, -4, 1],
        [0, 1, 0],
      ]),
      { alpha: "straight" },
      "alpha-not-applicable",
    ],
    [
      "separable",
      outer([1, 2, 1], [1, 2, 1]),
      kernel([
        [1, 0, 0],
        [0, 1, 0],
        [0, 0, 2],
      ]),
      { output: { sample: "f32" }, tolerance: 0 },
      "kernel-mismatch",
    ],
  ];
  for (const [method, first, second, options, code] of refusals) {
    const filter = engines.simd.prepare(first, layoutOf(image), { ...options, method });
    const before = filter.run(image).data;
    const { explanation } = filter;
    expect(() => filter.replaceKernel(second), `${method} ${code}`).toThrow(expect.objectContaining({ code, fault: "caller" }));
    expect(firstDifference(filter.run(image).data, before)).toBeUndefined();
    expect(filter.explanation).toBe(explanation);
    filter.dispose();
  }
});

test("a thousand other kernels take no memory of the engine", async () => {
  const engine = await createEngine();
  const filter = engine.prepare(gaussian({ sigma: 2, radius: 4 }), { width: 100, height: 80, channels: 4 });
  const before = filter.source.data.buffer.byteLength;
  for (let k = 0; k < 1000; k++) filter.replaceKernel(gaussian({ sigma: 1 + k / 500, radius: 4 }));
  expect(filter.source.data.buffer.byteLength).toBe(before);
  engine.dispose();
});

/** A box of bytes may be summed in one arithmetic for some taps and in another for others. */
test("taps that ask for another arithmetic get it where its memory is there, and are refused where it is not", () => {
  const image = noiseImage("u8", 67, 45, 4, 23);
  let taken = 0;
  for (const [method, [first]] of Object.entries(families) as [Method, Kernel[]][]) {
    for (const factor of [-1, -0.25, 1.5, 40, 1e4]) {
      const filter = engines.simd.prepare(first!, layoutOf(image), { method, alpha: "none" });
      const [before, taps] = [filter.run(image).data, scaled(first!, factor)];
      try {
        filter.replaceKernel(taps);
        taken++;
        expect(
          firstDifference(filter.run(image).data, engines.simd.convolve(image, taps, { method, alpha: "none" }).data),
          `${method} ${factor}`,
        ).toBeUndefined();
      } catch (error) {
        expect(error).toMatchObject({ code: "kernel-mismatch" });
        expect(firstDifference(filter.run(image).data, before)).toBeUndefined();
      }
      filter.dispose();
    }
  }
  expect(taken).toBeGreaterThan(4);
});
