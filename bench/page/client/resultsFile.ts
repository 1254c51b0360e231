import type { Border, BorderRule, Channels, Layout, Method, SampleType } from "../../../src/index.js";
import type { ByMethod, Crossing, Crossover, CrossoverRow } from "../../../src/measure/index.js";

/** Why a file is not taken, in words for the person who gave it. */
export class UnfitFile extends Error {
  override readonly name = "UnfitFile";
}

type Fields = Readonly<Record<string, unknown>>;

/** Far more than results take; a photograph that was dropped by mistake is not read at all. */
const mostBytes = 2_000_000;
const mostRows = 1000;
const longestText = 300;

const methods: readonly Method[] = ["direct", "separable", "running-sum", "fft"];
const samples: readonly SampleType[] = ["u8", "u16", "f32"];
const rules: readonly BorderRule[] = ["replicate", "zero", "periodic", "half-sample-symmetric", "whole-sample-symmetric", "renormalised"];

const isFields = (value: unknown): value is Fields => typeof value === "object" && value !== null && !Array.isArray(value);
const listIn = (value: unknown): readonly unknown[] => (Array.isArray(value) ? value : []);

/** Reads numbers, names and texts; whatever else stands there is damage, and `where` says so. */
class Reader {
  constructor(readonly where: string) {}

  #damaged(what: string): never {
    throw new UnfitFile(`is damaged: ${this.where} has ${what}`);
  }

  number(value: unknown, name: string, least: number): number {
    return typeof value === "number" && Number.isFinite(value) && value >= least && value < 1e12 ? value : this.#damaged(`no usable ${name}`);
  }

  time(value: unknown): number {
    const milliseconds = this.number(value, "time", 0);
    return milliseconds > 0 ? milliseconds : this.#damaged("a time of 0");
  }

  oneOf<T>(value: unknown, name: string, known: readonly T[]): T {
    return known.includes(value as T) ? (value as T) : this.#damaged(`no known ${name}`);
  }

  pair(value: unknown): [number, number] {
    const [low, high] = listIn(value);
    return [this.number(low, "interval", 0), this.number(high, "interval", 0)];
  }

  byMethod<T>(value: unknown, read: (one: unknown) => T): ByMethod<T> {
    if (!isFields(value)) return {};
    return Object.fromEntries(methods.filter((method) => Object.hasOwn(value, method)).map((method) => [method, read(value[method])]));
  }
}

const text = (value: unknown): string => (typeof value === "string" ? value.slice(0, longestText) : "");

function rowOf(value: unknown, index: number): CrossoverRow {
  const fields = isFields(value) ? value : {};
  const reader = new Reader(`row ${index + 1}`);
  const milliseconds = reader.byMethod(fields["milliseconds"], (one) => reader.time(one));
  const quartiles = reader.byMethod(fields["quartiles"], (one) => reader.pair(one));
  if (Object.keys(milliseconds).length === 0) reader.time(undefined);
  return {
    size: reader.number(fields["size"], "kernel size", 1),
    milliseconds,
    quartiles: { ...reader.byMethod(milliseconds, (one): [number, number] => [one as number, one as number]), ...quartiles },
    samples: reader.number(fields["samples"] ?? 1, "count of samples", 0),
    predicted: reader.byMethod(fields["predicted"], (one) => reader.time(one)),
    chosen: reader.oneOf(fields["chosen"], "method", methods),
    fastest: reader.oneOf(fields["fastest"], "method", methods),
    regret: reader.number(fields["regret"] ?? 0, "regret", 0),
  };
}

function crossingOf(value: unknown, index: number): Crossing {
  const fields = isFields(value) ? value : {};
  const reader = new Reader(`crossing ${index + 1}`);
  return {
    from: reader.oneOf(fields["from"], "method", methods),
    to: reader.oneOf(fields["to"], "method", methods),
    size: reader.number(fields["size"], "kernel size", 1),
    interval: reader.pair(fields["interval"]),
    leading: fields["leading"] === true,
  };
}

function layoutOf(value: unknown): Required<Layout> {
  const fields = isFields(value) ? value : {};
  const reader = new Reader("the layout");
  return {
    width: reader.number(fields["width"], "width", 1),
    height: reader.number(fields["height"], "height", 1),
    channels: reader.oneOf<Channels>(fields["channels"], "number of channels", [1, 2, 3, 4]),
    sample: reader.oneOf(fields["sample"], "sample type", samples),
  };
}

/** Rules by name are told; a rule of other shape is not needed to compare, and the usual one stands for it. */
const borderOf = (value: unknown): Border => rules.find((rule) => rule === value) ?? "replicate";

function crossoverOf(fields: Fields): Crossover {
  const rows = listIn(fields["rows"]);
  if (rows.length > mostRows) throw new UnfitFile(`has ${rows.length} rows; results have a few dozen`);
  return {
    layout: layoutOf(fields["layout"]),
    border: borderOf(fields["border"]),
    separable: fields["separable"] !== false,
    rows: rows.map(rowOf).sort((a, b) => a.size - b.size),
    crossings: listIn(fields["crossings"]).slice(0, mostRows).map(crossingOf),
    notes: listIn(fields["notes"]).slice(0, 20).map(text),
    host: text(fields["host"]) || "an unnamed device",
    build: new Reader("the file").oneOf(fields["build"], "build", ["simd", "scalar", "relaxed-simd"]),
    threads: new Reader("the file").number(fields["threads"], "number of threads", 1),
    profile: text(fields["profile"]),
    date: text(fields["date"]),
  };
}

/** Results are the whole file, or stand in it as `crossover`. */
function crossoverFields(content: unknown): Fields {
  const fields = isFields(content) ? content : {};
  const found = isFields(fields["crossover"]) ? fields["crossover"] : fields;
  if (Array.isArray(found["rows"]) && found["rows"].length > 0) return found;
  if (isFields(fields["nanoseconds"]))
    throw new UnfitFile("is a profile, the costs of a device. To compare, take the file of results, which is saved beside it");
  throw new UnfitFile("is JSON, but no results of this page: it has no rows of measured times");
}

/**
 * Reads results that were saved before. Only known fields are taken over.
 *
 * @throws UnfitFile with a message that continues the file's name: "is empty"
 */
export async function readResults(file: File): Promise<Crossover> {
  if (file.size === 0) throw new UnfitFile("is empty");
  if (file.size > mostBytes) throw new UnfitFile(`has ${(file.size / 1e6).toFixed(1)} MB; results take a few kB, so it was not read`);
  const written = await file.text().catch(() => {
    throw new UnfitFile("could not be read");
  });
  let content: unknown;
  try {
    content = JSON.parse(written);
  } catch {
    throw new UnfitFile("is no file of results: it does not hold JSON");
  }
  return crossoverOf(crossoverFields(content));
}
