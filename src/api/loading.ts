import { ConvolutionError } from "../errors.js";
import { code as simdCode } from "../generated/simd.js";
import { EngineMemory, sharedMemory } from "../runtime/memory.js";
import { link, type Routines } from "../runtime/routines.js";
import { sharedForm } from "../runtime/sharedForm.js";
import type { Build } from "../types.js";
import { bytesOfHex } from "./hex.js";
import { failedAnswer } from "./selfTest.js";
import type { CheckedEngineOptions } from "./validate/engineOptions.js";

/** A core that is ready: linked with its memory, its answers checked. */
export interface Core {
  build: Build;
  memory: EngineMemory;
  routines: Routines;
  /** What was linked, for other threads, and whether they can share the memory. */
  module: WebAssembly.Module;
  shared: boolean;
}

/** The default page loads the SIMD binary with the package; the others come only when they are needed. */
async function codeOf(build: Build): Promise<string> {
  if (build === "simd") return simdCode;
  return build === "scalar" ? (await import("../generated/scalar.js")).code : (await import("../generated/relaxedSimd.js")).code;
}

/** An eight-byte header and the smallest function that uses a vector: what a host without SIMD refuses. */
const simdProbe = Uint8Array.of(0, 97, 115, 109, 1, 0, 0, 0, 1, 5, 1, 96, 0, 1, 123, 3, 2, 1, 0, 10, 10, 1, 8, 0, 65, 0, 253, 15, 253, 98, 11);

/** The same, as hexadecimal text, with the smallest function that multiplies and adds in one step (relaxed SIMD's f32x4.relaxed_madd). */
const relaxedProbe = "0061736d010000000105016000017b030201000a130111004100fd0f4100fd0f4100fd0ffd85020b";

function hostError(code: "webassembly-missing" | "webassembly-blocked", message: string, cause?: unknown): ConvolutionError {
  const expected = code === "webassembly-blocked" ? "script-src 'self' 'wasm-unsafe-eval'" : "WebAssembly";
  return new ConvolutionError(code, message, { expected, received: cause instanceof Error ? cause.message : "none", cause });
}

async function compile(build: Build, shared: boolean): Promise<WebAssembly.Module> {
  const bytes = bytesOfHex(await codeOf(build));
  try {
    return await WebAssembly.compile(shared ? sharedForm(bytes) : bytes);
  } catch (cause) {
    if (/content security policy|unsafe-eval|\bcsp\b/i.test(String(cause))) {
      const message =
        "The page's content security policy forbids WebAssembly: its script-src lacks 'wasm-unsafe-eval'. Send script-src 'self' 'wasm-unsafe-eval' (which allows WebAssembly and no eval of text).";
      throw hostError("webassembly-blocked", message, cause);
    }
    throw cause;
  }
}

/** The first wrong answer; a core that traps has none. */
function answered(routines: Routines, memory: EngineMemory, build: Build): string | undefined {
  try {
    return failedAnswer(routines, memory, build);
  } catch (cause) {
    if (cause instanceof ConvolutionError) throw cause;
    return `it traps (${String(cause)})`;
  }
}

function buildOf(routines: Routines): Build {
  if (routines.fused() === 1) return "relaxed-simd";
  return routines.vectorFloats() === 4 ? "simd" : "scalar";
}

/** @throws ConvolutionError `self-test-failed` with the answer that was wrong */
async function start(wanted: Build | "auto", module: WebAssembly.Module, memory: EngineMemory, shared: boolean): Promise<Core> {
  const linked = await link(module, memory.memory);
  const build = "missing" in linked ? "simd" : buildOf(linked);
  const unasked = build !== wanted && (wanted !== "auto" || build === "relaxed-simd");
  const failure = "missing" in linked ? linked.missing : unasked ? `it is a ${build} core` : answered(linked, memory, build);
  if (failure === undefined) return { build, memory, routines: linked as Routines, module, shared };
  const message = `The ${wanted} core fails its known-answer test: ${failure}. Try another build; if you passed a module, compile it from this package's own core.`;
  throw new ConvolutionError("self-test-failed", message, { expected: "the known answers", received: failure });
}

/**
 * Loads, links and tests a core. "auto" takes SIMD where the host has it and it gives the right answers, else the scalar core; the fused one
 * comes by name only.
 *
 * @throws ConvolutionError `webassembly-missing`, `webassembly-blocked`, `self-test-failed`, `memory-exhausted`
 */
export async function loadCore(options: CheckedEngineOptions): Promise<Core> {
  if (typeof WebAssembly !== "object") {
    throw hostError("webassembly-missing", "This host has no WebAssembly, and the package has no other core. Use a current browser or Node 20 and later.");
  }
  const { build, memoryLimit, module, threads } = options;
  if (module) return start(build, module, new EngineMemory(memoryLimit), false);
  const forAll = threads > 1 ? sharedMemory(memoryLimit) : undefined;
  const startOwn = async (own: Build): Promise<Core> =>
    start(own, await compile(own, forAll !== undefined), new EngineMemory(memoryLimit, forAll), forAll !== undefined);
  const simd = WebAssembly.validate(simdProbe);
  if (build === "scalar" || (build === "auto" && !simd)) return startOwn("scalar");
  if (!simd) throw hostError("webassembly-missing", 'This host\'s WebAssembly has no SIMD. Use build "auto" or "scalar".');
  if (build === "relaxed-simd") {
    if (WebAssembly.validate(bytesOfHex(relaxedProbe))) return startOwn("relaxed-simd");
    const advice = 'Use build "auto" or "simd", or Node 22 and later.';
    throw hostError("webassembly-missing", `This host's WebAssembly has no relaxed SIMD, which the build "relaxed-simd" needs. ${advice}`);
  }
  try {
    return await startOwn("simd");
  } catch (cause) {
    if (build === "simd" || !(cause instanceof ConvolutionError) || cause.code !== "self-test-failed") throw cause;
    return startOwn("scalar");
  }
}
