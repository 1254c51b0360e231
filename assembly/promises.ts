/**
 * What routines may rely on, as asserts at their start. Release builds are compiled without asserts: there each function below is empty
 * and its calls vanish. In the debug build a broken promise traps before anything is written.
 */
import {
  ALPHA, ALPHA_BOUND, CHANNELS, COLOURS, COLUMN_PHASE, COLUMN_PLAN, CURVE, DECODE, DIVISOR, ENTERED, ENTERED_STRIDE, EXTENDED_COLUMNS, EXTENDED_ROWS, GAIN,
  HALO, HALO_COUNT, KERNEL_COLUMNS, KERNEL_ROWS, MARKS, MARK_STRIDE, OFFSET, OPAQUE_SUM, OUTPUT_COLUMNS, OUTPUT_KIND, OUTPUT_ROWS, OUTPUT_STRIDE,
  PAIRS, PLANES, PLANE_BYTES, PLANE_STRIDE, PREMULTIPLY, RAW_CONSTANT, RAW_SAMPLES, RESULT, RESULT_FLOATS, RESULT_STRIDE, RING_ROWS, ROW_MAP,
  ROW_PHASE, ROW_PLAN, ROW_SCRATCH, ROW_TABLE, RUN_COLUMN, RUN_COUNT, RUN_SOURCE, SOURCE_FULL, SOURCE_KIND, SPECTRUM, STAGING_STRIDE, STRIP_ROWS,
  SUMS, SUM_BIAS, TERMS, TILE_COLUMNS, TILE_ROWS, TILE_STEP, WEIGHTS, WEIGHT_COLUMNS, WEIGHT_ROWS, WEIGHT_STRIDE, WORKING_FULL,
} from "./record";

/** A block of vectors: not at 0, on a multiple of 16 bytes. */
function isAligned(pointer: usize): bool {
  return pointer != 0 && (pointer & 15) == 0;
}

function isInMemory(pointer: usize, bytes: usize): bool {
  return pointer != 0 && <u64>pointer + bytes <= (<u64>memory.size()) << 16;
}

/** No byte belongs to both blocks. */
function areApart(a: usize, aBytes: usize, b: usize, bBytes: usize): bool {
  return a + aBytes <= b || b + bBytes <= a;
}

function isFlag(value: i32): bool {
  return value == 0 || value == 1;
}

function isFinite32(value: f32): bool {
  return value - value == 0;
}

/** Bytes of `pixels` source pixels. */
function sourceBytes(job: usize, pixels: i32): usize {
  return (<usize>pixels * load<i32>(job, CHANNELS)) << load<i32>(job, SOURCE_KIND);
}

/** The fields that enter reads: types in their ranges, colours before alpha, a curve where integers are decoded. */
export function assertSource(job: usize): void {
  if (ASC_NO_ASSERT) return;
  const kind = load<i32>(job, SOURCE_KIND), channels = load<i32>(job, CHANNELS), colours = load<i32>(job, COLOURS);
  assert(isAligned(job));
  assert(kind >= 0 && kind <= 2);
  assert(channels >= 1 && channels <= 4);
  assert(colours == channels || colours == channels - 1);
  assert(isFlag(load<i32>(job, DECODE)) && isFlag(load<i32>(job, PREMULTIPLY)));
  assert(!load<i32>(job, PREMULTIPLY) || colours == channels - 1);
  assert(!load<i32>(job, DECODE) || kind == 2 || load<usize>(job, CURVE) != 0);
  assert(load<f32>(job, SOURCE_FULL) > 0);
  assert(load<f32>(job, WORKING_FULL) == (load<i32>(job, DECODE) ? <f32>1 : load<f32>(job, SOURCE_FULL)));
}

/** Stretch and halo make up an extended row, each column once, and what they read is staged or already entered. */
function assertColumns(job: usize): void {
  const extended = load<i32>(job, EXTENDED_COLUMNS), staged = load<usize>(job, STAGING_STRIDE);
  const first = load<i32>(job, RUN_COLUMN), count = load<i32>(job, RUN_COUNT), source = load<i32>(job, RUN_SOURCE);
  assert(extended >= 1 && count >= 0 && first >= 0 && first + count <= extended && source >= 0);
  assert(sourceBytes(job, source + count) <= staged);
  assert(count + load<i32>(job, HALO_COUNT) == extended);
  const halo = load<usize>(job, HALO);
  for (let k = 0, before = -1; k < load<i32>(job, HALO_COUNT); k++) {
    const column = load<i32>(halo + (<usize>k << 3)), from = load<i32>(halo + (<usize>k << 3), 4);
    assert(column > before && column < extended);
    assert(column < first || column >= first + count);
    assert(from < 0 || (from >= first && from < first + count));
    assert(from >= -1 || sourceBytes(job, -1 - from) <= staged);
    before = column;
  }
}

