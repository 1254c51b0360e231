import { SingleBar } from "cli-progress";
import type { Streams } from "./program.js";

/** Where a piece of work tells how far it is. */
export interface Progress {
  /** The part that is done, 0…1, and a few words about it. */
  reach(part: number, words: string): void;
  /** Takes the bar away. Safe to call twice. */
  end(): void;
}

const silent: Progress = { reach: () => undefined, end: () => undefined };

/** Steps of a bar: finer than the columns of any terminal. */
const steps = 10_000;

/** The bar is told so often at most. */
const millisecondsBetween = 100;

/** The time left is judged by so many of the latest: five seconds or more, as first runs are slower than later ones. */
const latestCount = 50;

/** A bar with the time left, on standard error where that is a terminal; else nothing. */
export function showProgress({ stderr }: Streams, words: string): Progress {
  if (stderr.isTTY !== true) return silent;
  const bar = new SingleBar({
    stream: stderr as NodeJS.WritableStream,
    format: "{words} [{bar}] {percentage} %  {eta_formatted}",
    barsize: 24,
    formatTime: timeLeft,
    etaBuffer: latestCount,
    linewrap: true, // the terminal's own mode is left alone; longer lines are cut
    clearOnComplete: true,
  });
  bar.start(steps, 0, { words });
  let told = performance.now();
  return {
    reach(part, latest) {
      if (performance.now() - told < millisecondsBetween) return;
      told = performance.now();
      bar.update(Math.round(part * steps), { words: latest });
    },
    end: () => bar.stop(),
  };
}

/** Seconds as people say them; the bar hands over words where it does not know yet. */
function timeLeft(seconds: unknown): string {
  if (typeof seconds !== "number") return "";
  if (seconds < 100) return `${Math.round(seconds)} s left`;
  const minutes = Math.round(seconds / 60);
  return minutes < 100 ? `${minutes} min left` : `${Math.round(minutes / 60)} h left`;
}
