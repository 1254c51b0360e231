import * as field from "../generated/record.js";
import { transformError } from "../math/rounding.js";
import { rootsOfUnity } from "../math/rootsOfUnity.js";
import { radicesOf } from "../math/smoothNumbers.js";
import type { Lane, Program, Step, Table } from "../runtime/program.js";
import { integerResults, leastWeight, outputBound, underflow, type MethodError } from "./accuracy.js";
import { frameCounts, frameOf, plainStep, programOf, writing, type Frame } from "./frame.js";
import type { MethodPlan } from "./method.js";
import { floatTaps, vectorFloats, type Problem } from "./problem.js";
import { remembered } from "./remembered.js";
import { sampleFacts } from "./samples.js";
import { planTiles, type Tiling } from "./tiles.js";

/** Overlap-save: strips of complex planes transformed, multiplied by the kernel's spectrum, transformed back. */
interface FftFrame extends Frame {
  tiling: Tiling;
  taps: number;
  columnPlan: number;
  columnTurns: number;
  rowPlan: number;
  rowTurns: number;
  planes: number;
  spectrum: number;
  scratch: number;
  entered: number;
  result: number;
  marks: number;
  markStride: number;
  markCounts: number;
  markRow: number;
  /** The further threads' own blocks. */
  further: OwnBlocks[];
}

/** What each thread needs of its own: blocks that one step fills and reads again. */
type OwnBlocks = Record<"record" | "intake" | "keep" | "outlet" | "keepRow" | "entered" | "result" | "scratch" | "markRow", number>;

/** With the renormalised border the error is divided by the inside weight: a smaller share than this is no longer worth a transform. */
const leastShare = 0.001;

/** One call transforms about this many weighted points: a few milliseconds of them. */
const pointsPerCall = 1_500_000;

const tilings = new WeakMap<Problem, Tiling>();

function tilingOf(given: Problem): Tiling | undefined {
  const problem = given.together?.alone ?? given;
  let tiling = tilings.get(problem) ?? (problem.like && tilingOf(problem.like));
  if (!tiling) {
    tiling = planTiles(problem, (candidate) => frameFor(problem, candidate).arrangement.byteLength <= problem.bytesAvailable);
    if (tiling) tilings.set(problem, tiling);
  }
  return tiling;
}

/** Only floats can hold NaN or ∞. */
const marksNeeded = (problem: Problem): boolean => !sampleFacts[problem.request.sample].integer;

const markRowBytes = (problem: Problem): number => 8 * Math.ceil((problem.horizontal.extended * problem.channels) / 64);

const turnsBytes = (points: number): number => {
  let turns = 0;
  let span = points;
  for (const radix of radicesOf(points)!) {
    turns += (span / radix) * (radix - 1);
    span /= radix;
  }
  return turns * 8;
};

function frame(problem: Problem): FftFrame {
  return frameFor(problem, tilingOf(problem)!);
}

function frameFor(problem: Problem, tiling: Tiling): FftFrame {
  const { horizontal, vertical } = problem;
  const base = frameOf(problem, (affordable) => Math.min(affordable, tiling.rows));
  const { arrangement } = base;
  const markStride = markRowBytes(problem);
  const markRows = marksNeeded(problem) ? tiling.rows * tiling.stripsPerGroup : 0;
  const layout: FftFrame = {
    ...base,
    tiling,
    markStride,
    taps: arrangement.take(horizontal.taps * vertical.taps * 4),
    columnPlan: arrangement.take(4 + 12 * radicesOf(tiling.rows)!.length),
    columnTurns: arrangement.take(turnsBytes(tiling.rows)),
    rowPlan: arrangement.take(4 + 12 * radicesOf(tiling.columns)!.length),
    rowTurns: arrangement.take(turnsBytes(tiling.columns)),
    planes: arrangement.take(2 * tiling.pairs * tiling.planeBytes),
    spectrum: arrangement.take(tiling.spectrumBytes),
    scratch: arrangement.take(tiling.columns * 32),
    entered: arrangement.take(base.extendedStride),
    result: arrangement.take(base.resultStride),
    marks: arrangement.take(markRows * markStride),
    markCounts: arrangement.take(markRows * 4),
    markRow: arrangement.take(markStride),
    further: [],
  };
  for (let thread = 1; thread < (problem.together?.threads ?? 1); thread++) layout.further.push(ownBlocksAgain(layout));
  return layout;
}

