import type { Engine } from "../src/index.js";
import { samplesOf, type Case } from "./cases.js";
import { inTurns, warm, type Contender } from "./contender.js";
import { EngineContender } from "./engineContender.js";
import type { Figure } from "./figures.js";
import { spreadOf, type Spread } from "./spread.js";
import { verify, yardstickTolerance } from "./verify.js";
import { formsOf, startPlainC } from "./yardsticks/plainC.js";
import type { YardstickProcess } from "./yardsticks/process.js";
import { scipyForms, startScipy } from "./yardsticks/scipy.js";

/** One side of a figure, measured. */
export interface Side {
  name: string;
  milliseconds: Spread;
  /** From the definition, in units of the result. */
  largestDifference: number;
}

export interface Outcome {
  /** The subject's time over the other's (of one sample, where the figure says so), from all turns, and round by round. */
  ratio: number;
  rounds: number[];
  subject: Side;
  /** All that the subject was held against; the fastest, first, counts. */
  against: Side[];
}

/** Both sides of a figure, ready to run in turns. */
export class Match {
  readonly #figure: Figure;
  readonly #subject: EngineContender;
  readonly #rivals: Contender[];
  readonly #differences: (() => Promise<number> | number)[];
  readonly #process: YardstickProcess | undefined;
  /** Times by round, then by contender, the subject first. */
  readonly #rounds: number[][][] = [];

  constructor(engine: Engine, figure: Figure, folder: string) {
    this.#figure = figure;
    this.#subject = new EngineContender(engine, figure.subject);
    const { against } = figure;
    if (against.kind === "case") {
      const rival = new EngineContender(engine, against.case);
      this.#rivals = [rival];
      this.#differences = [() => rival.verify()];
      return;
    }
    const planes = this.#subject.planes.map(({ data }) => data as Float32Array);
    const { kernel, layout } = figure.subject;
    const process =
      against.kind === "SciPy" ? startScipy(folder, figure.subject, this.#subject.planes) : startPlainC(folder, against.loops, kernel, planes, layout.width);
    const forms = against.kind === "SciPy" ? scipyForms : formsOf[against.loops];
    const part = against.kind === "plain C" && !against.padding ? "loopMilliseconds" : "milliseconds";
    this.#process = process;
    this.#rivals = forms.map((form) => process.contender(`${against.kind} ${form}${part === "milliseconds" ? "" : ", loops alone"}`, form, part));
    this.#differences = this.#rivals.map((rival) => () => differenceOf(figure.subject, this.#subject, rival, process));
  }

  get #contenders(): Contender[] {
    return [this.#subject, ...this.#rivals];
  }

  async round(turns: number): Promise<void> {
    const planes = this.#subject.planes.length;
    await warm(this.#contenders, planes);
    this.#rounds.push(await inTurns(this.#contenders, planes, turns));
  }

  /** Verifies every side's result, ends what was started and sums up. */
  async outcome(): Promise<Outcome> {
    const side = async (index: number): Promise<Side> => ({
      name: this.#contenders[index]!.name,
      milliseconds: spreadOf(this.#rounds.flatMap((times) => times[index]!)),
      largestDifference: index === 0 ? this.#subject.verify() : await this.#differences[index - 1]!(),
    });
    const subject = await side(0);
    const against: Side[] = [];
    for (const index of this.#rivals.keys()) against.push(await side(index + 1));
    const best = against.reduce((fastest, one, index) => (one.milliseconds.median < against[fastest]!.milliseconds.median ? index : fastest), 0);
    const ratio = (ours: number, theirs: number): number => Number(((ours / theirs) * this.#weight).toFixed(3));
    await this.#process?.end();
    return {
      ratio: ratio(subject.milliseconds.median, against[best]!.milliseconds.median),
      rounds: this.#rounds.map((times) => ratio(spreadOf(times[0]!).median, spreadOf(times[best + 1]!).median)),
      subject,
      against: against.toSorted((a, b) => a.milliseconds.median - b.milliseconds.median),
    };
  }

  /** Turns a ratio of times into one of times a sample. */
  get #weight(): number {
    const { against, perSample, subject } = this.#figure;
    return perSample === true && against.kind === "case" ? samplesOf(against.case) / samplesOf(subject) : 1;
  }
}

async function differenceOf(one: Case, subject: EngineContender, rival: Contender, process: YardstickProcess): Promise<number> {
  await rival.run(0);
  return verify(one, subject.planes[0]!, await process.result(), yardstickTolerance);
}
