import type { ConvolutionError, Explanation, ResultRaster } from "../../index.js";
import { asData, exitCodeOf, exitCodes } from "../failure.js";
import { type Report, asSeconds, printable } from "../report.js";
import type { Failure, Found } from "./findImages.js";
import type { Survey } from "./survey.js";

/** What became of one image. */
interface Outcome {
  result: ResultRaster;
  explanation: Explanation;
  /** From the first byte read to the last one written. */
  milliseconds: number;
  notes: readonly string[];
}

/** Failures that people are shown; programs get all of them. */
const mostShown = 20;

/** Keeps account of a batch and tells of it. */
export class BatchAccount {
  readonly #folders: { input: string; output: string };
  readonly #start = performance.now();
  readonly #images: object[] = [];
  readonly #failures: Failure[] = [];
  /** How many images each sentence is about; 0 where it is about none in particular. */
  readonly #notes = new Map<string, number>();
  #counts = { found: 0, filtered: 0, done: 0, kept: 0 };
  #interruption: ConvolutionError | undefined;

  constructor(input: string, output: string) {
    this.#folders = { input, output };
  }

  begin({ images, failures, linkedFolders }: Found, { done, kept, failures: refused }: Survey): void {
    this.#counts = { found: images.length + failures.length, filtered: 0, done: done.length, kept: kept.length };
    for (const name of done) this.#images.push({ name, status: "done before" });
    for (const name of kept) this.#images.push({ name, status: "there before" });
    for (const failure of [...failures, ...refused]) this.fail(failure);
    if (linkedFolders.length > 0) this.note(`Links to folders are not followed: ${linkedFolders.join(", ")}.`);
    if (kept.length > 0)
      this.note(
        `${imageCount(kept.length)} left alone: results were there, newer than the images, and it is not known how they were made. --force makes them anew.`,
      );
  }

  note(text: string): void {
    this.#notes.set(text, 0);
  }

  done(name: string, { result, explanation, milliseconds, notes }: Outcome): void {
    this.#counts.filtered++;
    const { width, height, channels } = result;
    this.#images.push({ name, status: "filtered", width, height, channels, method: explanation.method, milliseconds, notes });
    for (const text of notes) this.#notes.set(text, (this.#notes.get(text) ?? 0) + 1);
  }

  fail(failure: Failure): void {
    this.#failures.push(failure);
    this.#images.push({ name: failure.name, status: "failed", error: asData(failure.error) });
  }

  /** Somebody wants the batch to end. */
  interrupt(reason: ConvolutionError): void {
    this.#interruption = reason;
  }

  report(): Report {
    const { input, output } = this.#folders;
    const notes = [...this.#notes].map(([text, count]) => (count === 0 ? text : `${imageCount(count)}: ${text}`));
    const failed = this.#failures.length;
    const left = this.#left();
    const end = this.#interruption === undefined ? {} : { interrupted: this.#interruption.received };
    const milliseconds = performance.now() - this.#start;
    return {
      text: `${printable(this.#sentence(milliseconds))}\n`,
      notes: [...notes, ...this.#failureLines()].map(printable),
      data: { input, output, ...this.#counts, failed, left, ...end, milliseconds, images: this.#images, notes },
      exitCode: this.#interruption !== undefined ? exitCodeOf(this.#interruption) : failed > 0 ? exitCodes.failed : exitCodes.done,
    };
  }

  #left(): number {
    const { found, filtered, done, kept } = this.#counts;
    return found - filtered - done - kept - this.#failures.length;
  }

  #sentence(milliseconds: number): string {
    const { input, output } = this.#folders;
    const { found, filtered, done, kept } = this.#counts;
    if (found === 0) return `${input} holds no PNG files: nothing to do.`;
    const parts = [`${filtered} of ${imageCount(found)} filtered`];
    if (done > 0) parts.push(`${done} done before`);
    if (kept > 0) parts.push(`${kept} there before`);
    if (this.#failures.length > 0) parts.push(`${this.#failures.length} failed`);
    const left = this.#left();
    if (left > 0) parts.push(`${left} left`);
    return `${output}: ${parts.join(", ")}; ${asSeconds(milliseconds)}.${left > 0 ? this.#whyLeft() : ""}`;
  }

  #whyLeft(): string {
    const again = "The same command goes on where it stopped.";
    return this.#interruption !== undefined ? ` Interrupted. ${again}` : ` Stopped, as nothing can be written there any more. ${again}`;
  }

  #failureLines(): string[] {
    const lines = this.#failures.slice(0, mostShown).map(({ name, error: { message, code } }) => {
      return `failed: ${message.includes(name) ? "" : `${name}: `}${message} [${code}]`;
    });
    const more = this.#failures.length - lines.length;
    return more > 0 ? [...lines, `failed: ${more} more; --json lists all of them.`] : lines;
  }
}

function imageCount(count: number): string {
  return `${count} ${count === 1 ? "image" : "images"}`;
}
