import { box, delta, type ErrorCode, type RunOptions } from "../../src/index.js";
import { noiseKernel } from "../support/kernels.js";
import type { Bench } from "./bench.js";
import { untyped, type ErrorCase } from "./errorCase.js";

const target = () => ({ data: new Uint8Array(30), width: 6, height: 5, channels: 1 as const });

/** Two runs at once; the first one's end is waited for, so that the engine is at rest afterwards. */
async function second(first: Promise<unknown>, act: () => unknown): Promise<unknown> {
  try {
    return await act();
  } finally {
    await first;
  }
}

/** A run whose image is taken away while it waits for its turn. */
async function withoutArray(
  take: (data: Uint8Array<ArrayBuffer>, image: Bench["image"]) => [image: Bench["image"], options?: RunOptions<never>],
  bench: Bench,
) {
  const data = new Uint8Array(30);
  const [image, options] = take(data, bench.image);
  const running = bench.filter().runAsync(image, options);
  structuredClone(data.buffer, { transfer: [data.buffer] });
  return running;
}

export const jobs: Pick<Record<ErrorCode, ErrorCase[]>, "array-in-use" | "samples-changed" | "kernel-mismatch" | "filter-busy"> = {
  "array-in-use": [
    {
      title: "one target for two jobs",
      act: ({ filter, image }) => {
        const made = filter();
        const shared = target();
        return second(made.runAsync(image, { target: shared }), () => made.runAsync(image, { target: shared }));
      },
      says: [/target/],
    },
    {
      title: "a target that another filter's job writes to",
      act: ({ filter, image }) => {
        const shared = target();
        return second(filter().runAsync(image, { target: shared }), () => filter().run(image, shared));
      },
    },
    {
      title: "a target that another filter's job reads",
      act: ({ filter, image }) => {
        const shared = target();
        return second(filter().runAsync(shared), () => filter().run(image, shared));
      },
      says: [/image/],
    },
    {
      title: "an image that another filter's job is still writing",
      act: ({ filter, image }) => {
        const shared = target();
        return second(filter().runAsync(image, { target: shared }), () => filter().run(shared));
      },
      says: [/results/],
    },
  ],
  "samples-changed": [
    { title: "the image is transferred during the run", act: (bench) => withoutArray((data) => [{ data, width: 6, height: 5 }], bench), says: [/image/] },
    {
      title: "the target is transferred during the run",
      act: (bench) => withoutArray((data, image) => [image, untyped<RunOptions<never>>({ target: { data, width: 6, height: 5 } })], bench),
      says: [/target/],
    },
  ],
  "kernel-mismatch": [
    { title: "a kernel of another size", act: ({ filter }) => filter().replaceKernel(box(5)), says: ["5×5", "3×3"] },
    {
      title: "a kernel with another origin",
      act: ({ filter }) => filter().replaceKernel(delta({ width: 3, height: 3, origin: { x: 0, y: 2 } })),
      says: ["(0, 2)", "(1, 1)"],
    },
    {
      title: "taps with more separable terms than there is memory for",
      act: ({ engine }) => {
        const made = engine.prepare(box(3), { width: 64, height: 64 }, { method: "separable", tolerance: 0 });
        try {
          return made.replaceKernel(noiseKernel(3, 3, 5));
        } finally {
          made.dispose();
        }
      },
      says: [/terms/],
    },
  ],
  "filter-busy": [
    {
      title: "replaceKernel while a job of the filter is unfinished",
      act: ({ filter, image, kernel }) => {
        const made = filter();
        return second(made.runAsync(image), () => made.replaceKernel(kernel));
      },
    },
    {
      title: "run while a job of the same filter is unfinished",
      act: ({ filter, image }) => {
        const made = filter();
        return second(made.runAsync(image), () => made.run(image));
      },
      says: [/runAsync/],
    },
  ],
};
