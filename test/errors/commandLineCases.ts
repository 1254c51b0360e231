import { mkdtempSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import type { ErrorCode } from "../../src/index.js";
import { asConvolutionError } from "../../src/cli/failure.js";
import { checkOutput, readInput } from "../../src/cli/files.js";
import { interruptibly } from "../../src/cli/interruption.js";
import { readImage } from "../../src/cli/png.js";
import { wholeNumbers } from "../../src/cli/numbers.js";
import type { ErrorCase } from "./errorCase.js";

const folder = (): string => mkdtempSync(join(tmpdir(), "tapwise-errors-"));

/** Codes of the command line, through its own functions; test/cli has them in full, as a user meets them. */
export const commandLine: Pick<
  Record<ErrorCode, ErrorCase[]>,
  "invalid-png" | "file-unreadable" | "file-exists" | "file-unwritable" | "usage" | "interrupted" | "internal"
> = {
  "invalid-png": [{ title: "a text file", act: () => readImage(new TextEncoder().encode("not a picture at all"), "leaf.png"), says: ["leaf.png", "PNG"] }],
  "file-unreadable": [{ title: "a file that is not there", act: () => readInput(join(folder(), "missing.png")), says: ["missing.png"] }],
  "file-exists": [
    {
      title: "an output that is there",
      act: () => {
        const path = join(folder(), "out.png");
        writeFileSync(path, "kept");
        return checkOutput(path, false);
      },
      says: ["out.png", "--force"],
    },
  ],
  "file-unwritable": [
    { title: "an output in a folder that is not there", act: () => checkOutput(join(folder(), "nowhere", "out.png"), true), says: ["out.png"] },
  ],
  usage: [{ title: "a size that is no size", act: () => wholeNumbers("wide", 2, "--size", "width and height, such as 1920x1080"), says: ["--size", "wide"] }],
  interrupted: [
    {
      title: "Ctrl-C while something is measured",
      act: () =>
        interruptibly(async (signal) => {
          process.emit("SIGINT", "SIGINT");
          signal.throwIfAborted();
        }),
      says: ["SIGINT"],
    },
  ],
  internal: [
    {
      title: "an error that nobody foresaw",
      act: () => {
        throw asConvolutionError(new TypeError("undefined is not a function"));
      },
      says: ["undefined is not a function", /report/],
    },
  ],
};
