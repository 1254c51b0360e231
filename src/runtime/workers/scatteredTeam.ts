import { setUp } from "../execute.js";
import { Execution, samplesChanged } from "../execution.js";
import type { EngineMemory } from "../memory.js";
import type { Program, RowSpan } from "../program.js";
import type { Routines } from "../routines.js";
import type { Plane } from "../rowTraffic.js";
import type { Samples } from "../../types.js";
import type { Crew, Foreman, Hand } from "./crew.js";
import type { TeamPlan } from "./furniture.js";
import { patienceFor, napMilliseconds } from "./patience.js";
import type { SentBand, ToWorker } from "./protocol.js";

/** Samples are copied about this many at a time. */
const samplesAtATime = 500_000;

/** A band as it travels: its rows of the source, and where its results go. */
interface Band {
  programs: Program[];
  rows: RowSpan;
  results: RowSpan;
  /** Arrays that came back and go out again. */
  arrays: { source: Samples; result: Samples } | undefined;
}

/** A band whose rows are being copied to go out: those before `row` are. */
interface Sending {
  hand: Hand;
  band: number;
  row: number;
  source: Samples;
  result: Samples;
}

const withResultsFromRow = (program: Program, row: number): Program => ({ ...program, outlet: { ...program.outlet, firstRow: program.outlet.firstRow - row } });

function bandOf(programs: Program[]): Band {
  const read = programs.flatMap(({ intake }) => Array.from(intake.rowMap).filter((row) => row >= 0));
  const first = read.reduce((least, row) => Math.min(least, row), read[0] ?? 0);
  const last = read.reduce((most, row) => Math.max(most, row), -1);
  const { outlet, steps } = programs[0]!;
  const count = steps.reduce((sum, { write }) => sum + (write?.count ?? 0), 0);
  return { programs, rows: { first, count: Math.max(0, last + 1 - first) }, results: { first: outlet.firstRow, count }, arrays: undefined };
}

/**
 * A filter whose bands are sent to threads that have memories of their own, where none can be shared: source rows go out and results come
 * back by transfer. What is not sent or does not come back is done here. Used like a Team, without waiting.
 */
export class ScatteredTeam implements Foreman {
  readonly #plan: TeamPlan;
  readonly #crew: Crew;
  readonly #memory: EngineMemory;
  readonly #routines: Routines;
  readonly #id: number;
  readonly #bands: Band[];
  readonly #executions: Execution[];
  readonly #address: number;
  readonly #byteLength: number;
  /** The band that the calling thread's memory is set up for. */
  #ready = -1;
  #source: Plane | undefined;
  #target: Plane | undefined;
  #lengths = { source: 0, target: 0 };
  #job = 0;
  /** Bands that nobody has yet, the calling thread's own last. */
  #waiting: number[] = [];
  #away = new Map<Hand, number>();
  #sending: Sending | undefined;
  #current = -1;
  #finished = 0;
  #heardAt = 0;
  #alone = true;
  #wake: (() => void) | undefined;
  done = true;
  idle = false;

