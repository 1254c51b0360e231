import { expect, test } from "vitest";
import { binomial, box, createEngine, type Method } from "../../src/index.js";
import { applicable, run } from "../support/answers.js";
import { builds, engines } from "../support/engines.js";
import { kernelsOfEveryKind, noiseKernel } from "../support/kernels.js";
import { firstDifference, largestDifference } from "../support/methods.js";
import { noiseImage } from "../support/noise.js";
import { layoutOf, type Question } from "../support/questions.js";

const image = noiseImage("u8", 53, 37, 4, 17);
const pageBytes = 65536;
/** A kernel that each method takes. */
const kernelOf = { direct: noiseKernel(5, 4, 1), separable: binomial(8), "running-sum": box(11), fft: noiseKernel(17, 15, 2) };
const otherImage = noiseImage("u8", 53, 37, 4, 18);

test.each(kernelsOfEveryKind)("a prepared filter gives the same samples at every run, and the image stays as it was: %s", (_, kernel) => {
  const before = image.data.slice();
  for (const build of builds) {
    for (const { method } of applicable(build, { image, kernel })) {
      const filter = engines[build].prepare(kernel, layoutOf(image), { method });
      const first = filter.run(image);
      filter.run(otherImage);
      const target = { data: new Uint8Array(image.data.length), width: 53, height: 37, channels: 4 as const };
      expect(filter.run(image, target)).toBe(target);
      expect(firstDifference(target.data, first.data), `${build} ${method}`).toBeUndefined();
      expect(firstDifference(engines[build].convolve(image, kernel, { method }).data, first.data), `${build} ${method}`).toBeUndefined();
      filter.dispose();
    }
  }
  expect(firstDifference(image.data, before)).toBeUndefined();
});

test("filters of one engine do not disturb each other", () => {
  for (const build of builds) {
    const jobs = kernelsOfEveryKind.flatMap(([, kernel]) => applicable(build, { image, kernel }).map(({ method }) => ({ kernel, method })));
    const alone = jobs.map(({ kernel, method }) => engines[build].convolve(image, kernel, { method }).data);
    const filters = jobs.map(({ kernel, method }) => engines[build].prepare(kernel, layoutOf(image), { method }));
    const together = filters.map((filter) => filter.run(image).data);
    filters.filter((__, index) => index % 2 === 0).forEach((filter) => filter.dispose());
    const afterDisposal = filters.map((filter, index) => (index % 2 === 0 ? alone[index]! : filter.run(image).data));
    alone.forEach((data, index) => {
      expect(firstDifference(together[index]!, data)).toBeUndefined();
      expect(firstDifference(afterDisposal[index]!, data)).toBeUndefined();
    });
    filters.forEach((filter) => filter.dispose());
  }
});

/** With a limit a filter either says that it cannot, before anything starts, or gives what it gives without. */
test.each(["direct", "separable", "running-sum", "fft"] as Method[])(
  "a memory limit never changes a byte of %s, save that other tiles of the FFT stay within twice its bound",
  async (method) => {
    const large = noiseImage("u8", 260, 200, 4, 23);
    const question: Question = { image: large, kernel: kernelOf[method], options: { alpha: "none", output: { sample: "f32" } } };
    let ran = 0;
    for (const build of builds) {
      const { bytes, errorBound } = engines[build].explain(question.kernel, layoutOf(large), { ...question.options, method });
      const free = run(build, question, method).data;
      for (const part of [0.2, 0.5, 0.75, 0.9, 1]) {
        const limited = await createEngine({ build, memoryLimit: Math.ceil((part * bytes) / pageBytes + 2) * pageBytes });
        try {
          const result = limited.convolve(large, question.kernel, { ...question.options, method }).data;
          ran++;
          if (method === "fft") expect(largestDifference(result, free)).toBeLessThanOrEqual(2 * errorBound);
          else expect(firstDifference(result, free)).toBeUndefined();
        } catch (error) {
          expect(error).toMatchObject({ code: "memory-limit", fault: "capacity" });
        }
        limited.dispose();
      }
    }
    expect(ran).toBeGreaterThan(0);
  },
);
