import * as field from "../generated/record.js";
import type { Intake, Outlet, Program, RowSpan, Step, Table } from "../runtime/program.js";
import { opaqueBound, transparentBound, type MethodError } from "./accuracy.js";
import { Arrangement, rowStride } from "./arrangement.js";
import type { Counts } from "./cost.js";
import type { Axis, Problem } from "./problem.js";
import { JobRecord } from "./record.js";
import { sampleFacts } from "./samples.js";
import { weightBytes, weightsOf } from "./weights.js";

/** Bytes of source samples and of result samples that are staged at a time: they stay in the second cache. Less where memory is short. */
const mostStagedBytes = 262144;

/** The longest stretch of extended columns that are neighbours in the source. */
interface Stretch {
  column: number;
  count: number;
}

const stretches = new WeakMap<Axis, Stretch>();

export function stretchOf(axis: Axis): Stretch {
  let stretch = stretches.get(axis);
  if (!stretch) stretches.set(axis, (stretch = findStretch(axis)));
  return stretch;
}

function findStretch({ map, first, extended }: Axis): Stretch {
  const inPlace = (column: number): boolean => map[column]! >= 0 && map[column] === first + column;
  let column = 0;
  while (column < extended && !inPlace(column)) column++;
  let end = column;
  while (end < extended && inPlace(end)) end++;
  return { column, count: end - column };
}

/** Pairs for every column outside the stretch: its place, and where its pixel comes from (see HALO in the core's record). */
function haloOf(axis: Axis, stretch: Stretch, firstStaged: number): Int32Array<ArrayBuffer> {
  const pairs: number[] = [];
  for (let column = 0; column < axis.extended; column++) {
    if (column >= stretch.column && column < stretch.column + stretch.count) continue;
    const source = axis.map[column]!;
    const inStretch = source - axis.first;
    const entered = source >= 0 && inStretch >= stretch.column && inStretch < stretch.column + stretch.count;
    pairs.push(column, source < 0 ? -1 : entered ? inStretch : -2 - (source - firstStaged));
  }
  return Int32Array.from(pairs);
}

/** The source columns that are read: all from the first to the last. */
function stagedColumns(axis: Axis): { first: number; count: number } {
  const { column, count } = stretchOf(axis);
  let first = count > 0 ? axis.map[column]! : Infinity;
  let last = count > 0 ? axis.map[column + count - 1]! : -1;
  for (let k = 0; k < axis.extended; k++) {
    if (k === column && count > 0) k += count;
    const index = k < axis.extended ? axis.map[k]! : -1;
    if (index < 0) continue;
    first = Math.min(first, index);
    last = Math.max(last, index);
  }
  return last < 0 ? { first: 0, count: 0 } : { first, count: last - first + 1 };
}

/** The two constant pixels in source samples: what stands outside by row, and by column. */
export function constantPixels(problem: Problem): Uint8Array | Uint16Array | Float32Array {
  const { channels } = problem;
  const values = [problem.vertical.rule, problem.horizontal.rule].flatMap((rule) => {
    const constant = typeof rule === "object" ? rule.constant : 0;
    return Array.from({ length: channels }, (_, c) => (typeof constant === "number" ? constant : constant[c]!));
  });
  const sample = problem.request.sample;
  return sample === "u8" ? Uint8Array.from(values) : sample === "u16" ? Uint16Array.from(values) : Float32Array.from(values);
}

/**
 * What every method shares: how samples enter and leave. A method takes its own blocks from the same arrangement and adds its own
 * fields, tables and steps.
 */
export interface Frame {
  arrangement: Arrangement;
  record: number;
  intake: Intake;
  outlet: Outlet;
  /** Floats of a result row, and rounded up to whole vectors. */
  resultFloats: number;
  paddedFloats: number;
  /** Bytes from one extended row of working floats to the next, with slack to read whole vectors. */
  extendedStride: number;
  resultStride: number;
  /** Rows that may be staged at a time. */
  stagedRows: number;
  offsets: Record<
    "halo" | "rowMap" | "constantPixels" | "constantRow" | "constantColumn" | "curve" | "weightRows" | "weightColumns" | "weights" | "keepRow",
    number
  >;
}

const curveBytes = (problem: Problem): number => {
  const facts = sampleFacts[problem.request.sample];
  return problem.request.light === "linear" && facts.integer ? (facts.full + 1) * 4 : 0;
};

