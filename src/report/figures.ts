/** Three digits where there are as many: 0.0123, 4.56, 78.9, 1235. */
export function threeDigits(value: number): string {
  if (!Number.isFinite(value)) return "–";
  if (value === 0) return "0";
  if (Math.abs(value) >= 99.95) return value.toFixed(0);
  return Math.abs(value) < 1e-4 ? value.toExponential(2) : value.toPrecision(3);
}

/** A time in the unit that suits it: 870 ns, 12.3 µs, 4.56 ms, 1.23 s. */
export function duration(milliseconds: number, digits: (value: number) => string = threeDigits): string {
  if (milliseconds >= 999.5) return `${digits(milliseconds / 1000)} s`;
  if (milliseconds >= 0.9995) return `${digits(milliseconds)} ms`;
  return milliseconds >= 0.0009995 ? `${digits(milliseconds * 1000)} µs` : `${digits(milliseconds * 1e6)} ns`;
}

/** A round time as an axis names it: 500 µs, 2 ms, 10 s. */
export function roundDuration(milliseconds: number): string {
  return duration(milliseconds, (value) => String(Number(value.toPrecision(2))));
}

/** A share in per cent, with one decimal below ten: 0 %, 3.4 %, 12 %. */
export function percent(share: number): string {
  if (!Number.isFinite(share)) return "–";
  const value = 100 * share;
  return `${value === 0 || Math.abs(value) >= 9.95 ? value.toFixed(0) : value.toFixed(1)} %`;
}

/** 9 is "9×9". */
export function bySide(tapsASide: number): string {
  return `${tapsASide}×${tapsASide}`;
}

const months = "January February March April May June July August September October November December".split(" ");

/** An ISO 8601 date for people: "1 December 2026, 14:05 UTC", or as it is where it is no such date. */
export function dateInWords(iso: string): string {
  const date = new Date(iso);
  if (!/^\d{4}-\d{2}-\d{2}/.test(iso) || Number.isNaN(date.getTime())) return iso;
  const day = `${date.getUTCDate()} ${months[date.getUTCMonth()]} ${date.getUTCFullYear()}`;
  return iso.includes("T") ? `${day}, ${date.toISOString().slice(11, 16)} UTC` : day;
}

/** 1 is "one thread", 4 is "4 threads". */
export function threadsInWords(threads: number): string {
  return threads === 1 ? "one thread" : `${threads} threads`;
}

/** "a", "a and b", "a, b and c". */
export function listed(words: readonly string[], joint = "and"): string {
  return words.length < 2 ? words.join("") : `${words.slice(0, -1).join(", ")} ${joint} ${words.at(-1)}`;
}
