import { kernel } from "../kernels/index.js";
import { methods } from "../planning/methods.js";
import { problemOf, type Request } from "../planning/problem.js";
import { execute, install } from "../runtime/execute.js";
import { Execution } from "../runtime/execution.js";
import type { EngineMemory } from "../runtime/memory.js";
import type { Routines } from "../runtime/routines.js";
import type { Build } from "../types.js";

const width = 19;
const height = 11;
const data = Uint8Array.from({ length: width * height }, (_, k) => (k * 7 + (k % 5) * 31) % 256);

/** Σⱼ Σᵢ taps[j, i] · x[r + 1 − j, c + 1 − i] with zeros outside: the definition for a 3×3 kernel. */
function answers(taps: Float64Array): Float32Array {
  const at = (r: number, c: number): number => (r >= 0 && r < height && c >= 0 && c < width ? data[r * width + c]! : 0);
  return Float32Array.from({ length: width * height }, (_, k) => {
    let sum = 0;
    for (let tap = 0; tap < 9; tap++) sum += taps[tap]! * at(Math.floor(k / width) + 1 - Math.floor(tap / 3), (k % width) + 1 - (tap % 3));
    return sum;
  });
}

/** One kernel that each method applies to; integers, so that every method is exact. */
const kernels = {
  direct: kernel([
    [1, 2, 3],
    [4, 5, 6],
    [7, 8, 10],
  ]),
  separable: kernel([
    [1, 2, -1],
    [2, 4, -2],
    [3, 6, -3],
  ]),
  "running-sum": kernel([
    [2, 2, 2],
    [2, 2, 2],
    [2, 2, 2],
  ]),
  fft: kernel([
    [1, 2, 3],
    [4, 5, 6],
    [7, 8, 10],
  ]),
};

/** What is written: floats as they are; of bytes a 64th and 3, which is exact, rounded half up. */
const outputs = { floats: { sample: "f32", gain: 1, offset: 0 }, bytes: { sample: "u8", gain: 1 / 64, offset: 3 } } as const;

const written = (kind: keyof typeof outputs, sum: number): number => (kind === "floats" ? sum : Math.max(0, Math.min(255, Math.floor(sum / 64 + 3.5))));

/** Runs every form of every method on a small problem with a known, exact answer; tells the first one that is wrong. */
export function failedAnswer(routines: Routines, memory: EngineMemory, build: Build): string | undefined {
  for (const plan of methods) {
    const kind = plan.variant === "bytes" ? "bytes" : "floats";
    const request: Request = {
      kernel: kernels[plan.name],
      correlate: false,
      width,
      height,
      channels: 1,
      sample: "u8",
      rows: "zero",
      columns: "zero",
      extent: "same",
      region: { x: 0, y: 0, width, height },
      method: plan.name,
      tolerance: 0,
      alpha: "none",
      light: "encoded",
      output: outputs[kind],
    };
    const installed = install([plan.program(problemOf(request, build, Infinity))], memory, routines);
    const found = kind === "bytes" ? new Uint8Array(width * height) : new Float32Array(width * height);
    execute(new Execution(installed, memory, routines), { data, stride: width }, { data: found, stride: width });
    memory.release(installed.address, installed.byteLength);
    const expected = answers(kernels[plan.name].taps).map((sum) => written(kind, sum));
    const wrong = found.findIndex((value, k) => value !== expected[k]);
    if (wrong >= 0) return `${plan.name} (${plan.variant}) gives ${found[wrong]} at sample ${wrong} instead of ${expected[wrong]}`;
  }
  return undefined;
}
