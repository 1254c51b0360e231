import type { Crossover } from "../../../src/measure/index.js";
import { dateInWords } from "../../../src/report/figures.js";
import { element, say, show } from "./element.js";
import { readResults, UnfitFile } from "./resultsFile.js";
import { described } from "./wanted.js";

const choose = "Choose a file";
const chooseAnother = "Choose another file";

function carriesFiles({ dataTransfer }: DragEvent): boolean {
  return dataTransfer?.types.includes("Files") ?? false;
}

/** Takes earlier results, chosen or dropped anywhere on the page. A file that does not fit changes nothing. */
export class EarlierView {
  readonly #changed: (earlier: Crossover | undefined) => void;
  readonly #tell: (words: string) => void;

  /** @param changed receives what to compare with from now on */
  constructor(changed: (earlier: Crossover | undefined) => void, tell: (words: string) => void) {
    this.#changed = changed;
    this.#tell = tell;
  }

  listen(): void {
    const input = element("earlier-file", "input");
    element("choose-earlier").addEventListener("click", () => input.click());
    input.addEventListener("change", () => {
      void this.#take([...(input.files ?? [])]);
      // The same file may be chosen again after it was mended.
      input.value = "";
    });
    element("forget-earlier").addEventListener("click", () => this.#forget());
    this.#listenForDrops();
  }

  /** Without this a browser would leave the page for the file, and the results with it. */
  #listenForDrops(): void {
    const mark = (receiving: boolean): void => void document.body.classList.toggle("receiving", receiving);
    addEventListener("dragover", (event) => {
      if (!carriesFiles(event)) return;
      event.preventDefault();
      mark(true);
    });
    addEventListener("dragleave", ({ relatedTarget }) => {
      if (relatedTarget === null) mark(false);
    });
    addEventListener("drop", (event) => {
      mark(false);
      if (!carriesFiles(event)) return;
      event.preventDefault();
      void this.#take([...event.dataTransfer!.files]);
    });
  }

  async #take(files: readonly File[]): Promise<void> {
    const [file, ...others] = files;
    if (file === undefined) return;
    const trouble = element("earlier-trouble");
    say(undefined, trouble);
    try {
      if (others.length > 0) throw new UnfitFile(`came with ${others.length} more; give one file at a time`);
      this.#use(await readResults(file), file.name);
    } catch (error) {
      const reason = error instanceof UnfitFile ? error.message : `cannot be used (${String(error)})`;
      say(`“${file.name}” ${reason}. Nothing on this page has changed.`, trouble);
    }
  }

  #use(earlier: Crossover, name: string): void {
    const { layout, separable, date, host } = earlier;
    say(`Compared with “${name}”: ${described(layout, separable)}; ${host}, ${dateInWords(date)}.`, element("comparing"));
    show(element("earlier-words"), false);
    say(chooseAnother, element("choose-earlier"));
    show(element("forget-earlier"));
    this.#changed(earlier);
    this.#tell(`“${name}” is taken to compare with. ${element("difference").textContent}`);
  }

  #forget(): void {
    say(undefined, element("comparing"));
    show(element("earlier-words"));
    say(choose, element("choose-earlier"));
    element("choose-earlier").focus();
    show(element("forget-earlier"), false);
    this.#changed(undefined);
    this.#tell("No longer compared.");
  }
}
