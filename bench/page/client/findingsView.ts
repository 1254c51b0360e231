import type { Crossover } from "../../../src/measure/index.js";
import { dateInWords, threadsInWords } from "../../../src/report/figures.js";
import { answerSentence, regretSentence } from "../../../src/report/sentences.js";
import { drawChart } from "./chart.js";
import { differenceInWords } from "./difference.js";
import { element, say, show } from "./element.js";
import { fillTable } from "./resultsTable.js";
import { described } from "./wanted.js";

/** What is on show. */
export interface Shown {
  crossover: Crossover;
  /** Measured up to its end or to where it was stopped; else still growing. */
  complete: boolean;
}

/** The results: while they grow the chart, the table and what it is about; at the end what they mean. */
export class FindingsView {
  #shown: Shown | undefined;
  #earlier: Crossover | undefined;
  #drawnWidth = 0;
  #rowsInTable = 0;

  constructor() {
    const resized = new ResizeObserver(() => {
      if (this.#shown !== undefined && element("chart").clientWidth !== this.#drawnWidth) this.#draw(this.#shown.crossover);
    });
    resized.observe(element("chart"));
  }

  show(shown: Shown): void {
    this.#shown = shown;
    const { crossover, complete } = shown;
    show(element("findings"));
    say(complete ? "What was found" : "What is found so far", element("findings-title"));
    say(complete ? answerSentence(crossover) : undefined, element("verdict"));
    const { layout, separable, threads, build, host, date } = crossover;
    say(`${described(layout, separable)}. On ${threadsInWords(threads)}, ${build} build, ${host}, ${dateInWords(date)}.`, element("facts"));
    const notes = complete ? [regretSentence(crossover), ...crossover.notes] : [];
    element("notes").replaceChildren(...notes.map((note) => Object.assign(document.createElement("li"), { textContent: note })));
    show(element("notes"), notes.length > 0);
    show(element("saving"), complete);
    // While it grows, only where there is a new row: whoever reads it should not lose the place.
    if (complete || crossover.rows.length !== this.#rowsInTable) fillTable(element("table", "table"), crossover);
    this.#rowsInTable = crossover.rows.length;
    this.#draw(crossover);
    this.#compare();
  }

  /** Draws other results behind these and says what differs; without any, stops that. */
  compareWith(earlier: Crossover | undefined): void {
    this.#earlier = earlier;
    this.#compare();
    if (this.#shown !== undefined) this.#draw(this.#shown.crossover);
  }

  #compare(): void {
    const comparable = this.#shown?.complete === true && this.#earlier !== undefined;
    say(comparable ? differenceInWords(this.#shown!.crossover, this.#earlier!) : undefined, element("difference"));
  }

  #draw(crossover: Crossover): void {
    this.#drawnWidth = element("chart").clientWidth;
    drawChart(element("chart"), crossover, this.#earlier);
  }

  /** What is compared with. */
  get earlier(): Crossover | undefined {
    return this.#earlier;
  }

  /** What is told to who does not see the chart. */
  get verdict(): string {
    return [element("verdict").textContent, element("difference").textContent].filter((words) => words !== "").join(" ");
  }
}