function ownBlocks({ record, intake, outlet, offsets, entered, result, scratch, markRow }: FftFrame): OwnBlocks {
  const { keepRow } = offsets;
  return { record, intake: intake.offset, keep: intake.keepOffset, outlet: outlet.offset, keepRow, entered, result, scratch, markRow };
}

function ownBlocksAgain(layout: FftFrame): OwnBlocks {
  const own = Object.entries(ownBlocks(layout)).map(([name, offset]) => [name, layout.arrangement.takeAgain(offset)]);
  return Object.fromEntries(own) as OwnBlocks;
}

/** The record again, with the further thread's own blocks in it. */
function furtherRecord({ data, addresses }: Table, layout: FftFrame, blocks: OwnBlocks): Table {
  const mine = ownBlocks(layout);
  const places = { intake: field.STAGING, keep: field.KEEP_STAGING, outlet: field.OUTPUT, keepRow: field.KEEP_ROW, entered: field.ENTERED };
  const scratch = { result: field.RESULT, scratch: field.ROW_SCRATCH, markRow: field.MARK_ROW };
  const integers = data.slice() as Int32Array<ArrayBuffer>;
  for (const [name, place] of Object.entries({ ...places, ...scratch }) as [keyof OwnBlocks, number][]) {
    const pointers = addresses as readonly number[];
    if (pointers.includes(place >> 2) && integers[place >> 2] === mine[name]) integers[place >> 2] = blocks[name];
  }
  return { offset: blocks.record, data: integers, addresses: addresses! };
}

const laneOf = ({ record, intake, keep, outlet }: OwnBlocks): Lane => ({ record, intake, keep, outlet });

/** A program that several threads work on together; as it is where there is one. */
function withLanes(program: Program, layout: FftFrame, phases: number[]): Program {
  if (layout.further.length === 0) return program;
  const record = program.tables[0]!;
  return {
    ...program,
    tables: [...program.tables, ...layout.further.map((blocks) => furtherRecord(record, layout, blocks))],
    lanes: [ownBlocks(layout), ...layout.further].map(laneOf),
    phases,
  };
}

/** Plan and turns of a transform: see the core's fft/transform. */
function transformTables(points: number, plan: number, turns: number): Table[] {
  const { cosine, sine } = rootsOfUnity(points);
  const radices = radicesOf(points)!;
  const entries = [radices.length];
  const values: number[] = [];
  let span = points;
  for (const radix of radices) {
    entries.push(radix, span, turns + values.length * 4);
    const step = points / span;
    for (let j = 0; j < span / radix; j++) {
      for (let k = 1; k < radix; k++) values.push(cosine[j * k * step]!, -sine[j * k * step]!);
    }
    span /= radix;
  }
  return [
    { offset: plan, data: Int32Array.from(entries), addresses: radices.map((_, pass) => 3 * pass + 3) },
    { offset: turns, data: Float32Array.from(values) },
  ];
}

const transforms = /* @__PURE__ */ remembered((problem): Table[] => {
  const { tiling, columnPlan, columnTurns, rowPlan, rowTurns } = frame(problem);
  return [...transformTables(tiling.rows, columnPlan, columnTurns), ...transformTables(tiling.columns, rowPlan, rowTurns)];
});

/** Error among working floats. Exact results that are integers lose it where it stays below ½. */
function error(problem: Problem): MethodError {
  const tiling = tilingOf(problem)!;
  const noise = transformError(tiling.rows * tiling.columns) * problem.analysis.absoluteSum * problem.workingFull;
  return { relative: 0, absolute: noise + underflow(problem), noise };
}

const roundable = (problem: Problem): boolean => integerResults(problem) && error(problem).absolute < 0.5;

/** Units of one call, as many as last a few milliseconds, in multiples of `grain`. */
const unitsPerCall = (costPerUnit: number, grain: number): number => Math.max(grain, grain * Math.floor(pointsPerCall / costPerUnit / grain));

