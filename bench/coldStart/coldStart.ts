/** Sample types that are started with: RGBA bytes and one plane of floats. */
export const samplesOfStarts = ["u8", "f32"] as const;
export type SampleOfStart = (typeof samplesOfStarts)[number];

/** Parts of a cold start in their order, and what each is. */
export const partNames = {
  import: "the package is read and evaluated",
  decode: "text to bytes, and what else comes before compiling",
  compile: "WebAssembly.compile",
  link: "exports looked at, WebAssembly.instantiate",
  selfTest: "the known-answer test",
  plan: "prepare: choosing, tables, memory, warming",
  firstRun: "the first run",
  tenthRun: "the tenth run",
  firstResult: "from import to the end of the first run",
} as const;

export type Part = keyof typeof partNames;

/** Milliseconds by part, the method chosen, and the largest difference from the definition in parts of the full value. */
export type ColdStart = Record<Part, number> & { method: string; difference: number };