export function assertEnterRow(job: usize, out: usize, row: i32, source: usize): void {
  if (ASC_NO_ASSERT) return;
  assertSource(job);
  assert(row >= 0 && row < load<i32>(job, EXTENDED_ROWS));
  const bytes = <usize>(load<i32>(job, EXTENDED_COLUMNS) * load<i32>(job, CHANNELS)) << 2;
  assert(isAligned(out) && isInMemory(out, bytes));
  if (load<i32>(load<usize>(job, ROW_MAP) + (<usize>row << 2)) < 0) return;
  assertColumns(job);
  const staged = load<usize>(job, STAGING_STRIDE);
  assert(isInMemory(source, staged) && areApart(out, bytes, source, staged));
}

/** Patterns of weights that exist. */
function assertWeights(job: usize, row: i32): void {
  assert(load<i32>(load<usize>(job, WEIGHT_ROWS) + (<usize>row << 2)) >= 0);
  for (let c = 0; c < load<i32>(job, OUTPUT_COLUMNS); c++) {
    const pattern = load<i32>(load<usize>(job, WEIGHT_COLUMNS) + (<usize>c << 2));
    assert(pattern >= 0 && pattern < load<i32>(job, WEIGHT_STRIDE));
  }
}

export function assertLeaveRow(job: usize, y: usize, row: i32, out: usize): void {
  if (ASC_NO_ASSERT) return;
  assertSource(job);
  const kind = load<i32>(job, OUTPUT_KIND), alpha = load<i32>(job, ALPHA), columns = load<i32>(job, OUTPUT_COLUMNS);
  const count = columns * load<i32>(job, CHANNELS), staged = load<usize>(job, OUTPUT_STRIDE);
  assert(kind >= 0 && kind <= 2);
  assert(columns >= 1 && row >= 0 && row < load<i32>(job, OUTPUT_ROWS));
  assert(<usize>count << kind <= staged);
  assert(isAligned(y) && isInMemory(y, <usize>count << 2) && isInMemory(out, staged));
  assert((out & ((1 << kind) - 1)) == 0);
  assert(areApart(y, <usize>count << 2, out, staged));
  assert(isFinite32(load<f32>(job, GAIN)) && isFinite32(load<f32>(job, OFFSET)));
  assert(alpha >= 0 && alpha <= 3);
  assert(alpha == 0 || load<i32>(job, COLOURS) == load<i32>(job, CHANNELS) - 1);
  assert(alpha != 1 || (load<f32>(job, OPAQUE_SUM) != 0 && load<f32>(job, ALPHA_BOUND) >= 0));
  if (load<usize>(job, WEIGHTS)) assertWeights(job, row);
}

/** Pointers, counts and rows of a correlation (m = 1 for columns): nothing is written that is still to be read. */
export function assertCorrelation(out0: usize, out1: usize, rows: usize, taps: usize, n: i32, m: i32, step: usize, count: i32): void {
  if (ASC_NO_ASSERT) return;
  assert(n >= 1 && m >= 1 && ((count >= 4 && (count & 3) == 0) || count >= 16));
  assert(m == 1 || (step >= 4 && (step & 3) == 0));
  const bytes = <usize>count << 2, read = bytes + <usize>(m - 1) * step;
  assert((out0 & 3) == 0 && (out1 & 3) == 0 && isInMemory(out0, bytes) && isInMemory(out1, bytes) && areApart(out0, bytes, out1, bytes));
  assert((taps & 3) == 0 && isInMemory(taps, <usize>(n * m) << 2));
  for (let k = 0; k <= n; k++) {
    const row = load<usize>(rows + (<usize>k << 2));
    assert(isAligned(row) && isInMemory(row, read));
    assert(areApart(out0, bytes, row, read) && areApart(out1, bytes, row, read));
  }
}

/** The same for one row and one vector of taps. */
export function assertRowPass(out: usize, row: usize, taps: usize, m: i32, step: usize, count: i32): void {
  if (ASC_NO_ASSERT) return;
  assert(m >= 1 && count >= 4 && (count & 3) == 0);
  assert(m == 1 || (step >= 4 && (step & 3) == 0));
  const bytes = <usize>count << 2, read = bytes + <usize>(m - 1) * step;
  assert(isAligned(out) && isInMemory(out, bytes) && isAligned(row) && isInMemory(row, read) && areApart(out, bytes, row, read));
  assert((taps & 3) == 0 && isInMemory(taps, <usize>m << 2));
}

/** Shapes that belong together: valid results of the extended image, rounded up to whole vectors. */
function assertShapes(job: usize): void {
  const m = load<i32>(job, KERNEL_COLUMNS), n = load<i32>(job, KERNEL_ROWS);
  assert(m >= 1 && n >= 1);
  assert(load<i32>(job, EXTENDED_COLUMNS) == load<i32>(job, OUTPUT_COLUMNS) + m - 1);
  assert(load<i32>(job, EXTENDED_ROWS) == load<i32>(job, OUTPUT_ROWS) + n - 1);
}

