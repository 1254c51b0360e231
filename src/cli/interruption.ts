import { unlinkSync } from "node:fs";
import { ConvolutionError } from "../index.js";

/** Signal numbers of POSIX: a process that ends by one reports 128 + number (common practice of shells). */
const numberOfSignal = { SIGHUP: 1, SIGINT: 2, SIGTERM: 15 } as const;

type EndingSignal = keyof typeof numberOfSignal;

const endingSignals = Object.keys(numberOfSignal) as EndingSignal[];

/** Files that are begun and not yet whole. */
const begun = new Set<string>();

/** Of the work that is told of the first signal, where there is such work. */
let controller: AbortController | undefined;

let listenerCount = 0;

/** The exit code of a process that was asked to end: 130 after Ctrl-C. */
export function exitCodeOfSignal(signal: unknown): number {
  return 128 + (numberOfSignal[signal as EndingSignal] ?? numberOfSignal.SIGINT);
}

/**
 * Does work that ends by itself when it is asked to: the first signal (SIGINT, SIGTERM, SIGHUP) aborts, a second one ends the process at once.
 * The reason is a ConvolutionError `interrupted`, whose `received` is the signal's name.
 */
export async function interruptibly<T>(work: (signal: AbortSignal) => Promise<T>): Promise<T> {
  const own = new AbortController();
  controller = own;
  const release = listen();
  try {
    return await work(own.signal);
  } finally {
    controller = undefined;
    release();
  }
}

/** Removes a file when the process is ended by a signal, until the function that comes back is called. */
export function removeWhenInterrupted(path: string): () => void {
  begun.add(path);
  const release = listen();
  return () => {
    begun.delete(path);
    release();
  };
}

function listen(): () => void {
  if (listenerCount++ === 0) for (const signal of endingSignals) process.on(signal, onSignal);
  return () => {
    if (--listenerCount === 0) for (const signal of endingSignals) process.removeListener(signal, onSignal);
  };
}

function onSignal(signal: NodeJS.Signals): void {
  if (controller !== undefined && !controller.signal.aborted) controller.abort(interruption(signal));
  else endNow(signal);
}

function interruption(signal: NodeJS.Signals): ConvolutionError {
  return new ConvolutionError("interrupted", `Interrupted by ${signal}: what was not finished was not written. Run the command again when it suits.`, {
    expected: "to be left alone",
    received: signal,
  });
}

function endNow(signal: NodeJS.Signals): void {
  for (const path of begun) {
    try {
      unlinkSync(path);
    } catch {
      // Not there yet, or already under its final name.
    }
  }
  process.exit(exitCodeOfSignal(signal));
}
