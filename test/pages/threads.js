/** Filters on two threads in a page, in runs and in runAsync, and shows whether the bytes are those of one thread. */
import { createEngine, gaussian, kernel } from "./dist/index.js";

const width = 1200;
const height = 900;
const image = { data: Uint8ClampedArray.from({ length: width * height * 4 }, (_, k) => (k * 37 + (k >> 7) * 11) & 255), width, height };
const blur = gaussian({ sigma: 3 });
const edge = kernel(Array.from({ length: 11 }, (_, j) => Array.from({ length: 11 }, (_, i) => ((3 * i + 5 * j) % 7) / 400)));
const same = (a, b) => a.data.length === b.data.length && a.data.every((value, index) => value === b.data[index]);

/** `?missing`: a worker script that is not there. */
const options = location.search === "?missing" ? { createWorker: () => new Worker("no-such-script.js", { type: "module" }) } : {};

async function outcome() {
  try {
    const one = await createEngine();
    const two = await createEngine({ threads: 2, ...options });
    const found = {};
    for (const [method, taps] of [
      ["separable", blur],
      ["direct", edge],
      ["fft", edge],
    ]) {
      const filter = two.prepare(taps, { width, height, channels: 4 }, { method });
      const expected = one.convolve(image, taps, { method });
      const runs = [filter.run(image), await filter.runAsync(image), await filter.runAsync(image), filter.run(image)];
      found[method] = { threads: filter.explanation.threads, same: runs.every((run) => same(run, expected)) };
    }
    const { threads } = two;
    two.dispose();
    return { isolated: crossOriginIsolated, threads, found };
  } catch (error) {
    return { error: String(error) };
  }
}

document.querySelector("output").textContent = JSON.stringify(await outcome());
