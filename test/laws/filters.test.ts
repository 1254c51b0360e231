import { expect, test } from "vitest";
import { createEngine, type Method } from "../../src/index.js";
import { applicable } from "../support/answers.js";
import { builds, engines } from "../support/engines.js";
import { kernelsOfEveryKind } from "../support/kernels.js";
import { noiseImage } from "../support/noise.js";
import { layoutOf, type Question } from "../support/questions.js";

const image = noiseImage("u8", 53, 37, 4, 17);
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
      expect(target.data, `${build} ${method}`).toEqual(first.data);
      expect(engines[build].convolve(image, kernel, { method }).data, `${build} ${method}`).toEqual(first.data);
      filter.dispose();
    }
  }
  expect(image.data).toEqual(before);
});

test("filters of one engine do not disturb each other", () => {
  for (const build of builds) {
    const jobs = kernelsOfEveryKind.flatMap(([, kernel]) => applicable(build, { image, kernel }).map(({ method }) => ({ kernel, method })));
    const alone = jobs.map(({ kernel, method }) => engines[build].convolve(image, kernel, { method }).data);
    const filters = jobs.map(({ kernel, method }) => engines[build].prepare(kernel, layoutOf(image), { method }));
    const together = filters.map((filter) => filter.run(image).data);
    filters.filter((__, index) => index % 2 === 0).forEach((filter) => filter.dispose());
    const afterDisposal = filters.map((filter, index) => (index % 2 === 0 ? alone[index]! : filter.run(image).data));
    expect(together).toEqual(alone);
    expect(afterDisposal).toEqual(alone);
    filters.forEach((filter) => filter.dispose());
  }
});

test("a memory limit never changes a byte of direct, separable and running sums", async () => {
  const large = noiseImage("u8", 640, 480, 4, 23);
  const methods: Method[] = ["direct", "separable", "running-sum"];
  let tighter = 0;
  for (const build of builds) {
    for (const [, kernel] of kernelsOfEveryKind.slice(3)) {
      const question: Question = { image: large, kernel };
      for (const { method } of applicable(build, question).filter((candidate) => methods.includes(candidate.method))) {
        const free = engines[build].explain(kernel, layoutOf(large), { method }).bytes;
        const limited = await createEngine({ build, memoryLimit: 65536 * Math.ceil((0.6 * free) / 65536 + 4) });
        try {
          const result = limited.convolve(large, kernel, { method });
          if (limited.explain(kernel, layoutOf(large), { method }).bytes < free) tighter++;
          expect(result.data, `${build} ${method}`).toEqual(engines[build].convolve(large, kernel, { method }).data);
        } catch (error) {
          expect(error).toMatchObject({ code: "memory-limit", fault: "capacity" });
        }
        limited.dispose();
      }
    }
  }
  expect(tighter).toBeGreaterThan(0);
});
