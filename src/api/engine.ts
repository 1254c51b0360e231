import { ConvolutionError, unlessShort } from "../errors.js";
import type { Kernel } from "../kernels/index.js";
import { choose, eligibleCandidates, type Choice } from "../planning/choose.js";
import { explanationOf } from "../planning/explanation.js";
import { choiceExplained, type KernelChange } from "../planning/kernelChange.js";
import { problemOf, type Problem, type Request } from "../planning/problem.js";
import { shapeOf } from "../planning/shape.js";
import { simdProfile } from "../planning/simdProfile.js";
import type {
  Build,
  ConvolveOptions,
  Engine,
  EngineOptions,
  Explanation,
  Filter,
  HardwareProfile,
  Layout,
  Method,
  PrepareOptions,
  Raster,
  ResultArray,
  ResultRaster,
  Samples,
  SampleType,
  Verdict,
} from "../types.js";
import { hostPacing, type Pacing } from "../runtime/pacing.js";
import { Turns } from "../runtime/turns.js";
import { ViewMemory } from "../runtime/viewMemory.js";
import type { Crew } from "../runtime/workers/crew.js";
import type { EngineParts } from "./engineParts.js";
import { PreparedFilter } from "./filter.js";
import { loadCore, type Core } from "./loading.js";
import { checkedEngineOptions } from "./validate/engineOptions.js";
import { mostVerdicts, profileFor } from "./validate/profile.js";
import { checkedRaster } from "./validate/raster.js";
import { checkedLayout, checkedRequest } from "./validate/request.js";
import { tryOut } from "./trial.js";
import { warmUp } from "./warming.js";

/** What measuring may do with an engine beyond its public face. */
export interface Insides {
  /** The threads share the engine's memory. */
  readonly shared: boolean;
  /** An engine with other prices on the same core and memory, alone or with all threads. It ends with the engine that lent them. */
  alike(profile: HardwareProfile, threads: "one" | "all"): Engine;
}

const insides = /* @__PURE__ */ new WeakMap<object, Insides>();

/** @throws ConvolutionError `unknown-value` for what is no engine */
export function insidesOf(call: string, engine: unknown): Insides {
  const found = typeof engine === "object" && engine !== null ? insides.get(engine) : undefined;
  if (found) return found;
  const message = `${call}: engine is ${engine === null ? "null" : typeof engine}. Needed: what createEngine of this package gave.`;
  throw new ConvolutionError("unknown-value", message, { expected: "an engine", received: typeof engine });
}

class ConvolutionEngine implements Engine {
  readonly #core: Core;
  readonly #parts: EngineParts;
  readonly #profile: HardwareProfile;
  readonly #filters = new Set<{ dispose(): void }>();
  readonly #lent: boolean;
  readonly #now: () => number;
  /** What trials found, by the shape of problems; from the profile, and since. */
  readonly #verdicts: Map<string, Verdict>;
  #disposed = false;
  /** Tells the lender, where there is one. */
  #leave: () => void = () => undefined;

  /** `lent`: core and crew are another engine's, which ends them. */
  constructor(core: Core, profile: HardwareProfile, pacing: Pacing, crew: Crew | undefined, lent = false) {
    this.#core = core;
    this.#parts = { core, turns: new Turns(pacing), views: new ViewMemory(core.memory), crew };
    this.#profile = profile;
    this.#lent = lent;
    this.#now = () => pacing.now();
    this.#verdicts = new Map((profile.verdicts ?? []).map((verdict) => [verdict.shape, verdict]));
    insides.set(this, {
      shared: core.shared,
      alike: (prices, threads) => {
        this.#usable("measuring");
        const other = new ConvolutionEngine(core, prices, pacing, threads === "one" ? undefined : crew, true);
        other.#leave = () => this.#filters.delete(other);
        this.#filters.add(other);
        return other;
      },
    });
  }

  get build(): Build {
    return this.#core.build;
  }

