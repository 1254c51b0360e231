import { expect, test } from "vitest";
import { engineWithPacing } from "../../src/api/engine.js";
import { hostPacing } from "../../src/runtime/pacing.js";
import { noiseKernel } from "../support/kernels.js";
import { noiseImage } from "../support/noise.js";
import { layoutOf } from "../support/questions.js";
import { ManualPacing } from "./manualPacing.js";

const image = noiseImage("u8", 256, 900, 4, 5);
const kernel = noiseKernel(9, 9, 4);

/** Runs the same image on `count` filters at once and tells whose slices came in which order. */
async function slices(pacing: ManualPacing, count: number): Promise<string[]> {
  const engine = await engineWithPacing(undefined, pacing);
  const order: string[] = [];
  const runs = Array.from({ length: count }, (_, k) => {
    const filter = engine.prepare(kernel, layoutOf(image), { method: "direct" });
    return filter.runAsync(image, { onProgress: () => order.push("abc"[k]!) });
  });
  await pacing.finish();
  await Promise.all(runs);
  engine.dispose();
  return order;
}

test("filters take turns, a slice each", async () => {
  const order = await slices(new ManualPacing(3), 3);
  expect(order.length).toBeGreaterThan(8);
  expect(order.slice(0, 6).join("")).toBe("abcabc");
});

test("a slice ends before a step as long as the longest so far would take it past 8 milliseconds, and has at least one step", async () => {
  const slow = await slices(new ManualPacing(5), 1);
  const quick = await slices(new ManualPacing(1), 1);
  const endless = await slices(new ManualPacing(100), 1);
  expect(slow).toEqual(endless);
  expect(quick.length).toBeLessThanOrEqual(Math.ceil(slow.length / 7) + 1);
});

test("nothing starts before the host had its turn, and nobody yields while there is nothing to do", async () => {
  const pacing = new ManualPacing();
  const engine = await engineWithPacing(undefined, pacing);
  const filter = engine.prepare(kernel, layoutOf(image));
  expect(pacing.idle).toBe(true);
  let told = 0;
  const running = filter.runAsync(image, { onProgress: () => told++ });
  await Promise.resolve();
  expect(told).toBe(0);
  await pacing.finish();
  await running;
  expect(pacing.idle).toBe(true);
  engine.dispose();
});

/** Each host's own way to yield, the best that it has. */
test.each([
  ["scheduler.yield", (called: () => void) => ({ scheduler: { yield: async () => called() }, setImmediate })],
  ["scheduler.yield that inherits an aborted task", (called: () => void) => ({ scheduler: { yield: async () => Promise.reject(called()) } })],
  ["scheduler.postTask", (called: () => void) => ({ scheduler: { postTask: async (task: () => void) => (called(), task()) } })],
  ["setImmediate", (called: () => void) => ({ setImmediate: (task: () => void) => (called(), queueMicrotask(task)) })],
  ["a message or a timer", (called: () => void) => (called(), {})],
])("work goes on by %s", async (_, hostWith) => {
  let calls = 0;
  const pacing = hostPacing(hostWith(() => calls++));
  await new Promise<void>((resolve) => pacing.yield(resolve));
  expect(calls).toBe(1);
  expect(pacing.now()).toBeGreaterThan(0);
});
