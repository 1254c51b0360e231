import { CommanderError } from "commander";
import { ConvolutionError, type ErrorCode } from "../index.js";
import { exitCodeOfSignal } from "./interruption.js";

/** Exit codes of the command line. */
export const exitCodes = { done: 0, failed: 1, wrongUsage: 2 } as const;

/** The caller's errors that no other command line would mend: the files are at fault. */
const fileCodes: ReadonlySet<ErrorCode> = new Set(["invalid-png", "file-unreadable", "file-exists", "file-unwritable", "invalid-profile"]);

/** 2 where the command asks for what cannot be done and has to be written differently, 128 + the signal's number after an interruption, else 1. */
export function exitCodeOf(error: ConvolutionError): number {
  if (error.code === "interrupted") return exitCodeOfSignal(error.received);
  return error.fault === "caller" && !fileCodes.has(error.code) ? exitCodes.wrongUsage : exitCodes.failed;
}

/** Any thrown thing as the one class of errors. */
export function asConvolutionError(error: unknown): ConvolutionError {
  if (error instanceof ConvolutionError) return error;
  if (error instanceof CommanderError)
    return usageError(error.code === "commander.help" ? "the command is missing: filter, explain or measure" : error.message);
  if (error instanceof RangeError && /alloc|length/i.test(error.message))
    return new ConvolutionError(
      "memory-exhausted",
      `The host has no memory left for this image (${error.message}). Filter a --region of it, or cut it into parts.`,
      { expected: "free memory", received: error.message, cause: error },
    );
  const reason = error instanceof Error ? error.message : String(error);
  return new ConvolutionError("internal", `Something went wrong inside tapwise: ${reason}. Please report it with the command that led to it.`, {
    expected: "no error",
    received: reason,
    cause: error,
  });
}

/** The parser's message as a sentence, with the way to help. */
function usageError(message: string): ConvolutionError {
  const sentence = message.replace(/^error: /, "").replaceAll(/\s*\n\s*/g, " ");
  const capital = sentence.charAt(0).toUpperCase() + sentence.slice(1);
  const end = /[.?!)]$/.test(capital) ? "" : ".";
  return new ConvolutionError("usage", `${capital}${end} See "tapwise --help".`, { expected: "a command as in tapwise --help", received: sentence });
}

export function asData({ code, fault, message, expected, received }: ConvolutionError): object {
  return { code, fault, message, expected: expected ?? null, received: received ?? null };
}
