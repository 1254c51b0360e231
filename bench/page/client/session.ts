import type { HardwareProfile } from "../../../src/index.js";
import type { Crossover } from "../../../src/measure/index.js";
import { element } from "./element.js";
import { HiddenTime } from "./hiddenTime.js";
import { startMeasuring, type Measuring } from "./measuring.js";
import { ProgressView } from "./progressView.js";
import type { FromMeasurer } from "./protocol.js";
import { Sparingly } from "./sparingly.js";
import type { Wanted } from "./wanted.js";

/** What `measureProfile` takes unless told otherwise. */
const profileMilliseconds = 2000;

/** How a measurement ended: what was found until then, and why it ended early. */
export interface Ending {
  profile: HardwareProfile | undefined;
  /** Absent where it ended before the first size. */
  crossover: Crossover | undefined;
  stopped: boolean;
  /** What went wrong. */
  trouble?: string;
}

export interface SessionEvents {
  /** A new profile was measured. */
  profile(profile: HardwareProfile): void;
  growing(soFar: Crossover): void;
  ended(ending: Ending): void;
  /** For who listens. */
  told(words: string): void;
}

/** One measurement, from the button to its end. */
class Session {
  readonly #events: SessionEvents;
  readonly #hidden = new HiddenTime();
  readonly #drawing = new Sparingly();
  readonly #progress: ProgressView;
  readonly #measuring: Measuring;
  readonly #stop = (): void => this.#measuring.stop();
  #profile: HardwareProfile | undefined;
  #soFar: Crossover | undefined;
  #done = 0;

  constructor(wanted: Wanted, profile: HardwareProfile | undefined, events: SessionEvents) {
    this.#events = events;
    this.#profile = profile;
    this.#progress = new ProgressView({ profile: profileMilliseconds, crossover: wanted.milliseconds }, events.told);
    this.#measuring = startMeasuring(wanted, profile, (message) => this.#heard(message));
  }

  begin(): void {
    element("stop").addEventListener("click", this.#stop);
  }

  #heard(message: FromMeasurer): void {
    if (message.kind === "begun") this.#progress.begin(message.profileFirst);
    else if (message.kind === "profile") this.#events.profile((this.#profile = message.profile));
    else if (message.kind === "progress") this.#grow(message);
    else if (message.kind === "finished") this.#end(message.crossover, false);
    else if (message.kind === "stopped") this.#end(this.#partial("Stopped"), true);
    else this.#end(this.#partial("Ended by an error"), false, message.message);
  }

  #grow({ step, done, soFar }: Extract<FromMeasurer, { kind: "progress" }>): void {
    this.#progress.report(step, done);
    if (step === "crossover") this.#done = done;
    if (soFar === undefined || soFar.rows.length === 0) return;
    this.#soFar = soFar;
    this.#drawing.draw(() => this.#events.growing(soFar));
  }

  /** What was measured before an early end is of use, and says that it is not all. */
  #partial(how: string): Crossover | undefined {
    const soFar = this.#soFar;
    return (
      soFar && {
        ...soFar,
        notes: [
          ...soFar.notes,
          `${how} at ${Math.round(100 * this.#done)} % of this step: kernel sizes are missing, and those that are there were timed less often.`,
        ],
      }
    );
  }

  #end(crossover: Crossover | undefined, stopped: boolean, trouble?: string): void {
    element("stop").removeEventListener("click", this.#stop);
    const hiddenNote = this.#hidden.end();
    this.#progress.end();
    const noted = crossover && hiddenNote !== undefined ? { ...crossover, notes: [...crossover.notes, hiddenNote] } : crossover;
    this.#events.ended({ profile: this.#profile, crossover: noted, stopped, ...(trouble === undefined ? {} : { trouble }) });
  }
}

/** Starts a measurement; what becomes of it is told by events, the last of which is `ended`. */
export function startSession(wanted: Wanted, profile: HardwareProfile | undefined, events: SessionEvents): void {
  new Session(wanted, profile, events).begin();
}
