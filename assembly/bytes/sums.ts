import {
  copySixteen, fourDifferences, fourSums, lastOfEach, lowerWords, prefixSums, quotientOf, slideOne, slideSixteen, splatInteger, storeQuotients, sumOf, upperWords,
  wordDifferences,
} from "../lanes";
import { assertByteSums, assertSweep } from "../promises";
import {
  ALPHA, CHANNELS, CONSTANT_PIXELS, DIVISOR, ENTERED, HALO, HALO_COUNT, KERNEL_COLUMNS, KERNEL_ROWS, OUTPUT_COLUMNS, RAW_CONSTANT, RESULT, ROW_MAP, ROW_TABLE,
  RUN_COLUMN, RUN_COUNT, RUN_SOURCE, SCALE, SOURCE_ROWS, STAGING_STRIDE, SUMS, SUM_BIAS,
} from "../record";
import { firstNewRow, outputRow, stagedRow } from "../sweep";
import { keepAlpha } from "./pairs";

/*
 * Running sums from bytes to bytes. One sum a column moves down: the row that comes is added, the row that goes is subtracted. One sum a
 * channel moves along them, and each of its values leaves at once as the byte that it stands for: no row of floats lies between.
 *
 * T is how wide column sums are: u16 as long as two of them differ by less than 2¹⁵ (n ≤ 128), which takes eight in a vector, else i32.
 * They lie as an extended row at ENTERED, halo included; before it a pixel of zeros, which the window leaves behind at its first step, and
 * 32 bytes before, the sum of what stands outside by column.
 */

/** Where rows that leave the window are: in the source, or in a ring of n rows that takes each row as the one n before it leaves. */
// @ts-ignore: decorator
@inline
function ringRow(job: usize, row: i32, n: i32): usize {
  return load<usize>(load<usize>(job, ROW_TABLE) + (<usize>(row % n) << 2));
}

// @ts-ignore: decorator
@inline
function isConstant(job: usize, row: i32): bool {
  return load<i32>(load<usize>(job, ROW_MAP) + (<usize>row << 2)) < 0;
}

/** sums ← sums + incoming − outgoing; where `keep`, incoming takes outgoing's place. Nothing past either row is touched. */
// @ts-ignore: decorator
@inline
function slideDown<V, T>(sums: usize, incoming: usize, outgoing: usize, samples: usize, keep: bool): void {
  let k: usize = 0;
  for (; k + 16 <= samples; k += 16, sums += 16 * sizeof<T>()) {
    slideSixteen<V, T>(sums, incoming + k, outgoing + k);
    if (keep) copySixteen(outgoing + k, incoming + k);
  }
  for (; k < samples; k++, sums += sizeof<T>()) {
    slideOne<T>(sums, incoming + k, outgoing + k);
    if (keep) store<u8>(outgoing + k, load<u8>(incoming + k));
  }
}

/** The window's sums after extended row `row` has come, and row − n gone. */
function takeRow<V, T>(job: usize, row: i32, first: i32, n: i32): void {
  const samples = load<usize>(job, STAGING_STRIDE);
  const sums = load<usize>(job, SUMS);
  const incoming = isConstant(job, row) ? load<usize>(job, RAW_CONSTANT) : stagedRow(job, row, first);
  if (!load<usize>(job, SOURCE_ROWS) || row < n) {
    slideDown<V, T>(sums, incoming, ringRow(job, row, n), samples, true);
  } else {
    const outgoing = isConstant(job, row - n) ? load<usize>(job, RAW_CONSTANT) : stagedRow(job, row - n, first);
    slideDown<V, T>(sums, incoming, outgoing, samples, false);
  }
  slideConstant<T>(job, row, n);
}

/** The same for what stands outside by column: its own constant beside a row inside the image, else the one outside by row. */
function slideConstant<T>(job: usize, row: i32, n: i32): void {
  const channels = <usize>load<i32>(job, CHANNELS);
  const pixels = load<usize>(job, CONSTANT_PIXELS);
  const sum = load<usize>(job, ENTERED) - 32;
  const incoming = isConstant(job, row) ? pixels : pixels + channels;
  const outgoing = row >= n && isConstant(job, row - n) ? pixels : pixels + channels;
  for (let c: usize = 0; c < channels; c++) {
    const gone = row < n ? 0 : <i32>load<u8>(outgoing + c);
    store<T>(sum + c * sizeof<T>(), <T>(<i32>load<T>(sum + c * sizeof<T>()) + <i32>load<u8>(incoming + c) - gone));
  }
}