/** Calls that do `units` units. */
function chunks(routine: Step["routine"], units: number, many: number): Step[] {
  const steps: Step[] = [];
  for (let from = 0; from < units; from += many) steps.push(plainStep(routine, from, Math.min(units, from + many)));
  return steps;
}

const roundedToFour = (count: number): number => 4 * Math.ceil(count / 4);

function enterSteps(problem: Problem, layout: FftFrame, strip: number): Step[] {
  const { tiling, stagedRows } = layout;
  const steps: Step[] = [];
  const top = strip * tiling.stripRows;
  for (let from = 0; from < tiling.rows; from += stagedRows) {
    const to = Math.min(tiling.rows, from + stagedRows);
    const count = Math.max(0, Math.min(problem.vertical.extended - top - from, to - from));
    steps.push({ ...plainStep("enterStrip", from, to, strip), read: { first: top + from, count } });
  }
  return steps;
}

function leaveSteps(problem: Problem, layout: FftFrame, strip: number): Step[] {
  const { tiling, stagedRows } = layout;
  const steps: Step[] = [];
  const top = strip * tiling.stripRows;
  const rows = Math.min(tiling.stripRows, problem.vertical.count - top);
  for (let from = 0; from < rows; from += stagedRows) {
    const to = Math.min(rows, from + stagedRows);
    steps.push(writing(problem, plainStep("leaveStrip", from, to, strip), { first: top + from, count: to - from }));
  }
  return steps;
}

/** Each thread takes at least this many calls of a phase, so that all end at about the same time. */
const callsOfEach = 8;

/** Floats of columns and groups of rows that one call transforms. */
function grains(problem: Problem, tiling: Tiling): { columns: number; groups: number } {
  const shareOf = (units: number): number => (problem.together ? units / (problem.together.threads * callsOfEach) : Infinity);
  const columns = unitsPerCall(5 * tiling.rows * tiling.pairs, 16);
  const groups = unitsPerCall(12 * vectorFloats(problem) * tiling.tiles * tiling.columns * tiling.pairs, 1);
  return {
    columns: Math.min(columns, Math.max(16, 16 * Math.ceil(shareOf(problem.horizontal.count) / 16))),
    groups: Math.min(groups, Math.max(1, Math.ceil(shareOf(tiling.rows / vectorFloats(problem))))),
  };
}

/** Enter, columns, rows, columns back, leave: group after group of strips. Each is a phase, whose steps do not depend on each other. */
const runPhases = /* @__PURE__ */ remembered((problem): Step[][] => {
  const layout = frame(problem);
  const { tiling } = layout;
  const { columns, groups } = grains(problem, tiling);
  const phases: Step[][] = [];
  for (let group = 0; group < tiling.groups; group++) {
    const strips = Array.from({ length: tiling.stripsPerGroup }, (_, k) => group * tiling.stripsPerGroup + k);
    phases.push(
      strips.flatMap((strip) => enterSteps(problem, layout, strip)),
      chunks("forwardColumns", roundedToFour(problem.horizontal.extended), columns),
      chunks("filterRows", tiling.rows / vectorFloats(problem), groups),
      chunks("inverseColumns", roundedToFour(problem.horizontal.count), columns),
      strips.flatMap((strip) => leaveSteps(problem, layout, strip)),
    );
  }
  return phases;
});

/** The number of each phase's first step. */
function startsOf(phases: Step[][]): number[] {
  let start = 0;
  return phases.map((steps) => (start += steps.length) - steps.length);
}

/** How many steps those are. */
function callsOf(problem: Problem, layout: FftFrame): number {
  const { tiling, stagedRows } = layout;
  const { columns, groups } = grains(problem, tiling);
  const entering = tiling.stripsPerGroup * Math.ceil(tiling.rows / stagedRows);
  const transforms = Math.ceil(roundedToFour(problem.horizontal.extended) / columns) + Math.ceil(roundedToFour(problem.horizontal.count) / columns);
  const middle = Math.ceil(tiling.rows / vectorFloats(problem) / groups);
  return tiling.groups * (entering + transforms + middle) + tiling.strips * Math.ceil(tiling.stripRows / stagedRows);
}

