import { fileURLToPath } from "node:url";
import type { Kernel } from "../../src/index.js";
import { firstLineOf } from "../host.js";
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

/** Starts SciPy's convolutions over one-channel planes: 32-bit floats, zero border, mode "same", one thread. */
export function startScipy(folder: string, kernel: Kernel, planes: readonly Float32Array[], width: number): YardstickProcess {
  const { width: m, height: n } = kernel;
  const parameters = [
    fileURLToPath(new URL("scipy_fft.py", import.meta.url)),
    String(width),
    String(planes[0]!.length / width),
    String(planes.length),
    writeSamples(folder, "planes.f32", planes),
    String(m),
    String(n),
    writeSamples(folder, "scipy-taps.f32", [Float32Array.from(kernel.taps)]),
  ];
  return new YardstickProcess(findInterpreter() ?? "python3", parameters, freshPath(folder, "scipy-result.f32"), oneThread);
}