/** Completes the extended row of column sums: the stretch, where sums lie elsewhere, then the halo. */
function extend<T>(job: usize): void {
  const pixelBytes = <usize>load<i32>(job, CHANNELS) * sizeof<T>();
  const out = load<usize>(job, ENTERED);
  const sums = load<usize>(job, SUMS);
  const stretch = out + <usize>load<i32>(job, RUN_COLUMN) * pixelBytes;
  const run = sums + <usize>load<i32>(job, RUN_SOURCE) * pixelBytes;
  if (stretch != run) memory.copy(stretch, run, <usize>load<i32>(job, RUN_COUNT) * pixelBytes);
  const end = load<usize>(job, HALO) + (<usize>load<i32>(job, HALO_COUNT) << 3);
  for (let entry = load<usize>(job, HALO); entry < end; entry += 8) {
    const from = load<i32>(entry, 4);
    const source = from >= 0 ? out + <usize>from * pixelBytes : from == -1 ? out - 32 : sums + <usize>(-2 - from) * pixelBytes;
    const target = out + <usize>load<i32>(entry) * pixelBytes;
    for (let k: usize = 0; k < pixelBytes; k += sizeof<T>()) store<T>(target + k, load<T>(source + k));
  }
}

/** Three or four channels: a pixel is a vector. Four pixels a step; with three channels the fourth lane is the next pixel's first channel. */
// @ts-ignore: decorator
@inline
function alongPixels<V, T>(job: usize, out: usize, row: usize, count: i32, divisor: i32, channels: usize): void {
  const pixel = channels * sizeof<T>();
  const scale = load<f32>(job, SCALE);
  const scratch = load<usize>(job, RESULT);
  const step = <i32>channels << 2;
  let sum = splatInteger<V>(load<i32>(job, SUM_BIAS));
  let ahead = row;
  for (const end = row + <usize>(load<i32>(job, KERNEL_COLUMNS) - 1) * pixel; ahead < end; ahead += pixel) sum = sumOf<V>(sum, fourSums<V, T>(ahead));
  let behind = row - pixel;
  for (let left = count; left > 0; left -= step, out += step, ahead += 4 * pixel, behind += 4 * pixel) {
    let d0: V, d1: V, d2: V, d3: V;
    if (sizeof<T>() == 2 && channels == 4) {
      const d01 = wordDifferences<V>(ahead, behind), d23 = wordDifferences<V>(ahead + 16, behind + 16);
      d0 = lowerWords<V>(d01), d1 = upperWords<V>(d01), d2 = lowerWords<V>(d23), d3 = upperWords<V>(d23);
    } else {
      d0 = fourDifferences<V, T>(ahead, behind), d1 = fourDifferences<V, T>(ahead + pixel, behind + pixel);
      d2 = fourDifferences<V, T>(ahead + 2 * pixel, behind + 2 * pixel), d3 = fourDifferences<V, T>(ahead + 3 * pixel, behind + 3 * pixel);
    }
    const s0 = sumOf<V>(sum, d0);
    const s1 = sumOf<V>(sum, sumOf<V>(d0, d1));
    const s2 = sumOf<V>(s1, d2);
    sum = sumOf<V>(s1, sumOf<V>(d2, d3));
    storeQuotients<V>(left < 16 ? scratch : out, s0, s1, s2, sum, scale, divisor, channels == 3);
    if (left < 16) memory.copy(out, scratch, min<i32>(left, step));
  }
}

/** One or two channels: several pixels to a vector, and sums of differences within it. Sixteen samples a step. */
// @ts-ignore: decorator
@inline
function alongVectors<V, T>(job: usize, out: usize, row: usize, count: i32, divisor: i32, channels: i32): void {
  const pixel = <usize>channels * sizeof<T>();
  const vector = 4 * sizeof<T>();
  const scale = load<f32>(job, SCALE);
  const scratch = load<usize>(job, RESULT);
  let sum = firstSums<V, T>(job, row, channels);
  let ahead = row + <usize>(load<i32>(job, KERNEL_COLUMNS) - 1) * pixel;
  let behind = row - pixel;
  for (let left = count; left > 0; left -= 16, out += 16, ahead += 4 * vector, behind += 4 * vector) {
    let d0: V, d1: V, d2: V, d3: V;
    if (sizeof<T>() == 2) {
      const d01 = wordDifferences<V>(ahead, behind), d23 = wordDifferences<V>(ahead + 16, behind + 16);
      d0 = lowerWords<V>(d01), d1 = upperWords<V>(d01), d2 = lowerWords<V>(d23), d3 = upperWords<V>(d23);
    } else {
      d0 = fourDifferences<V, T>(ahead, behind), d1 = fourDifferences<V, T>(ahead + vector, behind + vector);
      d2 = fourDifferences<V, T>(ahead + 2 * vector, behind + 2 * vector), d3 = fourDifferences<V, T>(ahead + 3 * vector, behind + 3 * vector);
    }
    d0 = prefixSums<V>(d0, channels), d1 = prefixSums<V>(d1, channels), d2 = prefixSums<V>(d2, channels), d3 = prefixSums<V>(d3, channels);
    const s1 = sumOf<V>(sum, lastOfEach<V>(d0, channels));
    const s2 = sumOf<V>(s1, lastOfEach<V>(d1, channels));
    const s3 = sumOf<V>(s2, lastOfEach<V>(d2, channels));
    storeQuotients<V>(left < 16 ? scratch : out, sumOf<V>(sum, d0), sumOf<V>(s1, d1), sumOf<V>(s2, d2), sumOf<V>(s3, d3), scale, divisor, false);
    if (left < 16) memory.copy(out, scratch, left);
    sum = sumOf<V>(s3, lastOfEach<V>(d3, channels));
  }
}