/** Takes the blocks that every method needs. `mostRows` is the largest number of rows that one step of the method reads or writes. */
export function frameOf(problem: Problem, mostRows: (affordable: number) => number): Frame {
  const { channels, horizontal, vertical, request } = problem;
  const arrangement = new Arrangement();
  const record = arrangement.take(field.RECORD_BYTES);
  const staged = stagedColumns(horizontal);
  const rowBytes = (staged.count * channels) << sampleFacts[request.sample].code;
  const resultFloats = horizontal.count * channels;
  const paddedFloats = Math.ceil(resultFloats / 4) * 4;
  const extendedStride = rowStride((paddedFloats + (horizontal.taps - 1) * channels + 16) * 4);
  const resultStride = rowStride(paddedFloats * 4 + 64);
  const outputRowBytes = resultFloats << sampleFacts[request.output.sample].code;
  const stagedBytes = Math.min(mostStagedBytes, problem.bytesAvailable / 8);
  const affordable = Math.max(2, Math.floor(stagedBytes / Math.max(1, rowBytes, outputRowBytes)));
  const stagedRows = mostRows(affordable);
  const weights = problem.renormalised ? weightBytes(problem) : { rows: 0, columns: 0, factors: 0 };
  const haloColumns = horizontal.extended - stretchOf(horizontal).count;
  const keep = request.alpha === "keep";
  const offsets = {
    halo: arrangement.take(haloColumns * 8),
    rowMap: arrangement.take(vertical.extended * 4),
    constantPixels: arrangement.take(channels * 8),
    constantRow: arrangement.take(extendedStride),
    constantColumn: arrangement.take(16),
    curve: arrangement.take(curveBytes(problem)),
    weightRows: arrangement.take(weights.rows),
    weightColumns: arrangement.take(weights.columns),
    weights: arrangement.take(weights.factors),
    keepRow: arrangement.take(keep ? extendedStride : 0),
  };
  const intake: Intake = {
    offset: arrangement.take(stagedRows * rowBytes + 16),
    keepOffset: arrangement.take(keep ? stagedRows * rowBytes + 16 : 0),
    sample: request.sample,
    channels,
    firstColumn: staged.first,
    columns: staged.count,
    rowMap: vertical.map,
  };
  const outlet: Outlet = {
    offset: arrangement.take(stagedRows * outputRowBytes + 16),
    sample: request.output.sample,
    firstRow: problem.row,
    firstSample: problem.column * channels,
    rowSamples: resultFloats,
  };
  return { arrangement, record, intake, outlet, resultFloats, paddedFloats, extendedStride, resultStride, stagedRows, offsets };
}

function enterFields(problem: Problem, frame: Frame, job: JobRecord): void {
  const { horizontal, vertical, request, colours, channels } = problem;
  const { intake, offsets } = frame;
  const facts = sampleFacts[request.sample];
  const stretch = stretchOf(horizontal);
  job
    .integer(field.SOURCE_KIND, facts.code)
    .integer(field.CHANNELS, channels)
    .integer(field.COLOURS, colours)
    .integer(field.PREMULTIPLY, request.alpha === "straight" ? 1 : 0)
    .integer(field.DECODE, request.light === "linear" ? 1 : 0)
    .pointer(field.CURVE, offsets.curve)
    .pointer(field.ROW_MAP, offsets.rowMap)
    .pointer(field.STAGING, intake.offset)
    .integer(field.STAGING_STRIDE, (intake.columns * channels) << facts.code)
    .integer(field.RUN_SOURCE, stretch.count ? horizontal.map[stretch.column]! - intake.firstColumn : 0)
    .integer(field.RUN_COLUMN, stretch.column)
    .integer(field.RUN_COUNT, stretch.count)
    .pointer(field.HALO, offsets.halo)
    .integer(field.HALO_COUNT, horizontal.extended - stretch.count)
    .pointer(field.CONSTANT_PIXELS, offsets.constantPixels)
    .pointer(field.CONSTANT_ROW, offsets.constantRow)
    .pointer(field.CONSTANT_COLUMN, offsets.constantColumn)
    .integer(field.EXTENDED_COLUMNS, horizontal.extended)
    .integer(field.EXTENDED_ROWS, vertical.extended)
    .integer(field.KERNEL_COLUMNS, horizontal.taps)
    .integer(field.KERNEL_ROWS, vertical.taps)
    .float(field.SOURCE_FULL, facts.full)
    .float(field.WORKING_FULL, problem.workingFull);
}

const alphaCodes = { none: 0, straight: 1, premultiplied: 2, keep: 3 } as const;

