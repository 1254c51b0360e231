import { ConvolutionError } from "../errors.js";
import type { Choice } from "../planning/choose.js";
import { programsOf } from "../planning/panels.js";
import type { Problem } from "../planning/problem.js";
import { execute, install, type Installed } from "../runtime/execute.js";
import { Execution } from "../runtime/execution.js";
import type { Explanation, Filter, Raster, ResultArray, ResultRaster, Samples, SampleType } from "../types.js";
import type { Core } from "./loading.js";
import type { CheckedRaster } from "./validate/raster.js";
import { checkedSource, checkedTarget } from "./validate/target.js";

/** An array for results: the source's own kind where the sample type is the same, else what `ImageData` and the like take. */
function newSamples(sample: SampleType, source: CheckedRaster, length: number): Samples {
  try {
    if (sample === "f32") return new Float32Array(length);
    if (sample === "u16") return new Uint16Array(length);
    const plain = source.sample === "u8" && Object.prototype.toString.call(source.data) === "[object Uint8Array]";
    return plain ? new Uint8Array(length) : new Uint8ClampedArray(length);
  } catch (cause) {
    const message = `The host cannot make an array of ${length} ${sample} samples for the result. Give a target, or filter by regions.`;
    throw new ConvolutionError("memory-exhausted", message, { expected: "room for the result", received: length, cause });
  }
}

/** A plan with its memory in the engine. */
export class PreparedFilter<T extends SampleType = never> implements Filter<T> {
  readonly explanation: Explanation;
  readonly #problem: Problem;
  readonly #core: Core;
  readonly #leave: () => void;
  #installed: Installed | undefined;
  #execution: Execution | undefined;

  constructor(problem: Problem, choice: Choice, explanation: Explanation, core: Core, leave: () => void) {
    this.explanation = explanation;
    this.#problem = problem;
    this.#core = core;
    this.#leave = leave;
    this.#installed = install(programsOf(choice.plan, problem), core.memory, core.routines);
    this.#execution = new Execution(this.#installed, core.memory, core.routines);
  }

  run<S extends Samples>(image: Raster<S>): ResultRaster<ResultArray<S, T>>;
  run<R extends Raster>(image: Raster, target: R): R;
  run(image: Raster, target?: Raster): Raster {
    const execution = this.#execution;
    if (!execution) {
      const message =
        "run: the filter was disposed, by itself or with its engine, and its memory is given back. Prepare it anew on an engine that is not disposed.";
      throw new ConvolutionError("disposed", message, { expected: "a filter that is not disposed", received: "a disposed filter" });
    }
    const { request, horizontal, vertical } = this.#problem;
    const source = checkedSource(image, request);
    const result = { width: horizontal.count, height: vertical.count, channels: request.channels, sample: request.output.sample };
    if (target !== undefined) {
      execute(execution, source, checkedTarget(target, source, result));
      return target;
    }
    const { width, height, channels } = result;
    const data = newSamples(result.sample, source, width * height * channels);
    execute(execution, source, { data, stride: width * channels });
    return { data, width, height, channels, ...(source.colorSpace === undefined ? {} : { colorSpace: source.colorSpace }) };
  }

  dispose(): void {
    const installed = this.#installed;
    if (!installed) return;
    this.#installed = this.#execution = undefined;
    this.#core.memory.release(installed.address, installed.byteLength);
    this.#leave();
  }
}
