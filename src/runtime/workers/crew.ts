import type { EngineWorker } from "../../types.js";
import type { EngineMemory } from "../memory.js";
import type { Routines } from "../routines.js";
import type { TeamPlan } from "./furniture.js";
import { keepsProcess, listenTo, nodeThreads } from "./ports.js";
import type { FromWorker, SentBand, ToWorker } from "./protocol.js";
import { ScatteredTeam } from "./scatteredTeam.js";
import { Team } from "./team.js";

/** Workers that have not answered by then do not hold an engine up: they may still come later. */
const startMilliseconds = 4000;

/** One worker. */
export class Hand {
  readonly worker: EngineWorker;
  ready = false;
  gone = false;
  bandsAway = 0;
  /** Settles when the worker is known to have ended; never where the host does not tell. */
  readonly ended: Promise<void>;
  readonly confirm: () => void;

  constructor(worker: EngineWorker) {
    this.worker = worker;
    let confirm = (): void => {};
    this.ended = new Promise((resolve) => (confirm = resolve));
    this.confirm = confirm;
  }

  post(message: ToWorker, transfer: Transferable[] = []): void {
    this.worker.postMessage(message, transfer);
  }

  end(): void {
    this.gone = true;
    const ending = this.worker.terminate();
    if (ending instanceof Promise) void ending.then(this.confirm, this.confirm);
  }
}

/** What workers link: a core, and its memory where they share it. */
interface Linked {
  module: WebAssembly.Module;
  memory: EngineMemory;
  shared: boolean;
}

/** Who wants to know what workers say and when one is lost. */
export interface Foreman {
  /** What a worker must know before it can help. */
  readonly assignments: ToWorker[];
  lost(hand: Hand): void;
  returned?(band: SentBand, hand: Hand): void;
}

/** A worker of the host's own kind. Bundlers know the literal with `import.meta.url` and pack the script that it names. */
function hostWorker(): EngineWorker | undefined {
  const threads = nodeThreads();
  const here = import.meta.url;
  if (threads) return new threads.Worker(new URL("./worker.js", here));
  return typeof Worker === "function" ? new Worker(new URL("./worker.js", import.meta.url), { type: "module" }) : undefined;
}

/** What a caller's function gave may be anything. */
function isWorker(worker: EngineWorker | undefined): worker is EngineWorker {
  const { postMessage, terminate } = (worker ?? {}) as Partial<EngineWorker>;
  return typeof postMessage === "function" && typeof terminate === "function";
}

/**
 * The workers of one engine. All of them together are its threads, less the calling one. A worker that is lost is not replaced: the others
 * and the calling thread do its work.
 */
export class Crew {
  readonly shared: boolean;
  readonly #hands: Hand[] = [];
  readonly #foremen = new Map<number, Foreman>();
  #nextId = 0;

  private constructor(shared: boolean) {
    this.shared = shared;
  }

  /** Starts `count` workers, or as many as the host lets start. Does not wait long for any of them. */
  static async start(count: number, { module, memory, shared }: Linked, createWorker: (() => EngineWorker | undefined) | undefined): Promise<Crew> {
    const crew = new Crew(shared);
    const start: ToWorker = { kind: "start", module, ...(shared ? { memory: memory.memory } : {}) };
    const starts = Array.from({ length: count }, () => crew.#hire(start, createWorker ?? hostWorker));
    let timer: ReturnType<typeof setTimeout> | undefined;
    await Promise.race([Promise.all(starts), new Promise((resolve) => (timer = setTimeout(resolve, startMilliseconds)))]);
    clearTimeout(timer);
    for (const { worker } of crew.#hands) keepsProcess(worker, false);
    return crew;
  }

  /** Settles when the worker is ready, or will never be. */
  #hire(start: ToWorker, createWorker: () => EngineWorker | undefined): Promise<void> {
    return new Promise((settle) => {
      try {
        const worker = createWorker();
        if (!isWorker(worker)) return settle();
        const hand = new Hand(worker);
        this.#hands.push(hand);
        listenTo(worker, {
          heard: (message) => this.#heard(hand, message as FromWorker, settle),
          gone: () => {
            hand.confirm();
            this.dismiss(hand);
            settle();
          },
        });
        hand.post(start);
      } catch {
        settle();
      }
    });
  }

  #heard(hand: Hand, message: FromWorker, settle: () => void): void {
    if (hand.gone) return;
    if (message.kind === "band") {
      this.#setAway(hand, -1);
      return this.#foremen.get(message.id)?.returned?.(message, hand);
    }
    if (message.kind === "ready") {
      hand.ready = true;
      for (const { assignments } of this.#foremen.values()) for (const one of assignments) hand.post(one);
    } else this.dismiss(hand);
    settle();
  }

  /** Workers that can be given work now. */
  get ready(): Hand[] {
    return this.#hands.filter(({ ready }) => ready);
  }

  /** True where it has a band that it has not sent back. */
  isAway({ bandsAway }: Hand): boolean {
    return bandsAway > 0;
  }

  /** Sends a band away; the process stays until it is back. */
  send(hand: Hand, band: SentBand): void {
    this.#setAway(hand, 1);
    hand.post(band, [band.source.buffer, band.result.buffer] as Transferable[]);
  }

  #setAway(hand: Hand, change: number): void {
    hand.bandsAway += change;
    keepsProcess(hand.worker, hand.bandsAway > 0);
  }

  /**
   * A team of these threads for one filter.
   *
   * @throws ConvolutionError `memory-limit`, `memory-exhausted`
   */
  teamFor(plan: TeamPlan, memory: EngineMemory, routines: Routines): Team | ScatteredTeam {
    return this.shared ? new Team(plan, this, memory, routines) : new ScatteredTeam(plan, this, memory, routines);
  }

  nextId(): number {
    return this.#nextId++;
  }

  /** Tells all workers of a filter. */
  enlist(id: number, foreman: Foreman): void {
    this.#foremen.set(id, foreman);
    for (const hand of this.ready) for (const one of foreman.assignments) hand.post(one);
  }

  /** Lets all workers forget a filter. */
  release(id: number): void {
    this.#foremen.delete(id);
    for (const hand of this.ready) hand.post({ kind: "drop", id });
  }

  /** Ends a worker that does not answer, or is gone already. */
  dismiss(hand: Hand): void {
    const index = this.#hands.indexOf(hand);
    if (index < 0) return;
    this.#hands.splice(index, 1);
    hand.end();
    for (const foreman of this.#foremen.values()) foreman.lost(hand);
  }

  dispose(): void {
    this.#foremen.clear();
    while (this.#hands.length > 0) this.dismiss(this.#hands[0]!);
  }
}
