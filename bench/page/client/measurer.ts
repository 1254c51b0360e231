/**
 * The script of the worker that measures. A worker, because the page stays at hand while a slow run goes on, drawing the chart does not
 * disturb what is timed, and `run` may use all threads there.
 */
import { createEngine, type Engine } from "../../../src/index.js";
import { measureCrossover, measureProfile, type Crossover } from "../../../src/measure/index.js";
import type { FromMeasurer, Step, ToMeasurer } from "./protocol.js";

type Job = Extract<ToMeasurer, { kind: "measure" }>;

const stopping = new AbortController();
const tell = (message: FromMeasurer): void => (globalThis as unknown as Worker).postMessage(message, []);

/** Milliseconds between two messages about progress: often enough to look live. */
const tellEvery = 300;

/** Tells how far a step is and what it has found. */
function teller(step: Step): (done: number, soFar?: Crossover) => void {
  let last = -Infinity;
  return (done, soFar) => {
    const now = performance.now();
    if (now - last < tellEvery && done < 1) return;
    last = now;
    tell({ kind: "progress", step, done, ...(soFar === undefined ? {} : { soFar }) });
  };
}

const createWorkerFrom = (threadScript: string) => (): Worker => new Worker(threadScript, { type: "module" });

/** An engine with the profile of an earlier visit; nothing where there is none, or it is for another build. */
async function engineAsBefore({ wanted, threadScript, profile }: Job): Promise<Engine | undefined> {
  if (profile === undefined) return undefined;
  return createEngine({ threads: wanted.threads, createWorker: createWorkerFrom(threadScript), profile }).catch(() => undefined);
}

/** The first step: an engine that knows what this device's operations cost. */
async function profiledEngine({ wanted, threadScript }: Job, signal: AbortSignal): Promise<Engine> {
  const options = { threads: wanted.threads, createWorker: createWorkerFrom(threadScript) };
  const unknowing = await createEngine(options);
  const profile = await measureProfile(unknowing, { signal, onProgress: teller("profile") });
  unknowing.dispose();
  tell({ kind: "profile", profile });
  return createEngine({ ...options, profile });
}

async function measure(job: Job): Promise<void> {
  const { signal } = stopping;
  const before = await engineAsBefore(job);
  tell({ kind: "begun", profileFirst: before === undefined });
  const engine = before ?? (await profiledEngine(job, signal));
  const { layout, separable, milliseconds } = job.wanted;
  const crossover = await measureCrossover(engine, { ...layout, separable, milliseconds, signal, onProgress: teller("crossover") });
  tell({ kind: "finished", crossover });
}

/** The engine's errors are for people; the host's own about memory are not. */
function inWords(error: unknown): string {
  if (error instanceof RangeError) return `This device has too little memory for that picture (${error.message}). Choose a smaller one.`;
  return error instanceof Error ? error.message : String(error);
}

globalThis.addEventListener("message", ({ data }: MessageEvent<ToMeasurer>) => {
  if (data.kind === "stop") return stopping.abort();
  measure(data).catch((error: unknown) => {
    if (stopping.signal.aborted) tell({ kind: "stopped" });
    else tell({ kind: "failed", message: inWords(error) });
  });
});
