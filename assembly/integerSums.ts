import { addDifference16_u8, addDifference8_u16, integerAdd, integerSubtract, integersToFloats, laneBytes, loadLanes, multiply, splat, storeLanes } from "./lanes";
import {
  CHANNELS, CONSTANT_PIXELS, ENTERED, HALO, HALO_COUNT, KERNEL_COLUMNS, KERNEL_ROWS, OUTPUT_COLUMNS, RAW_CONSTANT, RAW_SAMPLES, RESULT,
  RESULT_FLOATS, ROW_MAP, ROW_TABLE, RUN_COLUMN, RUN_COUNT, RUN_SOURCE, SOURCE_KIND, STAGING_STRIDE, SUMS, TAPS,
} from "./record";
import { assertIntegerSums, assertSweep } from "./promises";
import { firstNewRow, leaveStaged, stagedRow } from "./sweep";

/*
 * Running sums of integer samples: exact in 32 bits (modulo 2³², the result being below), at a cost that does not depend on the window.
 *
 * Down first: one sum a source column moves along, adding the row that comes and subtracting the row that goes. The window's rows wait in
 * a ring as the samples they came as, a quarter of the size of sums, so that a large window still fits a second cache. Columns outside
 * the image are gathered from the sums, not from every row. Then one sum moves along the row.
 * A raw row is the staged columns and one pixel more: what stands outside by column beside a row inside the image. Its sum is the halo's constant.
 */

/** The raw row of an extended row: staged samples and the constant pixel, or the constant row. */
function takeRaw(job: usize, out: usize, row: i32, source: usize): void {
  const staged = load<usize>(job, STAGING_STRIDE);
  const pixelBytes = <usize>load<i32>(job, CHANNELS) << load<i32>(job, SOURCE_KIND);
  if (load<i32>(load<usize>(job, ROW_MAP) + (<usize>row << 2)) < 0) {
    memory.copy(out, load<usize>(job, RAW_CONSTANT), staged + pixelBytes);
    return;
  }
  memory.copy(out, source, staged);
  memory.copy(out + staged, load<usize>(job, CONSTANT_PIXELS) + pixelBytes, pixelBytes);
}

/** sums ← sums + incoming − outgoing, whole blocks of 16 bytes of samples. */
function slideDown<V>(job: usize, incoming: usize, outgoing: usize): void {
  let sums = load<usize>(job, SUMS);
  const samples = <usize>load<i32>(job, RAW_SAMPLES);
  if (load<i32>(job, SOURCE_KIND) == 0) {
    for (let k: usize = 0; k < samples; k += 16, sums += 64) addDifference16_u8<V>(sums, incoming + k, outgoing + k);
  } else {
    for (let k: usize = 0; k < samples; k += 8, sums += 32) addDifference8_u16<V>(sums, incoming + (k << 1), outgoing + (k << 1));
  }
}

/** Lays the sums of source columns out as an extended row. */
function extend(job: usize, out: usize): void {
  const pixelBytes = <usize>load<i32>(job, CHANNELS) << 2;
  const sums = load<usize>(job, SUMS);
  const constant = sums + ((load<usize>(job, STAGING_STRIDE) >> load<i32>(job, SOURCE_KIND)) << 2);
  memory.copy(
    out + <usize>load<i32>(job, RUN_COLUMN) * pixelBytes,
    sums + <usize>load<i32>(job, RUN_SOURCE) * pixelBytes,
    <usize>load<i32>(job, RUN_COUNT) * pixelBytes,
  );
  const end = load<usize>(job, HALO) + (<usize>load<i32>(job, HALO_COUNT) << 3);
  for (let entry = load<usize>(job, HALO); entry < end; entry += 8) {
    const from = load<i32>(entry, 4);
    const source = from >= 0 ? out + <usize>from * pixelBytes : from == -1 ? constant : sums + <usize>(-2 - from) * pixelBytes;
    const target = out + <usize>load<i32>(entry) * pixelBytes;
    for (let k: usize = 0; k < pixelBytes; k += 4) store<i32>(target + k, load<i32>(source + k));
  }
}

