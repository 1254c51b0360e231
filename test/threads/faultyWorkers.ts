import { Worker } from "node:worker_threads";

/** A worker of the given JavaScript. */
export const workerOf = (script: string): Worker => new Worker(script, { eval: true });

/** Answers that it is ready and does `then` when it is told to help; `take()` takes a task from the board as a real worker would. */
const listening = (then: string): string => `
  const { parentPort } = require("node:worker_threads");
  let words;
  function take() {
    const word = Atomics.load(words, 0);
    Atomics.store(words, 5, (word & 0xffff) + 1);
    return Atomics.compareExchange(words, 0, word, word + 1) === word;
  }
  parentPort.on("message", (message) => {
    if (message.kind === "start") parentPort.postMessage({ kind: "ready" });
    if (message.kind === "keep") words = message.assignment.board;
    if (message.kind === "help") { ${then} }
  });
`;

/** Workers that fail, each in a way of its own. */
export const faulty: Record<string, () => Worker | undefined> = {
  "throws at load": () => workerOf("throw new Error('broken')"),
  "cannot be made": () => {
    throw new Error("blocked");
  },
  "is not there": () => undefined,
  "script is not found": () => new Worker(new URL("./no-such-script.mjs", import.meta.url)),
  "cannot link the core": () => workerOf(`require("node:worker_threads").parentPort.postMessage({ kind: "failed", reason: "no memory" })`),
  "never answers": () => workerOf(`require("node:worker_threads").parentPort.on("message", () => {})`),
  "never takes a task": () => workerOf(listening("")),
  "ends when called": () => workerOf(listening("process.exit(3)")),
  "throws when called": () => workerOf(listening("throw new Error('broken')")),
  "ends with a task": () => workerOf(listening("take(); process.exit(3)")),
  "sleeps over a task": () => workerOf(listening("take(); Atomics.wait(new Int32Array(new SharedArrayBuffer(4)), 0, 0)")),
  "loops over a task": () => workerOf(listening("take(); for (;;);")),
};
