import { kernel, outer, type Kernel } from "../kernels/index.js";
import type { MethodPlan } from "../planning/method.js";
import { methods } from "../planning/methods.js";
import { problemOf, type Request } from "../planning/problem.js";
import { execute, install } from "../runtime/execute.js";
import { Execution } from "../runtime/execution.js";
import type { EngineMemory } from "../runtime/memory.js";
import type { Routines } from "../runtime/routines.js";
import type { Build } from "../types.js";

const width = 19;
const height = 11;

/** Bytes without a pattern that a wrong stride would hide. */
function testImage(): Uint8Array<ArrayBuffer> {
  const data = new Uint8Array(width * height);
  for (let k = 0; k < data.length; k++) data[k] = (k * 7 + (k % 5) * 31) % 256;
  return data;
}

/** Σⱼ Σᵢ taps[j, i] · x[r + 1 − j, c + 1 − i] with zeros outside: the definition for a 3×3 kernel, tap by tap. */
function answers(data: Uint8Array, taps: Float64Array): Float64Array {
  const sums = new Float64Array(width * height);
  for (let tap = 0; tap < 9; tap++) {
    const [down, right] = [Math.floor(tap / 3) - 1, (tap % 3) - 1];
    for (let r = Math.max(0, down); r < Math.min(height, height + down); r++) {
      for (let c = Math.max(0, right); c < Math.min(width, width + right); c++) sums[r * width + c]! += taps[tap]! * data[(r - down) * width + c - right]!;
    }
  }
  return sums;
}

/** One kernel that each method applies to; integers, so that every method is exact. */
function kernelFor({ name: method, variant }: MethodPlan): Kernel {
  if (variant.startsWith("listed"))
    return kernel([
      [1, 0, 0],
      [0, 2, 0],
      [0, 0, 0],
    ]);
  if (method === "running-sum") return outer([1, 1, 1], [2, 2, 2]);
  if (method === "separable") return outer([1, 2, 3], [1, 2, -1]);
  return kernel([
    [1, 2, 3],
    [4, 5, 6],
    [7, 8, 10],
  ]);
}

/** What is written: floats as they are; of bytes a 64th and 3, which is exact, rounded half up. */
const outputs = { floats: { sample: "f32", gain: 1, offset: 0 }, bytes: { sample: "u8", gain: 1 / 64, offset: 3 } } as const;

const written = (kind: keyof typeof outputs, sum: number): number => (kind === "floats" ? sum : Math.max(0, Math.min(255, Math.floor(sum / 64 + 3.5))));

/** Runs every form of every method on a small problem with a known, exact answer; tells the first one that is wrong. */
export function failedAnswer(routines: Routines, memory: EngineMemory, build: Build): string | undefined {
  const data = testImage();
  for (const plan of methods) {
    const kind = plan.variant.endsWith("bytes") ? "bytes" : "floats";
    const tested = kernelFor(plan);
    const request: Request = {
      kernel: tested,
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
    const sums = answers(data, tested.taps);
    for (let k = 0; k < sums.length; k++) {
      const expected = written(kind, sums[k]!);
      if (found[k] !== expected) return `${plan.name} (${plan.variant}) gives ${found[k]} at sample ${k} instead of ${expected}`;
    }
  }
  return undefined;
}
