import type { Channels, Layout, SampleType } from "../../../src/index.js";
import { threadsInWords } from "../../../src/report/figures.js";

/** What the person asked for. */
export interface Wanted {
  layout: Required<Layout>;
  separable: boolean;
  threads: number;
  /** For the second step, the crossing. */
  milliseconds: number;
}

interface Choice<T> {
  value: T;
  words: string;
  /** The same in the middle of a sentence. */
  inSentence: string;
  usual?: true;
}

const picture = (width: number, height: number, name: string, usual?: true): Choice<{ width: number; height: number }> => ({
  value: { width, height },
  words: `${name}, ${width} × ${height}`,
  inSentence: `${name}, ${width} × ${height}`,
  ...(usual ? { usual } : {}),
});

export const pictures = [
  picture(160, 120, "Thumbnail"),
  picture(640, 480, "Small picture"),
  picture(1280, 720, "Screen picture"),
  picture(1920, 1080, "Full HD photograph", true),
  picture(4000, 3000, "12 megapixel photograph"),
] as const;

export const colours: readonly Choice<Channels>[] = [
  { value: 4, words: "Colour with transparency", inSentence: "colour with transparency", usual: true },
  { value: 3, words: "Colour", inSentence: "colour" },
  { value: 1, words: "Shades of grey", inSentence: "shades of grey" },
  { value: 2, words: "Grey with transparency", inSentence: "grey with transparency" },
];

export const values: readonly Choice<SampleType>[] = [
  { value: "u8", words: "a byte, as in most pictures", inSentence: "bytes", usual: true },
  { value: "u16", words: "a 16-bit number, as in scans", inSentence: "16-bit numbers" },
  { value: "f32", words: "a decimal number, as in computed pictures", inSentence: "decimal numbers" },
];

export const filters: readonly Choice<boolean>[] = [
  { value: true, words: "A bell, for soft and smooth", inSentence: "bells", usual: true },
  { value: false, words: "Any shape, such as a measured blur", inSentence: "filters of any shape" },
];

export const durations: readonly Choice<number>[] = [
  { value: 4_000, words: "about 5 seconds, a first look", inSentence: "about 5 seconds" },
  { value: 28_000, words: "about half a minute", inSentence: "about half a minute", usual: true },
  { value: 118_000, words: "about two minutes, for slow devices", inSentence: "about two minutes" },
];

/** One, two, and all that the device says it has. */
export function threadChoices(available: number): Choice<number>[] {
  const counts = [...new Set([1, 2, 4, Math.min(available, 8)])].filter((count) => count <= available).sort((a, b) => a - b);
  return counts.map((value) => ({ value, words: threadsInWords(value), inSentence: threadsInWords(value), ...(value === 1 ? { usual: true } : {}) }));
}

/** "Full HD photograph, 1920 × 1080, colour with transparency, bytes, bells": what was filtered, of results that may come from elsewhere. */
export function described(layout: Required<Layout>, separable: boolean): string {
  const { width, height } = layout;
  const known = pictures.find(({ value }) => value.width === width && value.height === height);
  const parts = [
    known?.inSentence ?? `Picture, ${width} × ${height}`,
    colours.find(({ value }) => value === layout.channels)?.inSentence,
    values.find(({ value }) => value === layout.sample)?.inSentence,
    filters.find(({ value }) => value === separable)?.inSentence,
  ];
  return parts.join(", ");
}

/** Fills a list; returns a reader of what is chosen in it. */
export function offer<T>(list: HTMLSelectElement, choices: readonly Choice<T>[]): () => T {
  list.replaceChildren(...choices.map(({ words, usual }, index) => new Option(words, String(index), usual, usual)));
  return () => choices[list.selectedIndex]!.value;
}
