import { fileURLToPath } from "node:url";
import type { Raster } from "../../src/index.js";
import type { Case } from "../cases.js";
import type { Contender } from "../contender.js";
import { firstLineOf } from "../host.js";
import { verify, yardstickTolerance } from "../verify.js";
import { YardstickProcess } from "./process.js";
import { freshPath, writeSamples } from "./workFolder.js";

/** The first of them that has SciPy is used: a system's own Python may have it where another one on the path does not. */
const interpreters = ["python3", "/usr/bin/python3"];

const oneThread = Object.fromEntries(["OMP", "OPENBLAS", "MKL", "BLIS", "NUMEXPR"].map((name) => [`${name}_NUM_THREADS`, "1"]));

export const scipyForms = ["fftconvolve", "oaconvolve"];

const versionOf = (interpreter: string): string | undefined =>
  firstLineOf(interpreter, ["-c", "import scipy, numpy, sys; print('SciPy', scipy.__version__, 'NumPy', numpy.__version__, 'Python', sys.version.split()[0])"]);

const findInterpreter = (): string | undefined => interpreters.find((interpreter) => versionOf(interpreter) !== undefined);

export function scipyVersion(): string | undefined {
  const interpreter = findInterpreter();
  return interpreter === undefined ? undefined : versionOf(interpreter);
}

/** Starts SciPy over a case's images, with one thread: see scipy_fft.py. */
export function startScipy(folder: string, { kernel, layout }: Case, planes: readonly Raster[]): YardstickProcess {
  const images = writeSamples(
    folder,
    "planes",
    planes.map(({ data }) => data),
  );
  const taps = writeSamples(folder, "taps", [Float32Array.from(kernel.taps)]);
  const { width, height, channels, sample } = layout;
  const parameters = [width, height, channels, sample, planes.length, images, kernel.width, kernel.height, taps].map(String);
  const script = fileURLToPath(new URL("scipy_fft.py", import.meta.url));
  return new YardstickProcess(findInterpreter() ?? "python3", [script, ...parameters], freshPath(folder, "result"), oneThread);
}

/** Forms of a started SciPy as contenders that verify their results. */
export function scipyContenders(process: YardstickProcess, one: Case, planes: readonly Raster[], forms: readonly string[] = scipyForms): Contender[] {
  return forms.map((form) => {
    const contender = process.contender(`SciPy ${form}`, form);
    const check = async (): Promise<number> => {
      await contender.run(0);
      const bytes = await process.resultBytes();
      // Single precision, as in the other yardsticks, of values up to 255 for bytes.
      const floats = one.layout.sample === "f32";
      return verify(one, planes[0]!, floats ? new Float32Array(bytes.buffer) : bytes, yardstickTolerance * (floats ? 1 : 255));
    };
    return { ...contender, verify: check };
  });
}