function setupSteps(problem: Problem, tiling: Tiling): Step[] {
  const lanes = vectorFloats(problem);
  return [
    plainStep("placeTaps", 0, 0),
    ...chunks("forwardColumns", roundedToFour(problem.horizontal.taps), grains(problem, tiling).columns),
    ...chunks("takeSpectrum", tiling.rows / lanes, unitsPerCall(8 * lanes * tiling.columns, 1)),
  ];
}

export const fft: MethodPlan = {
  name: "fft",
  variant: "tiles",

  applicable(problem) {
    const { horizontal, vertical } = problem;
    if (tilingOf(problem) === undefined) return `A kernel of ${horizontal.taps}×${vertical.taps} taps leaves no room in the longest transform, 4096 points.`;
    const share = leastWeight(problem);
    if (share >= leastShare) return true;
    return `At the border as little as ${share.toExponential(1)} of the kernel's weight falls inside, and the noise of a transform would be divided by it.`;
  },

  work(problem) {
    const { horizontal, vertical, channels } = problem;
    const layout = frame(problem);
    const { tiling } = layout;
    const entered = tiling.strips * tiling.rows;
    const setupRows = tiling.rows * tiling.columns;
    return {
      setup: {
        setup: 1,
        setupTap: horizontal.taps * vertical.taps,
        setupByte: layout.arrangement.byteLength,
        columnPass: 5 * tiling.rows * roundedToFour(horizontal.taps) * tiling.pairs,
        rowPass: 7 * setupRows,
      },
      run: {
        ...frameCounts(problem, Math.min(entered, vertical.extended + (tiling.strips - 1) * (vertical.taps - 1)), callsOf(problem, layout)),
        planeSample: (entered * horizontal.extended + vertical.count * horizontal.count) * channels,
        columnPass: tiling.columnPasses,
        rowPass: tiling.rowPasses,
      },
      bytes: layout.arrangement.byteLength,
    };
  },

  errorBound: (problem) => outputBound(problem, error(problem)),

  phases: (problem) => 5 * tilingOf(problem)!.groups,

  arithmetic(problem) {
    const { rows, columns } = tilingOf(problem)!;
    return `float32 FFT, tiles of ${columns}×${rows}${roundable(problem) ? ", rounded to the exact integers" : ""}`;
  },

  program(problem) {
    const layout = frame(problem);
    const { tiling } = layout;
    const phases = runPhases(problem);
    const program = programOf(problem, layout, {
      fields(job) {
        job
          .pointer(field.TAPS, layout.taps)
          .pointer(field.ENTERED, layout.entered)
          .pointer(field.RESULT, layout.result)
          .pointer(field.COLUMN_PLAN, layout.columnPlan)
          .pointer(field.ROW_PLAN, layout.rowPlan)
          .pointer(field.PLANES, layout.planes)
          .integer(field.PLANE_STRIDE, tiling.planeStride)
          .integer(field.PLANE_BYTES, tiling.planeBytes)
          .integer(field.PAIRS, tiling.pairs)
          .integer(field.TILE_ROWS, tiling.rows)
          .integer(field.TILE_COLUMNS, tiling.columns)
          .integer(field.TILE_STEP, tiling.tileStep)
          .pointer(field.SPECTRUM, layout.spectrum)
          .pointer(field.ROW_SCRATCH, layout.scratch)
          .integer(field.STRIP_ROWS, tiling.stripRows)
          .float(field.SCALE, 1 / (tiling.rows * tiling.columns));
        if (!marksNeeded(problem)) return;
        job
          .pointer(field.MARKS, layout.marks)
          .integer(field.MARK_STRIDE, layout.markStride)
          .pointer(field.MARK_COUNTS, layout.markCounts)
          .pointer(field.MARK_ROW, layout.markRow);
      },
      tables: [{ offset: layout.taps, data: floatTaps(problem) }, ...transforms(problem)],
      setup: setupSteps(problem, tiling),
      steps: phases.flat(),
      error: error(problem),
      round: roundable(problem),
    });
    return withLanes(program, layout, startsOf(phases));
  },
};
