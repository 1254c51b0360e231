import { firstLineOf } from "../host.js";
import { gccVersion, hasLibrary } from "./compiled.js";
import { scipyVersion } from "./scipy.js";

/** FFTW where gcc finds it, single precision. */
function fftwVersion(): string | undefined {
  if (gccVersion() === undefined || !hasLibrary("fftw3.h", "fftw3f")) return undefined;
  return `FFTW ${firstLineOf("dpkg-query", ["--show", "--showformat=${Version}", "libfftw3-dev"]) ?? "of unknown version"}`;
}

/** Versions of what the yardsticks are made with; nothing where one is missing. */
export const findTools = (): Record<string, string | undefined> => ({ gcc: gccVersion(), fftw: fftwVersion(), scipy: scipyVersion() });