/** out[x] = Σᵢ row[x + i], 0 ≤ i < m. `row` holds 32-bit integers, C to a pixel. */
function slideAlong(out: usize, row: usize, columns: i32, m: i32, channels: i32): void {
  const pixel = <usize>channels << 2;
  const window = <usize>m * pixel;
  for (let c: usize = 0; c < pixel; c += 4) {
    let sum: i32 = 0;
    const end = out + <usize>columns * pixel;
    for (let p = row + c; p < row + window - pixel; p += pixel) sum += load<i32>(p);
    for (let q = out + c, p = row + c; q < end; q += pixel, p += pixel) {
      sum += load<i32>(p + window - pixel);
      store<i32>(q, sum);
      sum -= load<i32>(p);
    }
  }
}

/** The same for four channels at once. */
function slidePixels<V>(out: usize, row: usize, columns: i32, m: i32): void {
  if (!isVector<V>()) return slideAlong(out, row, columns, m, 4);
  const window = <usize>m << 4;
  let sum = splat<V>(0);
  for (let p = row; p < row + window - 16; p += 16) sum = integerAdd<V>(sum, loadLanes<V>(p));
  const end = out + (<usize>columns << 4);
  for (let q = out, p = row; q < end; q += 16, p += 16) {
    sum = integerAdd<V>(sum, loadLanes<V>(p + window - 16));
    storeLanes<V>(q, sum);
    sum = integerSubtract<V>(sum, loadLanes<V>(p));
  }
}

/** One result row: tap · (sums along the extended sums). */
function resultRow<V>(job: usize, y: usize): void {
  const channels = load<i32>(job, CHANNELS);
  const columns = load<i32>(job, OUTPUT_COLUMNS);
  const m = load<i32>(job, KERNEL_COLUMNS);
  const row = load<usize>(job, ENTERED);
  extend(job, row);
  if (channels == 4) slidePixels<V>(y, row, columns, m);
  else slideAlong(y, row, columns, m, channels);
  const tap = splat<V>(load<f32>(load<usize>(job, TAPS)));
  const end = y + (<usize>load<i32>(job, RESULT_FLOATS) << 2);
  for (let p = y; p < end; p += laneBytes<V>()) storeLanes<V>(p, multiply<V>(tap, integersToFloats<V>(loadLanes<V>(p))));
}

/**
 * Result rows from … to − 1, as in every sweep. The ring holds the window's raw rows and one to compose the next one in.
 *
 *     y[r, c] = tap · Σ_j Σ_i x[r + j, c + i],   0 ≤ j < n, 0 ≤ i < m, x integers
 *
 * Requires  m · n · full < 2³²; RAW_SAMPLES a multiple of 16, a pixel more than is staged   (promised by planning/runningSum)
 * Cost      about 8 operations a sample, whatever m and n; allocates nothing
 * Accuracy  sums exact; two roundings: to float, and times tap
 */
export function sweepIntegerSums<V>(job: usize, from: i32, to: i32): void {
  const n = load<i32>(job, KERNEL_ROWS);
  assertSweep(job, from, to, n + 1);
  assertIntegerSums(job);
  const ring = load<usize>(job, ROW_TABLE);
  const rawBytes = <usize>load<i32>(job, RAW_SAMPLES) << load<i32>(job, SOURCE_KIND);
  const y = load<usize>(job, RESULT);
  const first = firstNewRow(job, from);
  if (first == 0) {
    memory.fill(load<usize>(job, SUMS), 0, <usize>load<i32>(job, RAW_SAMPLES) << 2);
    for (let k = 0; k <= n; k++) memory.fill(load<usize>(ring + (<usize>k << 2)), 0, rawBytes);
  }
  for (let next = first; next < to + n - 1; next++) {
    const incoming = load<usize>(ring + (<usize>(next % (n + 1)) << 2));
    const outgoing = load<usize>(ring + (<usize>((next + 1) % (n + 1)) << 2));
    takeRaw(job, incoming, next, stagedRow(job, next, first));
    slideDown<V>(job, incoming, outgoing);
    if (next < n - 1) continue;
    resultRow<V>(job, y);
    leaveStaged<V>(job, y, next - n + 1, from);
  }
}
