import type { Turns } from "../runtime/turns.js";
import type { ViewMemory } from "../runtime/viewMemory.js";
import type { Core } from "./loading.js";

/** What an engine shares with its filters. */
export interface EngineParts {
  core: Core;
  /** In which order unfinished jobs get their slices. */
  turns: Turns;
  views: ViewMemory;
}
