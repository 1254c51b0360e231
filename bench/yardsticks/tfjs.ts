import { createRequire } from "node:module";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import type { Raster } from "../../src/index.js";
import type { Case } from "../cases.js";
import type { Contender } from "../contender.js";
import { processorMilliseconds } from "../processorTime.js";
import { verify, yardstickTolerance } from "../verify.js";

interface Tensor {
  dataSync(): Float32Array;
  dispose(): void;
}

/** The part of @tensorflow/tfjs-core that is used. */
interface Tensors {
  version_core: string;
  setBackend(name: string): Promise<boolean>;
  ready(): Promise<void>;
  env(): { set(flag: string, value: unknown): void };
  tensor4d(values: Float32Array, shape: number[]): Tensor;
  conv2d(image: Tensor, taps: Tensor, strides: number, pad: "same"): Tensor;
}

/** Where @tensorflow/tfjs-core and @tensorflow/tfjs-backend-wasm are installed: TAPWISE_TFJS names a folder, else this project. */
const folder = process.env["TAPWISE_TFJS"] ?? fileURLToPath(new URL("../../", import.meta.url));

/** The library with its WebAssembly backend on one thread; nothing where it is not installed (it is no dependency: 65 MB). */
export async function findTfjs(): Promise<Tensors | undefined> {
  const from = createRequire(join(folder, "package.json"));
  let tensors: Tensors;
  try {
    tensors = from("@tensorflow/tfjs-core") as Tensors;
    from("@tensorflow/tfjs-backend-wasm");
  } catch {
    return undefined;
  }
  tensors.env().set("WASM_HAS_MULTITHREAD_SUPPORT", false);
  await tensors.setBackend("wasm");
  await tensors.ready();
  return tensors;
}

/** One f32 plane, zero border; arrays in, array out. */
export function tfjsConvolution(tensors: Tensors, one: Case, planes: readonly Raster[]): Contender {
  const { width, height } = one.layout;
  const taps = tensors.tensor4d(Float32Array.from(one.kernel.taps.toReversed()), [one.kernel.height, one.kernel.width, 1, 1]);
  const filter = (plane: number): Float32Array => {
    const image = tensors.tensor4d(planes[plane % planes.length]!.data as Float32Array, [1, height, width, 1]);
    const result = tensors.conv2d(image, taps, 1, "same");
    const samples = result.dataSync();
    image.dispose();
    result.dispose();
    return samples;
  };
  return {
    name: `tfjs ${tensors.version_core} conv2d, wasm backend`,
    run(plane) {
      const begun = processorMilliseconds();
      filter(plane);
      return processorMilliseconds() - begun;
    },
    verify: () => verify(one, planes[0]!, filter(0), yardstickTolerance),
  };
}
