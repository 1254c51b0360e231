import { ConvolutionError, type Kernel, type Origin, type Raster, kernelFromRaster } from "../index.js";
import { readInput } from "./files.js";
import { readImage } from "./png.js";

/** How the levels of a PNG become taps. */
export interface KernelImageArguments {
  origin?: Origin;
  kernelBackground?: number;
  kernelAsStored?: true;
}

/** A kernel, and sentences about what of its file does not count. */
export interface ReadKernel {
  kernel: Kernel;
  notes: string[];
}

/**
 * Takes a kernel from a PNG: a measured point spread function, 8 or 16 bits.
 *
 *     taps = (grey − background) / Σ (grey − background),   grey = mean of the colours as stored; alpha is left out
 *
 * @throws ConvolutionError `file-unreadable`, `invalid-png`, `invalid-raster` (no light), `invalid-origin`, `invalid-kernel` (too many pixels)
 */
export async function readKernelImage(path: string, { origin, kernelBackground, kernelAsStored }: KernelImageArguments): Promise<ReadKernel> {
  const { raster } = readImage(await readInput(path), path);
  const options = { background: kernelBackground, centre: origin, normalise: kernelAsStored !== true };
  return { kernel: fromRaster(path, raster, options), notes: notesAbout(path, raster) };
}

function fromRaster(path: string, raster: Raster, options: { background: number | undefined; centre: Origin | undefined; normalise: boolean }): Kernel {
  try {
    return kernelFromRaster(raster, options);
  } catch (error) {
    // The image itself has been checked, so its light is all that can be missing; the advice names options of this command.
    if (!(error instanceof ConvolutionError) || error.code !== "invalid-raster") throw error;
    const message = `${path} less its background of ${options.background ?? 0} sums to ${String(error.received)}: there is no light to take a kernel from. Lower --kernel-background, or give --origin and --kernel-as-stored.`;
    throw new ConvolutionError("invalid-raster", message, { expected: error.expected, received: error.received, cause: error });
  }
}

function notesAbout(path: string, { data, channels = 1 }: Raster): string[] {
  const colours = channels === 2 || channels === 4 ? channels - 1 : channels;
  const full = data instanceof Uint16Array ? 65535 : 255;
  let isTransparent = false;
  let isColoured = false;
  for (let first = 0; first < data.length; first += channels) {
    isTransparent ||= colours < channels && data[first + colours] !== full;
    isColoured ||= colours === 3 && (data[first] !== data[first + 1] || data[first] !== data[first + 2]);
  }
  const notes: string[] = [];
  if (isColoured) notes.push(`${path} is in colour: the mean of its three channels was taken for the kernel.`);
  if (isTransparent) notes.push(`${path} has transparent pixels: alpha was left out, their colours count in the kernel as stored.`);
  return notes;
}