/** A sweep's rows lie in the image, and its ring holds `ringRows` rows at least, listed twice over. */
export function assertSweep(job: usize, from: i32, to: i32, ringRows: i32): void {
  if (ASC_NO_ASSERT) return;
  assertSource(job);
  assertShapes(job);
  assert(from > -load<i32>(job, KERNEL_ROWS) && from < to && to <= load<i32>(job, OUTPUT_ROWS));
  const floats = load<i32>(job, RESULT_FLOATS), stride = load<usize>(job, RESULT_STRIDE);
  assert((floats & 3) == 0 && floats - load<i32>(job, OUTPUT_COLUMNS) * load<i32>(job, CHANNELS) < 4);
  assert(isAligned(load<usize>(job, RESULT)) && (stride & 15) == 0 && stride >= <usize>floats << 2);
  const rows = load<i32>(job, RING_ROWS), table = load<usize>(job, ROW_TABLE);
  assert(rows >= ringRows);
  for (let k: usize = 0; k < <usize>rows; k++) {
    const row = load<usize>(table + (k << 2));
    assert(isAligned(row) && load<usize>(table + ((k + rows) << 2)) == row);
  }
}

/** At least one term, and an entered row. */
export function assertTerms(job: usize): void {
  if (ASC_NO_ASSERT) return;
  assert(load<i32>(job, TERMS) >= 1 && isAligned(load<usize>(job, ENTERED)));
}

/** A ring of exactly the window's rows, and places inside a block. */
export function assertRunningSum(job: usize): void {
  if (ASC_NO_ASSERT) return;
  const m = load<i32>(job, KERNEL_COLUMNS), n = load<i32>(job, KERNEL_ROWS);
  assert(load<i32>(job, RING_ROWS) == n && isAligned(load<usize>(job, SUMS)));
  assert(load<i32>(job, COLUMN_PHASE) >= 0 && load<i32>(job, COLUMN_PHASE) < m);
  assert(load<i32>(job, ROW_PHASE) >= 0 && load<i32>(job, ROW_PHASE) < n);
  assert(isAligned(load<usize>(job, ENTERED)) && (load<i32>(job, ENTERED_STRIDE) & 15) == 0);
}

/** Integer samples whose sums stay below 2³², raw rows with room for the constant pixel, one ring row more than the window has. */
export function assertIntegerSums(job: usize): void {
  if (ASC_NO_ASSERT) return;
  const kind = load<i32>(job, SOURCE_KIND), taps = <f64>load<i32>(job, KERNEL_COLUMNS) * load<i32>(job, KERNEL_ROWS);
  const samples = load<i32>(job, RAW_SAMPLES), staged = load<i32>(job, STAGING_STRIDE) >> kind;
  assert(kind <= 1 && !load<i32>(job, DECODE) && !load<i32>(job, PREMULTIPLY));
  assert(taps * load<f32>(job, SOURCE_FULL) < 4294967296);
  assert(load<i32>(job, RING_ROWS) == load<i32>(job, KERNEL_ROWS) + 1);
  assert((samples & 15) == 0 && samples >= staged + load<i32>(job, CHANNELS) && load<usize>(job, RAW_CONSTANT) != 0);
  assert(isAligned(load<usize>(job, SUMS)) && isAligned(load<usize>(job, ENTERED)));
  assertColumns(job);
}

/** Bytes to bytes, a ring of the window's rows, and sums that stay exact: in 16-bit columns and floats, or in 32 bits with a divisor. */
export function assertByteSums(job: usize): void {
  if (ASC_NO_ASSERT) return;
  const n = load<i32>(job, KERNEL_ROWS), divisor = load<i32>(job, DIVISOR);
  const most = <f64>load<i32>(job, KERNEL_COLUMNS) * n * 255 + load<i32>(job, SUM_BIAS);
  assert(load<i32>(job, SOURCE_KIND) == 0 && load<i32>(job, OUTPUT_KIND) == 0 && !load<i32>(job, DECODE) && !load<i32>(job, PREMULTIPLY));
  assert(load<i32>(job, RING_ROWS) == n && load<i32>(job, SUM_BIAS) >= 0);
  assert(divisor ? most < 2147483648 : n <= 128 && most < 16777216);
  assert(load<usize>(job, RAW_CONSTANT) != 0 && isAligned(load<usize>(job, ENTERED)) && load<usize>(job, SUMS) != 0);
  assertColumns(job);
}

