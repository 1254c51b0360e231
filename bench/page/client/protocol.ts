import type { HardwareProfile } from "../../../src/index.js";
import type { Crossover } from "../../../src/measure/index.js";
import type { Wanted } from "./wanted.js";

/** What the page tells the worker that measures. */
export type ToMeasurer =
  | {
      kind: "measure";
      wanted: Wanted;
      /** A profile from an earlier visit; measured anew where it does not fit the engine. */
      profile: HardwareProfile | undefined;
      /** Address of the script of the engine's further threads. */
      threadScript: string;
    }
  | { kind: "stop" };

/** The steps of a measurement in their order. */
export type Step = "profile" | "crossover";

/** What the worker tells the page. */
export type FromMeasurer =
  | { kind: "begun"; profileFirst: boolean }
  | { kind: "profile"; profile: HardwareProfile }
  | { kind: "progress"; step: Step; done: number; soFar?: Crossover }
  | { kind: "finished"; crossover: Crossover }
  | { kind: "stopped" }
  | { kind: "failed"; message: string };
