import { ConvolutionError, type Kernel, type Origin, kernel } from "../index.js";
import { readKernelExpression } from "./kernelExpression.js";
import { readKernelFile } from "./kernelFile.js";
import { type KernelImageArguments, type ReadKernel, readKernelImage } from "./kernelImage.js";

/** The kernel that is meant, as the parser hands it over: an expression or a file. */
export interface KernelArguments extends KernelImageArguments {
  kernel: string;
}

/** The kernel that is meant: from a PNG, from a JSON file, or as written. */
export async function kernelOf(options: KernelArguments): Promise<ReadKernel> {
  const text = options.kernel.trim();
  if (/\.png$/i.test(text)) return readKernelImage(text, options);
  refuseImageOptions(options);
  const read = /\.json$/i.test(text) ? await readKernelFile(text) : readKernelExpression(text);
  return { kernel: options.origin === undefined ? read : withOrigin(read, options.origin), notes: [] };
}

function withOrigin({ width, height, taps }: Kernel, origin: Origin): Kernel {
  const rows = Array.from({ length: height }, (_, row) => [...taps.subarray(row * width, (row + 1) * width)]);
  return kernel(rows, { origin });
}

function refuseImageOptions({ kernel: text, kernelBackground, kernelAsStored }: KernelArguments): void {
  if (kernelBackground === undefined && kernelAsStored === undefined) return;
  const name = kernelBackground === undefined ? "--kernel-as-stored" : "--kernel-background";
  const message = `${name} is for a kernel from a PNG; "${text}" is none. Leave it out, or name a file that ends in .png.`;
  throw new ConvolutionError("usage", message, { expected: "--kernel file.png", received: text });
}
