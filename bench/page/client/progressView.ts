import { element, say, show } from "./element.js";
import type { Step } from "./protocol.js";

const stepWords: Record<Step, string> = { profile: "Step 1 of 2: what this device’s operations cost", crossover: "Step 2 of 2: filters of growing size" };
const onlyStepWords = "Filters of growing size";

/** Share of the work after which time left is foretold from the pace so far, before from the time that was asked for. */
const paceKnownFrom = 0.15;

const ending = "a moment left";

function timeLeftInWords(milliseconds: number): string {
  const seconds = Math.ceil(milliseconds / 1000);
  if (seconds <= 1) return ending;
  return seconds < 100 ? `about ${seconds} s left` : `about ${Math.ceil(seconds / 60)} min left`;
}

/** The progress of both steps as one bar, with the time that is left, and in the page's title for who looks elsewhere. */
export class ProgressView {
  readonly #budget: Record<Step, number>;
  readonly #tell: (words: string) => void;
  readonly #plainTitle = document.title;
  readonly #start = performance.now();
  #profileFirst = true;
  #halfTold = false;
  #done = 0;

  /**
   * @param budget milliseconds of each step
   * @param tell says something to who listens: few words, seldom
   */
  constructor(budget: Record<Step, number>, tell: (words: string) => void) {
    this.#budget = budget;
    this.#tell = tell;
    say("Getting ready", element("step"));
    say("", element("time-left"));
    element("progress", "progress").removeAttribute("value");
    show(element("underway"));
  }

  begin(profileFirst: boolean): void {
    this.#profileFirst = profileFirst;
    this.#tell(`Measuring: ${timeLeftInWords(this.#total).replace(" left", "")}.`);
    this.report(profileFirst ? "profile" : "crossover", 0);
  }

  get #total(): number {
    return this.#budget.crossover + (this.#profileFirst ? this.#budget.profile : 0);
  }

  report(step: Step, done: number): void {
    const { profile, crossover } = this.#budget;
    const before = step === "crossover" && this.#profileFirst ? profile : 0;
    // Never back, also where a step begins anew.
    this.#done = Math.max(this.#done, (before + done * (step === "profile" ? profile : crossover)) / this.#total);
    const bar = element("progress", "progress");
    bar.value = this.#done;
    const percent = Math.floor(100 * this.#done);
    say(this.#profileFirst ? stepWords[step] : onlyStepWords, element("step"));
    say(`${percent} %, ${timeLeftInWords(this.#left())}`, element("time-left"));
    // Where the page is in sight the bar says it, and a browser that draws its own title again takes time from what is measured.
    if (document.hidden) document.title = `${percent} % – ${this.#plainTitle}`;
    if (!this.#halfTold && this.#done >= 0.5) {
      this.#halfTold = true;
      this.#tell(`Half done, ${timeLeftInWords(this.#left())}.`);
    }
  }

  #left(): number {
    const pace = this.#done < paceKnownFrom ? this.#total : (performance.now() - this.#start) / this.#done;
    return pace * (1 - this.#done);
  }

  end(): void {
    show(element("underway"), false);
    document.title = this.#plainTitle;
  }
}