function leaveFields(problem: Problem, frame: Frame, job: JobRecord, error: MethodError, round: boolean): void {
  const { horizontal, vertical, request, channels } = problem;
  const { outlet, offsets } = frame;
  const facts = sampleFacts[request.output.sample];
  job
    .integer(field.OUTPUT_KIND, facts.code)
    .integer(field.OUTPUT_COLUMNS, horizontal.count)
    .integer(field.OUTPUT_ROWS, vertical.count)
    .pointer(field.OUTPUT, outlet.offset)
    .integer(field.OUTPUT_STRIDE, (horizontal.count * channels) << facts.code)
    .float(field.GAIN, request.output.gain)
    .float(field.OFFSET, request.output.offset)
    .float(field.OUTPUT_FULL, facts.full)
    .integer(field.ROUND, round ? 1 : 0)
    .integer(field.ALPHA, alphaCodes[request.alpha])
    .float(field.OPAQUE_SUM, problem.analysis.sum * problem.workingFull)
    .integer(field.ANCHOR_COLUMN, horizontal.anchor)
    .integer(field.ANCHOR_ROW, vertical.anchor);
  if (request.alpha === "straight") job.float(field.ALPHA_BOUND, opaqueBound(problem, error)).float(field.ALPHA_NOISE, transparentBound(problem, error));
  if (request.alpha === "keep") job.pointer(field.KEEP_STAGING, frame.intake.keepOffset).pointer(field.KEEP_ROW, offsets.keepRow);
  if (!problem.renormalised) return;
  job
    .pointer(field.WEIGHT_ROWS, offsets.weightRows)
    .pointer(field.WEIGHT_COLUMNS, offsets.weightColumns)
    .pointer(field.WEIGHTS, offsets.weights)
    .integer(field.WEIGHT_STRIDE, weightsOf(problem).stride);
}

function frameTables(problem: Problem, frame: Frame): Table[] {
  const { horizontal, vertical } = problem;
  const { offsets } = frame;
  const tables: Table[] = [
    { offset: offsets.halo, data: haloOf(horizontal, stretchOf(horizontal), frame.intake.firstColumn) },
    { offset: offsets.rowMap, data: vertical.map },
    { offset: offsets.constantPixels, data: constantPixels(problem) },
  ];
  if (problem.renormalised) {
    const weights = weightsOf(problem);
    tables.push(
      { offset: offsets.weightRows, data: weights.rows },
      { offset: offsets.weightColumns, data: weights.columns },
      { offset: offsets.weights, data: weights.factors },
    );
  }
  return tables;
}

/** A method's part of a program. */
export interface Body {
  /** Adds the method's fields to the record. */
  fields(job: JobRecord): void;
  tables: Table[];
  setup: Step[];
  steps: Step[];
  /** Error among working floats (for alpha), and whether exact results are integers whose error may be taken away. */
  error: MethodError;
  round: boolean;
}

/** Puts the frame and a method's part together. */
export function programOf(problem: Problem, frame: Frame, body: Body): Program {
  const job = new JobRecord();
  enterFields(problem, frame, job);
  leaveFields(problem, frame, job, body.error, body.round);
  body.fields(job);
  const setup: Step[] = [];
  if (curveBytes(problem)) setup.push(plainStep("decodeCurve", 0, sampleFacts[problem.request.sample].full + 1));
  setup.push(plainStep("enterConstants", 0, 0), ...body.setup);
  return {
    byteLength: frame.arrangement.byteLength,
    record: frame.record,
    tables: [job.table(frame.record), ...frameTables(problem, frame), ...body.tables],
    setup,
    steps: body.steps,
    intake: frame.intake,
    outlet: frame.outlet,
  };
}

export function plainStep(routine: Step["routine"], from: number, to: number, strip = 0): Step {
  return { routine, from, to, strip };
}

/** A step that writes result rows: `keep` stages the rows that their alpha comes from. */
export function writing(problem: Problem, step: Step, write: RowSpan): Step {
  step.write = write;
  if (problem.request.alpha === "keep") step.keep = { first: write.first + problem.vertical.anchor, count: write.count };
  return step;
}

/** Counts of entering and leaving, common to all methods; `entered` is how many rows come in. */
export function frameCounts(problem: Problem, entered: number, steps: number): Counts {
  const { horizontal, vertical, channels, request } = problem;
  const stretch = stretchOf(horizontal);
  const results = horizontal.count * vertical.count;
  // What stands beside the stretch is copied from converted pixels.
  const read = entered * (stretch.count || horizontal.extended);
  const linear = request.light === "linear";
  const byTable = linear && sampleFacts[request.sample].integer;
  return {
    run: 1,
    step: steps,
    row: vertical.count,
    [`enter_${request.sample}`]: read * channels,
    [`leave_${request.output.sample}`]: results * channels,
    haloPixel: entered * (horizontal.extended - stretch.count),
    alphaPixel: request.alpha === "none" ? 0 : read + results,
    weighedSample: problem.renormalised ? results * channels : 0,
    tableSample: byTable ? read * problem.colours : 0,
    curveSample: linear ? (results + (byTable ? 0 : read)) * problem.colours : 0,
  };
}
