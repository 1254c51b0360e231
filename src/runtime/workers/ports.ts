import type { EngineWorker } from "../../types.js";

/** What a worker and its owner have in common, whatever the host: messages out, messages in. */
export interface Port {
  postMessage(message: unknown, transfer?: Transferable[]): void;
  listen(heard: (message: unknown) => void): void;
}

interface EventSource {
  on?(kind: string, heard: (value: unknown) => void): void;
  addEventListener?(kind: string, heard: (event: { data?: unknown; message?: string; preventDefault?(): void }) => void): void;
}

interface NodeThreads {
  parentPort: (EventSource & { postMessage(message: unknown, transfer?: Transferable[]): void }) | null;
  Worker: new (address: URL) => EngineWorker;
}

/** Node's threads, without an import that bundlers for the web would stumble over. Nothing elsewhere. */
export function nodeThreads(): NodeThreads | undefined {
  const { process } = globalThis as { process?: { getBuiltinModule?(name: string): unknown } };
  return process?.getBuiltinModule?.("node:worker_threads") as NodeThreads | undefined;
}

/** The port of the worker that this runs in. */
export function ownPort(): Port {
  const parent = nodeThreads()?.parentPort;
  if (parent) return { postMessage: (message, transfer) => parent.postMessage(message, transfer), listen: (heard) => parent.on!("message", heard) };
  const scope = globalThis as unknown as EventSource & { postMessage(message: unknown, transfer?: Transferable[]): void };
  return {
    postMessage: (message, transfer) => scope.postMessage(message, transfer ?? []),
    listen: (heard) => scope.addEventListener!("message", ({ data }) => heard(data)),
  };
}

/** What a worker tells its owner, and that it is gone: it could not be loaded, threw, or ended. */
export interface Listener {
  heard(message: unknown): void;
  gone(reason: string): void;
}

/** Hears a worker of either kind. */
export function listenTo(worker: EngineWorker, { heard, gone }: Listener): void {
  const source = worker as EventSource;
  if (source.on) {
    source.on("message", heard);
    source.on("error", (error) => gone(String(error)));
    source.on("messageerror", (error) => gone(String(error)));
    source.on("exit", (code) => gone(`it ended with ${String(code)}`));
    return;
  }
  source.addEventListener?.("message", ({ data }) => heard(data));
  source.addEventListener?.("messageerror", () => gone("a message could not be read"));
  source.addEventListener?.("error", (event) => {
    event.preventDefault?.();
    gone(event.message ?? "its script could not be loaded");
  });
}

/** Lets a Node process end although the worker waits for work, or not while there is some. */
export function keepsProcess(worker: EngineWorker, keeps: boolean): void {
  const holder = worker as { ref?(): void; unref?(): void };
  if (keeps) holder.ref?.();
  else holder.unref?.();
}
