import { areaY, dot, line, link, rect, text, type Markish } from "@observablehq/plot";
import { lineHeight, textWidth, type Frame } from "./frame.js";

/** What the key explains, and how its sample looks. */
interface Entry {
  kind: "measured" | "predicted" | "crossing" | "earlier";
  words: string;
}

interface PlacedEntry extends Entry {
  x: number;
  row: number;
}

const sampleWidth = 30;

/** The key's entries in rows as wide as the drawing. */
export function keyEntries(entries: readonly Entry[], width: number, fontSize: number): PlacedEntry[] {
  const placed: PlacedEntry[] = [];
  let [x, row] = [0, 0];
  for (const entry of entries) {
    const entryWidth = sampleWidth + 6 + textWidth(entry.words, fontSize);
    if (x > 0 && x + entryWidth > width) [x, row] = [0, row + 1];
    placed.push({ ...entry, x, row });
    x += entryWidth + 1.4 * fontSize;
  }
  return placed;
}

export function keyRows(entries: readonly PlacedEntry[]): number {
  return Math.max(0, ...entries.map(({ row }) => row + 1));
}

/** Samples and words, below the axis. */
export function keyMarks(entries: readonly PlacedEntry[], { bottom, fontSize }: Frame): Markish[] {
  return entries.flatMap((entry) => {
    const y = bottom + (entry.row + 2.9) * lineHeight * fontSize;
    return [...sampleOf(entry, y), text([entry.words], { ...at(entry.x + sampleWidth + 6, y), text: (words: string) => words, textAnchor: "start", fontSize })];
  });
}

const at = (x: number, y: number) => ({ x: { value: [x], scale: null }, y: { value: [y], scale: null } });

function sampleOf({ kind, x }: PlacedEntry, y: number): Markish[] {
  const ends = [x, x + sampleWidth];
  const along = { x: { value: ends, scale: null }, y: { value: [y, y], scale: null }, stroke: "currentColor" };
  const middle = at(x + sampleWidth / 2, y);
  if (kind === "measured")
    return [
      areaY(ends, {
        x: { value: ends, scale: null },
        y1: { value: [y - 5, y - 5], scale: null },
        y2: { value: [y + 5, y + 5], scale: null },
        fillOpacity: 0.2,
      }),
      line(ends, { ...along, strokeWidth: 2.25 }),
      dot([0], { ...middle, r: 3.5, fill: "currentColor" }),
    ];
  if (kind === "predicted") return [line(ends, { ...along, strokeWidth: 1.5, strokeDasharray: "5 4" })];
  if (kind === "earlier")
    return [
      line(ends, { ...along, strokeWidth: 1, strokeOpacity: 0.55 }),
      dot([0], { ...middle, r: 2.5, stroke: "currentColor", strokeOpacity: 0.6, strokeWidth: 1 }),
    ];
  const box = { x1: { value: [x + 4], scale: null }, x2: { value: [x + sampleWidth - 4], scale: null } };
  return [
    rect([0], { ...box, y1: { value: [y - 8], scale: null }, y2: { value: [y + 8], scale: null }, fillOpacity: 0.09 }),
    link([0], {
      x1: { value: [x + sampleWidth / 2], scale: null },
      x2: { value: [x + sampleWidth / 2], scale: null },
      y1: { value: [y - 8], scale: null },
      y2: { value: [y + 8], scale: null },
      stroke: "currentColor",
    }),
    dot([0], { ...middle, r: 5, stroke: "currentColor", strokeWidth: 1.5 }),
  ];
}
