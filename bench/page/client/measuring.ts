import type { HardwareProfile } from "../../../src/index.js";
import { capitalised } from "../../../src/report/methodNames.js";
import { element } from "./element.js";
import type { FromMeasurer, ToMeasurer } from "./protocol.js";
import type { Wanted } from "./wanted.js";

/** Milliseconds that the worker has to stop by itself, before it is ended. */
const patience = 1500;

/** One measurement under way. */
export interface Measuring {
  /** Ends it; `heard` gets "stopped" within two seconds. */
  stop(): void;
}

/** A script of this page as an address that a worker can be made from. */
function addressOf(name: "measurer" | "thread"): string {
  return URL.createObjectURL(new Blob([element(name).textContent ?? ""], { type: "text/javascript" }));
}

const withoutScript = "the part of this page that measures could not be started";

function workerFrom(address: string): Worker | undefined {
  try {
    return new Worker(address, { type: "module" });
  } catch {
    return undefined;
  }
}

/** Measures in a worker of its own and ends it afterwards. The last message that is heard is "finished", "stopped" or "failed". */
export function startMeasuring(wanted: Wanted, profile: HardwareProfile | undefined, heard: (message: FromMeasurer) => void): Measuring {
  const addresses = { measurer: addressOf("measurer"), thread: addressOf("thread") };
  const worker = workerFrom(addresses.measurer);
  if (worker === undefined) {
    queueMicrotask(() => heard({ kind: "failed", message: `This browser makes no workers here: ${withoutScript}.` }));
    return { stop: () => {} };
  }
  const tell = (message: ToMeasurer): void => worker.postMessage(message, []);
  let over = false;
  const end = (message: FromMeasurer): void => {
    if (over) return;
    over = true;
    worker.terminate();
    for (const address of Object.values(addresses)) URL.revokeObjectURL(address);
    heard(message);
  };
  worker.addEventListener("message", ({ data }: MessageEvent<FromMeasurer>) => {
    if (["finished", "stopped", "failed"].includes(data.kind)) end(data);
    else if (!over) heard(data);
  });
  worker.addEventListener("error", ({ message }) => end({ kind: "failed", message: message || `${capitalised(withoutScript)}.` }));
  tell({ kind: "measure", wanted, profile, threadScript: addresses.thread });
  return {
    stop() {
      tell({ kind: "stop" });
      setTimeout(() => end({ kind: "stopped" }), patience);
    },
  };
}