  get threads(): number {
    return 1 + (this.#parts.crew?.ready.length ?? 0);
  }

  get profile(): HardwareProfile {
    return structuredClone(this.#verdicts.size > 0 ? { ...this.#profile, verdicts: [...this.#verdicts.values()] } : this.#profile);
  }

  convolve<S extends Samples, T extends SampleType = never>(image: Raster<S>, kernel: Kernel, options?: ConvolveOptions<T>): ResultRaster<ResultArray<S, T>> {
    return this.#once("convolve", image, kernel, options, false);
  }

  correlate<S extends Samples, T extends SampleType = never>(image: Raster<S>, kernel: Kernel, options?: ConvolveOptions<T>): ResultRaster<ResultArray<S, T>> {
    return this.#once("correlate", image, kernel, options, true);
  }

  prepare<T extends SampleType = never, S extends SampleType = "u8">(kernel: Kernel, layout: Layout<S>, options?: PrepareOptions<T>): Filter<T, S> {
    this.#usable("prepare");
    return this.#prepared(checkedRequest("prepare", kernel, checkedLayout("prepare", layout), options), false);
  }

  explain(kernel: Kernel, layout: Layout, options?: PrepareOptions): Explanation {
    this.#usable("explain");
    const request = checkedRequest("explain", kernel, checkedLayout("explain", layout), options);
    const { problem, choice } = this.#chosen(request, false);
    return explanationOf(choice, problem, this.#profile, false);
  }

  dispose(): void {
    this.#disposed = true;
    for (const filter of this.#filters) filter.dispose();
    if (!this.#lent) this.#parts.crew?.dispose();
    this.#leave();
  }

  #usable(call: string): void {
    if (!this.#disposed) return;
    const message = `${call}: the engine was disposed. Create a new one.`;
    throw new ConvolutionError("disposed", message, { expected: "an engine that is not disposed", received: "a disposed engine" });
  }

  #once<S extends Samples, T extends SampleType>(
    call: string,
    image: Raster<S>,
    kernel: Kernel,
    options: ConvolveOptions<T> | undefined,
    correlate: boolean,
  ): ResultRaster<ResultArray<S, T>> {
    this.#usable(call);
    const { width, height, channels, sample } = checkedRaster(call, "image", image);
    const filter = this.#prepared<T, SampleType>(checkedRequest(call, kernel, { width, height, channels, sample }, options, correlate), true);
    try {
      return filter.run(image);
    } finally {
      filter.dispose();
    }
  }

  #chosen(request: Request, once: boolean): { problem: Problem; choice: Choice } {
    const crew = { threads: this.threads, shared: this.#core.shared };
    const problem = problemOf(request, this.#core.build, this.#core.memory.largestBlock, crew);
    const verdict = once || this.#verdicts.size === 0 ? undefined : this.#verdicts.get(shapeOf(problem));
    return { problem, choice: choose(problem, this.#profile, once, verdict) };
  }

  #prepared<T extends SampleType, S extends SampleType>(request: Request, once: boolean): PreparedFilter<T, S> {
    const { problem, choice: expected } = this.#chosen(request, once);
    const untried = request.measure === true && request.method === "auto" && expected.verdict === undefined;
    const choice = untried ? this.#tried(problem, expected) : expected;
    if (!once) warmUp(this.#core, choice.plan, problem);
    return this.#installed(problem, choice, once);
  }

  #installed<T extends SampleType, S extends SampleType>(problem: Problem, choice: Choice, once: boolean): PreparedFilter<T, S> {
    const explain = (of: Problem, made: Choice, change?: KernelChange): Explanation =>
      explanationOf(change ? choiceExplained(change, this.#profile) : made, of, this.#profile, once);
    const filter: PreparedFilter<T, S> = new PreparedFilter<T, S>(problem, choice, explain, this.#parts, () => this.#filters.delete(filter));
    this.#filters.add(filter);
    return filter;
  }

  /** The choice after the best candidates were timed; the same where they could not be. */
  #tried(problem: Problem, choice: Choice): Choice {
    const { request } = problem;
    const prepare = (method: Method): Filter | undefined => unlessShort(() => this.#prepared({ ...request, method, measure: false }, false));
    const found = tryOut(eligibleCandidates(problem, choice), choice.plan.name, request, prepare, this.#now);
    if (!found) return choice;
    const verdict = { shape: shapeOf(problem), ...found, date: new Date().toISOString() };
    if (this.#verdicts.size >= mostVerdicts) this.#verdicts.delete(this.#verdicts.keys().next().value!);
    this.#verdicts.set(verdict.shape, verdict);
    return choose(problem, this.#profile, false, verdict);
  }
}

/**
 * The scalar build's is loaded where it is needed. None is shipped for the fused build: its engines choose by the prices of the SIMD one, of which it
 * has the very work.
 */
async function shippedProfileFor(build: Build): Promise<HardwareProfile> {
  return build === "scalar" ? (await import("../planning/scalarProfile.js")).scalarProfile : simdProfile;
}

/** What starts threads is loaded where they are asked for. */
async function startCrew(others: number, core: Core, createWorker: EngineOptions["createWorker"]): Promise<Crew> {
  const { Crew } = await import("../runtime/workers/crew.js");
  return Crew.start(others, core, createWorker);
}

/** As `createEngine`, with another clock and another way to yield. */
export async function engineWithPacing(options: EngineOptions | undefined, pacing: Pacing): Promise<Engine> {
  const checked = checkedEngineOptions(options);
  const core = await loadCore(checked);
  const profile = checked.profile ? profileFor(checked.profile, core.build, checked.threads) : await shippedProfileFor(core.build);
  const crew = checked.threads > 1 ? await startCrew(checked.threads - 1, core, checked.createWorker) : undefined;
  return new ConvolutionEngine(core, profile, pacing, crew);
}

/**
 * Loads the core and makes an engine of it. Nothing is shared between engines.
 *
 * @throws ConvolutionError `webassembly-missing`, `webassembly-blocked`, `self-test-failed` (host); `unknown-option`, `unknown-value`,
 * `invalid-number`, `invalid-profile` (caller)
 * @example
 * const engine = await createEngine();
 * const blurred = engine.convolve({ data: photo, width: 640, height: 480 }, gaussian({ sigma: 2 }));
 */
export async function createEngine(options?: EngineOptions): Promise<Engine> {
  return engineWithPacing(options, hostPacing());
}
