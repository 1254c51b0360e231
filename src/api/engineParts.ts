import type { Turns } from "../runtime/turns.js";
import type { ViewMemory } from "../runtime/viewMemory.js";
import type { Crew } from "../runtime/workers/crew.js";
import type { Core } from "./loading.js";

/** What an engine shares with its filters. */
export interface EngineParts {
  core: Core;
  /** In which order unfinished jobs get their slices. */
  turns: Turns;
  views: ViewMemory;
  /** Other threads, where the engine has any. */
  crew: Crew | undefined;
}
