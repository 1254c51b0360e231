import { element, say, show } from "./element.js";
import { threadsInWords } from "../../../src/report/figures.js";
import { colours, described, durations, filters, offer, pictures, threadChoices, values, type Wanted } from "./wanted.js";

/** From here on there is room to show all choices at once; narrower, the button comes first. */
const roomForAll = "(min-width: 48rem)";

/** The lists in which the person chooses what is measured. */
export class WantedForm {
  readonly #read: () => Wanted;

  /** @param available threads that can share memory here */
  constructor(available: number) {
    const size = offer(element("picture", "select"), pictures);
    const channels = offer(element("colours", "select"), colours);
    const sample = offer(element("values", "select"), values);
    const separable = offer(element("filter", "select"), filters);
    const threads = offer(element("threads", "select"), threadChoices(available));
    const milliseconds = offer(element("duration", "select"), durations);
    show(element("threads-choice"), available > 1);
    this.#read = () => ({
      layout: { ...size(), channels: channels(), sample: sample() },
      separable: separable(),
      threads: threads(),
      milliseconds: milliseconds(),
    });
    element("choices", "details").open = matchMedia(roomForAll).matches;
    element("wanted", "form").addEventListener("change", () => this.#sum());
    this.#sum();
  }

  /** All choices in one line, so that they can be folded away. */
  #sum(): void {
    const { layout, separable, threads, milliseconds } = this.wanted;
    const duration = durations.find(({ value }) => value === milliseconds)!.inSentence;
    say(`${described(layout, separable)}; ${threadsInWords(threads)}, ${duration}.`, element("wanted-words"));
  }

  get wanted(): Wanted {
    return this.#read();
  }

  /** What is asked for stays on show while it is measured, and does not change. */
  rest(): void {
    element("wanted-fields", "fieldset").disabled = true;
  }

  wake(): void {
    element("wanted-fields", "fieldset").disabled = false;
    say("Measure again", element("measure"));
  }

  onSubmit(start: (wanted: Wanted) => void): void {
    element("wanted", "form").addEventListener("submit", (event) => {
      event.preventDefault();
      start(this.wanted);
    });
  }
}
