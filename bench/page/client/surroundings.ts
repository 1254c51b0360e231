/** Milliseconds to look at the clock for. */
const patience = 30;

/** The smallest step that the page's clock was seen to take within a few dozen milliseconds; `patience` where it took none. */
function clockTick(): number {
  const start = performance.now();
  let tick = patience;
  let last = start;
  for (let looks = 0; looks < 1_000_000 && last - start < patience; looks++) {
    const now = performance.now();
    if (now > last) tick = Math.min(tick, now - last);
    last = now;
  }
  return tick;
}

function tickInWords(milliseconds: number): string {
  const microseconds = Math.round(milliseconds * 1000);
  return microseconds < 1000 ? `${microseconds} µs` : `${Number(milliseconds.toPrecision(2))} ms`;
}

/** Threads that this page can share memory among: one where it is not isolated. */
export function threadsAvailable(): number {
  return globalThis.crossOriginIsolated ? navigator.hardwareConcurrency : 1;
}

/** What this page can do here, and why not more. */
export function surroundingsInWords(): string {
  const clock = `The clock of this page ticks every ${tickInWords(clockTick())}`;
  if (globalThis.crossOriginIsolated) return `${clock}.`;
  const reason = globalThis.isSecureContext
    ? "it was not sent with the headers that isolate it"
    : "it came over the network from an http:// address, which browsers call not secure";
  return `${clock}, and it works on one thread: ${reason}. Short runs are repeated until they are long enough for the clock.`;
}