/** The bias and the first m − 1 columns of each channel, in all lanes of the channel. */
// @ts-ignore: decorator
@inline
function firstSums<V, T>(job: usize, row: usize, channels: i32): V {
  const scratch = load<usize>(job, RESULT);
  for (let c = 0; c < channels; c++) {
    const sum = firstSum<T>(job, row + <usize>c * sizeof<T>(), channels);
    for (let lane = c; lane < 4; lane += channels) store<i32>(scratch + (<usize>lane << 2), sum);
  }
  return fourSums<V, i32>(scratch);
}

function firstSum<T>(job: usize, row: usize, channels: i32): i32 {
  const pixel = <usize>channels * sizeof<T>();
  let sum = load<i32>(job, SUM_BIAS);
  for (const end = row + <usize>(load<i32>(job, KERNEL_COLUMNS) - 1) * pixel; row < end; row += pixel) sum += <i32>load<T>(row);
  return sum;
}

/** The definition of the two above, sample by sample. */
function alongSamples<T>(job: usize, out: usize, row: usize, count: i32, divisor: i32, channels: i32): void {
  const pixel = <usize>channels * sizeof<T>();
  const scale = load<f32>(job, SCALE);
  const end = out + count;
  for (let c: usize = 0; c < <usize>channels; c++) {
    let behind = row + c * sizeof<T>();
    let ahead = behind + <usize>(load<i32>(job, KERNEL_COLUMNS) - 1) * pixel;
    let sum = firstSum<T>(job, behind, channels);
    for (let q = out + c; q < end; q += channels, ahead += pixel, behind += pixel) {
      sum += <i32>load<T>(ahead);
      store<u8>(q, quotientOf(sum, scale, divisor));
      sum -= <i32>load<T>(behind);
    }
  }
}

/** One result row. Wide sums divide with a remainder, others are scaled alone. */
function along<V, T>(job: usize, out: usize): void {
  const channels = load<i32>(job, CHANNELS);
  const count = load<i32>(job, OUTPUT_COLUMNS) * channels;
  const row = load<usize>(job, ENTERED);
  const divisor = sizeof<T>() == 2 ? 0 : load<i32>(job, DIVISOR);
  if (!isVector<V>()) alongSamples<T>(job, out, row, count, divisor, channels);
  else if (channels == 4) alongPixels<V, T>(job, out, row, count, divisor, 4);
  else if (channels == 3) alongPixels<V, T>(job, out, row, count, divisor, 3);
  else if (channels == 2) alongVectors<V, T>(job, out, row, count, divisor, 2);
  else alongVectors<V, T>(job, out, row, count, divisor, 1);
}

/** A window without rows: sums of nothing, rows of nothing in the ring. */
function clear<T>(job: usize, n: i32): void {
  const samples = load<usize>(job, STAGING_STRIDE);
  memory.fill(load<usize>(job, SUMS), 0, samples * sizeof<T>());
  memory.fill(load<usize>(job, ENTERED) - 32, 0, 32);
  for (let k = 0; k < n; k++) memory.fill(ringRow(job, k, n), 0, samples);
}

function sweepOf<V, T>(job: usize, from: i32, to: i32): void {
  const n = load<i32>(job, KERNEL_ROWS);
  const first = firstNewRow(job, from);
  if (first == 0) clear<T>(job, n);
  for (let next = first; next < to + n - 1; next++) {
    takeRow<V, T>(job, next, first, n);
    const row = next - n + 1;
    if (row < 0) continue;
    extend<T>(job);
    along<V, T>(job, outputRow(job, row, from));
    if (load<i32>(job, ALPHA) == 3) keepAlpha(job, row, from);
  }
}

/**
 * Running sums, bytes to bytes: result rows from … to − 1, as in every sweep.
 *
 *     out[r, c] = ⌊(bias + S) ÷ divisor⌋ where there is a divisor, else the integer nearest to scale · (bias + S)
 *     S = Σ_j Σ_i x[r + j, c + i],   0 ≤ j < n, 0 ≤ i < m
 *
 * Requires  results within 0 … 255, bias + S below 2³¹ (2²⁴ without a divisor); n ≤ 128 without a divisor   (promised by planning/byteSums)
 * Cost      about 3 operations a sample, whatever m and n; allocates nothing
 * Accuracy  sums exact; the nearest integer is the right one for every S (proved while planning)
 */
export function sweepByteSums<V>(job: usize, from: i32, to: i32): void {
  assertSweep(job, from, to, load<i32>(job, KERNEL_ROWS));
  assertByteSums(job);
  if (load<i32>(job, DIVISOR)) sweepOf<V, i32>(job, from, to);
  else sweepOf<V, u16>(job, from, to);
}
