import { ConvolutionError, type Kernel, kernel } from "../index.js";
import { readInput } from "./files.js";

const form = 'rows of numbers, [[1, 2, 1], [2, 4, 2], [1, 2, 1]], or { "taps": rows, "origin": { "x": 1, "y": 1 } }';

/**
 * Reads a kernel from a JSON file: the rows of its taps, or an object with them and an origin.
 *
 * @throws ConvolutionError `file-unreadable`, `invalid-kernel`, `unknown-option`, `invalid-origin`
 */
export async function readKernelFile(path: string): Promise<Kernel> {
  const content = parse(new TextDecoder().decode(await readInput(path)), path);
  if (Array.isArray(content)) return kernel(content as number[][]);
  if (typeof content !== "object" || content === null || !("taps" in content)) throw malformed(path, "it has no taps", content);
  const { taps, ...options } = content;
  return kernel(taps as number[][], options);
}

function parse(text: string, path: string): unknown {
  try {
    return JSON.parse(text);
  } catch (error) {
    throw malformed(path, error instanceof Error ? error.message : "it is not JSON", text.slice(0, 80), error);
  }
}

function malformed(path: string, reason: string, received: unknown, cause?: unknown): ConvolutionError {
  return new ConvolutionError("invalid-kernel", `${path} does not hold a kernel: ${reason}. It must be ${form}.`, { expected: form, received, cause });
}