/** Radices 2 … 5 that multiply to `points`, spans in descending order, turns for each pass. */
export function assertPlan(plan: usize, points: i32): void {
  if (ASC_NO_ASSERT) return;
  const passes = load<i32>(plan);
  assert(passes >= 1);
  let span = points;
  for (let k = 0; k < passes; k++) {
    const at = plan + 4 + <usize>(12 * k), radix = load<i32>(at);
    assert(radix >= 2 && radix <= 5);
    assert(load<i32>(at, 4) == span && span % radix == 0);
    assert(isInMemory(load<usize>(at, 8), <usize>(span / radix * (radix - 1)) << 3));
    span /= radix;
  }
  assert(span == 1);
}

/** The points of a transform follow from its plan; they lie on vectors, imaginary parts apart from the real ones. */
export function assertTransform(plan: usize, base: usize, stride: usize, apart: usize, vectors: i32, vector: usize): void {
  if (ASC_NO_ASSERT) return;
  const points = load<i32>(plan, 8), bytes = <usize>vectors * vector;
  assertPlan(plan, points);
  assert(vectors >= 1 && stride >= bytes && stride % vector == 0 && apart % vector == 0 && base % vector == 0);
  assert(isInMemory(base, apart + <usize>(points - 1) * stride + bytes));
  // Planes one after the other, or rows of re and im in turn: no real part where an imaginary one lies.
  assert(apart >= <usize>(points - 1) * stride + bytes);
}

/** Planes, tiles and transforms that belong together. */
export function assertTiles(job: usize): void {
  if (ASC_NO_ASSERT) return;
  assertSource(job);
  assertShapes(job);
  const rows = load<i32>(job, TILE_ROWS), columns = load<i32>(job, TILE_COLUMNS), step = load<i32>(job, TILE_STEP);
  const channels = load<i32>(job, CHANNELS), stride = load<usize>(job, PLANE_STRIDE), strip = load<i32>(job, STRIP_ROWS);
  assert((rows & 3) == 0 && (columns & 3) == 0);
  assertPlan(load<usize>(job, COLUMN_PLAN), rows);
  assertPlan(load<usize>(job, ROW_PLAN), columns);
  assert(strip >= 1 && strip <= rows - load<i32>(job, KERNEL_ROWS) + 1);
  assert(step >= 4 && (step & 3) == 0 && step <= columns - load<i32>(job, KERNEL_COLUMNS) + 1);
  assert(load<i32>(job, PAIRS) == (channels & 1 ? channels : channels >> 1));
  assert((stride & 15) == 0 && stride >= <usize>max<i32>(columns, (load<i32>(job, EXTENDED_COLUMNS) + 3) & ~3) << 2);
  assert(load<usize>(job, PLANE_BYTES) >= <usize>rows * stride);
  const planes = load<usize>(job, PLANES);
  assert(isAligned(planes) && isInMemory(planes, <usize>(2 * load<i32>(job, PAIRS)) * load<usize>(job, PLANE_BYTES)));
  assert(isAligned(load<usize>(job, SPECTRUM)) && isAligned(load<usize>(job, ROW_SCRATCH)));
  assert(!load<usize>(job, MARKS) || (load<i32>(job, MARK_STRIDE) % 8 == 0 && 8 * load<i32>(job, MARK_STRIDE) >= load<i32>(job, EXTENDED_COLUMNS) * channels));
}

/** Rows from … to − 1 of a tile. */
export function assertEnterStrip(job: usize, from: i32, to: i32, strip: i32): void {
  if (ASC_NO_ASSERT) return;
  assertTiles(job);
  assert(from >= 0 && from <= to && to <= load<i32>(job, TILE_ROWS) && strip >= 0);
}

/** Rows from … to − 1 of the results of a strip. */
export function assertLeaveStrip(job: usize, from: i32, to: i32, strip: i32): void {
  if (ASC_NO_ASSERT) return;
  assertTiles(job);
  assert(from >= 0 && from <= to && to <= load<i32>(job, STRIP_ROWS) && strip >= 0);
}

/** Floats from … to − 1 of a row of the planes, in fours. */
export function assertFloats(job: usize, from: i32, to: i32): void {
  if (ASC_NO_ASSERT) return;
  assertTiles(job);
  assert(from >= 0 && from <= to && ((from | to) & 3) == 0 && <usize>to << 2 <= load<usize>(job, PLANE_STRIDE));
}

/** Groups from … to − 1 of `groupRows` rows of a tile. */
export function assertGroups(job: usize, from: i32, to: i32, groupRows: i32): void {
  if (ASC_NO_ASSERT) return;
  assertTiles(job);
  assert(from >= 0 && from <= to && to * groupRows <= load<i32>(job, TILE_ROWS));
  const plan = load<usize>(job, ROW_PLAN);
  assert(load<i32>(plan + 4 + 12 * <usize>(load<i32>(plan) - 1)) == 4);
}