  /** @throws ConvolutionError `memory-limit`, `memory-exhausted` */
  constructor(plan: TeamPlan, crew: Crew, memory: EngineMemory, routines: Routines) {
    this.#plan = plan;
    this.#crew = crew;
    this.#memory = memory;
    this.#routines = routines;
    this.#id = crew.nextId();
    this.#bands = plan.blocks.map(bandOf);
    this.#byteLength = Math.max(...plan.blocks.flat().map(({ byteLength }) => byteLength));
    this.#address = memory.take(this.#byteLength);
    const place = { address: this.#address, byteLength: this.#byteLength };
    this.#executions = plan.blocks.map((programs) => new Execution({ programs, ...place }, memory, routines));
    crew.enlist(this.#id, this);
  }

  get assignments(): ToWorker[] {
    const { source, result } = this.#plan;
    return this.#bands.slice(0, -1).map(({ programs, rows, results }, band) => ({
      kind: "keepBand",
      id: this.#id,
      band,
      programs: programs.map((program) => withResultsFromRow(program, results.first)),
      firstRow: rows.first,
      stride: source.stride,
      resultStride: result.stride,
    }));
  }

  get progress(): number {
    if (this.done) return 1;
    const own = this.#current >= 0 ? this.#executions[this.#current]!.progress : 0;
    return Math.min(0.999, (this.#finished + own) / this.#bands.length);
  }

  /** All of a run, here and now: on the calling thread, which cannot wait for messages. */
  run(source: Plane, target: Plane): void {
    this.#begin(source, target, true);
    while (!this.done) this.advance();
  }

  /** Starts with an image. */
  begin(source: Plane, target: Plane): void {
    this.#begin(source, target, false);
  }

  #begin(source: Plane, target: Plane, alone: boolean): void {
    this.#source = source;
    this.#target = target;
    this.#lengths = { source: source.data.length, target: target.data.length };
    this.#job++;
    this.#alone = alone;
    this.#waiting = this.#bands.map((_, band) => band);
    this.#current = -1;
    this.#finished = 0;
    this.#heardAt = performance.now();
    this.done = this.idle = false;
  }

  advance(): void {
    this.idle = false;
    if (this.#sending) return this.#send(this.#sending);
    if (this.#current >= 0) return this.#step();
    const hand = this.#freeHand();
    if (hand && this.#waiting.length > 1) this.#pack(hand, this.#waiting.shift()!);
    else if (this.#waiting.length > 0) this.#start(this.#waiting.pop()!);
    else if (this.#finished === this.#bands.length) this.#rest();
    else this.#watch();
  }

  /** The last band stays here, and so do all where no worker is free. */
  #freeHand(): Hand | undefined {
    return this.#alone ? undefined : this.#crew.ready.find((hand) => !this.#crew.isAway(hand));
  }

  #pack(hand: Hand, band: number): void {
    const { rows, results, arrays } = this.#bands[band]!;
    const { source, result } = this.#plan;
    const like = (samples: Samples, count: number): Samples => new (samples.constructor as new (length: number) => Samples)(count);
    const made = arrays ?? {
      source: like(this.#source!.data, rows.count * source.stride),
      result: like(this.#target!.data, results.count * result.stride),
    };
    this.#bands[band]!.arrays = undefined;
    this.#sending = { hand, band, row: 0, ...made };
  }

  #checkArrays(): void {
    if (this.#source!.data.length < this.#lengths.source) throw samplesChanged("image");
    if (this.#target!.data.length < this.#lengths.target) throw samplesChanged("target");
  }

  /** Copies some rows; posts when all are there. */
  #send(sending: Sending): void {
    this.#checkArrays();
    const { rows } = this.#bands[sending.band]!;
    const { stride } = this.#plan.source;
    const { data, stride: sourceStride } = this.#source!;
    const end = Math.min(rows.count, sending.row + Math.max(1, Math.floor(samplesAtATime / stride)));
    for (; sending.row < end; sending.row++) {
      const start = (rows.first + sending.row) * sourceStride;
      sending.source.set(data.subarray(start, start + stride), sending.row * stride);
    }
    if (end < rows.count) return;
    const { hand, band, source, result } = sending;
    this.#sending = undefined;
    if (hand.gone) return void this.#waiting.unshift(band);
    this.#away.set(hand, band);
    this.#crew.send(hand, { kind: "band", id: this.#id, band, job: this.#job, source, result });
  }

  #start(band: number): void {
    const { programs } = this.#bands[band]!;
    if (programs.length === 1 && this.#ready !== band) setUp(programs[0]!, this.#address, this.#memory, this.#routines);
    this.#ready = band;
    this.#current = band;
    this.#executions[band]!.begin(this.#source!, this.#target!);
  }

  #step(): void {
    const execution = this.#executions[this.#current]!;
    execution.advance();
    if (!execution.done) return;
    this.#current = -1;
    this.#finished++;
  }

  /** Results that come back go to the target, if they are of this run. */
  returned({ band, job, source, result }: SentBand, hand: Hand): void {
    this.#bands[band]!.arrays = { source, result };
    if (job !== this.#job || this.done || this.#away.get(hand) !== band) return;
    this.#away.delete(hand);
    this.#heardAt = performance.now();
    const { first, count } = this.#bands[band]!.results;
    const { stride } = this.#plan.result;
    const { data, stride: targetStride } = this.#target!;
    if (data.length >= this.#lengths.target) {
      if (stride === targetStride) data.set(result, first * stride);
      else for (let row = 0; row < count; row++) data.set(result.subarray(row * stride, (row + 1) * stride), (first + row) * targetStride);
    }
    this.#finished++;
    this.#wake?.();
  }

  lost(hand: Hand): void {
    const band = this.#away.get(hand);
    if (band === undefined) return;
    this.#away.delete(hand);
    this.#waiting.push(band);
    this.#wake?.();
  }

  #watch(): void {
    this.idle = true;
    if (performance.now() - this.#heardAt < patienceFor(this.#plan.milliseconds)) return;
    for (const hand of this.#away.keys()) this.#crew.dismiss(hand);
  }

  #rest(): void {
    this.#checkArrays();
    this.abandon();
  }

  abandon(): void {
    if (this.#current >= 0) this.#executions[this.#current]!.abandon();
    this.#current = -1;
    this.#sending = undefined;
    this.#away.clear();
    this.#waiting = [];
    this.done = true;
    this.idle = false;
    this.#source = this.#target = undefined;
  }

  /** Settles when a band has come back or a worker is lost, and no later than after a nap. */
  moved(): Promise<void> {
    return new Promise((resolve) => {
      const timer = setTimeout(resolve, napMilliseconds);
      this.#wake = (): void => {
        clearTimeout(timer);
        resolve();
      };
    });
  }

  dispose(): void {
    this.abandon();
    this.#memory.release(this.#address, this.#byteLength);
    this.#crew.release(this.#id);
  }
}
