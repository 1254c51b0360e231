import { pairBytes8 } from "../lanes";
import {
  ANCHOR_COLUMN, ANCHOR_ROW, CHANNELS, COLOURS, CONSTANT_PIXELS, ENTERED, ENTERED_STRIDE, EXTENDED_COLUMNS, HALO, HALO_COUNT, KEEP_ROW, KERNEL_ROWS,
  OUTPUT_COLUMNS, RING_ROWS, ROW_MAP, ROW_TABLE, RUN_COLUMN, RUN_COUNT, RUN_SOURCE,
} from "../record";
import { keptRow, outputRow, stagedRow } from "../sweep";

/*
 * Rows of bytes in pairs. One instruction multiplies two 16-bit samples by two 16-bit taps and adds them up, so two neighbouring rows are
 * interleaved once, as they enter, and each step of a sum takes two rows of taps.
 *
 *     pair row p    x[e][0] x[e+1][0]  x[e][1] x[e+1][1]  …      e = 2p − lead
 *
 * Two result rows (r even, and r + 1) use the same pairs, each with taps of its own; a tap is 0 where a pair holds a row that the result
 * does not reach. With an even number of kernel rows the pairs begin one row above the first (lead = 1), so that the last pair is always
 * complete: result rows r and r + 1 need pairs r/2 … r/2 + ⌊n/2⌋.
 */

// @ts-ignore: decorator
@inline
function copyPixel(out: usize, source: usize, channels: i32): void {
  if (channels == 4) store<u32>(out, load<u32>(source));
  else for (let c: usize = 0; c < <usize>channels; c++) store<u8>(out + c, load<u8>(source + c));
}

/** One row of the extended image as the bytes that it has: out[x] = source[column(x)]. */
export function enterBytes(job: usize, out: usize, row: i32, source: usize): void {
  const channels = load<i32>(job, CHANNELS);
  const constants = load<usize>(job, CONSTANT_PIXELS);
  if (load<i32>(load<usize>(job, ROW_MAP) + (<usize>row << 2)) < 0) {
    const end = out + <usize>(load<i32>(job, EXTENDED_COLUMNS) * channels);
    for (; out < end; out += channels) copyPixel(out, constants, channels);
    return;
  }
  memory.copy(out + <usize>(load<i32>(job, RUN_COLUMN) * channels), source + <usize>(load<i32>(job, RUN_SOURCE) * channels), <usize>(load<i32>(job, RUN_COUNT) * channels));
  const end = load<usize>(job, HALO) + (<usize>load<i32>(job, HALO_COUNT) << 3);
  for (let entry = load<usize>(job, HALO); entry < end; entry += 8) {
    const from = load<i32>(entry, 4);
    const pixel = from >= 0 ? out + <usize>(from * channels) : from == -1 ? constants + channels : source + <usize>((-2 - from) * channels);
    copyPixel(out + <usize>(load<i32>(entry) * channels), pixel, channels);
  }
}

// @ts-ignore: decorator
@inline
function lead(n: i32): i32 {
  return 1 - (n & 1);
}

/** Pairs of neighbours in the source, then the halo: the pixel of a pair row that stands for one outside is a pair itself. */
function pairStaged<V>(job: usize, out: usize, upper: usize, lower: usize): void {
  const channels = <usize>load<i32>(job, CHANNELS);
  const pixelBytes = channels << 2;
  const run = <usize>load<i32>(job, RUN_SOURCE) * channels;
  const samples = <usize>load<i32>(job, RUN_COUNT) * channels;
  const stretch = out + <usize>load<i32>(job, RUN_COLUMN) * pixelBytes;
  pairRun<V>(stretch, upper + run, lower + run, samples);
  const constants = load<usize>(job, CONSTANT_PIXELS) + channels;
  const end = load<usize>(job, HALO) + (<usize>load<i32>(job, HALO_COUNT) << 3);
  for (let entry = load<usize>(job, HALO); entry < end; entry += 8) {
    const target = out + <usize>load<i32>(entry) * pixelBytes;
    const from = load<i32>(entry, 4);
    if (from >= 0) memory.copy(target, out + <usize>from * pixelBytes, pixelBytes);
    else if (from == -1) pairPixel(target, constants, constants, channels);
    else pairPixel(target, upper + <usize>(-2 - from) * channels, lower + <usize>(-2 - from) * channels, channels);
  }
}

/** Whole steps of eight, then one by one: nothing beside the stretch is touched. */
function pairRun<V>(out: usize, a: usize, b: usize, samples: usize): void {
  let k: usize = 0;
  for (; k + 8 <= samples; k += 8) pairBytes8<V>(out + (k << 2), a + k, b + k);
  pairPixel(out + (k << 2), a + k, b + k, samples - k);
}

// @ts-ignore: decorator
@inline
function pairPixel(out: usize, a: usize, b: usize, samples: usize): void {
  for (let k: usize = 0; k < samples; k++) store<i32>(out + (k << 2), <i32>load<u8>(a + k) | (<i32>load<u8>(b + k) << 16));
}

// @ts-ignore: decorator
@inline
function isStaged(job: usize, row: i32): bool {
  return load<i32>(load<usize>(job, ROW_MAP) + (<usize>row << 2)) >= 0;
}

/**
 * Takes an extended row in; where it completes a pair, or nothing follows it in this call, the pair is laid into the ring. Pairs are laid
 * straight from the staged rows but where a constant stands for one of them or the upper one came in the call before: those wait as bytes.
 */
export function enterPaired<V>(job: usize, row: i32, first: i32, last: bool): void {
  const place = row + lead(load<i32>(job, KERNEL_ROWS));
  const completes = (place & 1) == 1;
  if (!completes && !last) return;
  const out = load<usize>(load<usize>(job, ROW_TABLE) + (<usize>((place >> 1) % load<i32>(job, RING_ROWS)) << 2));
  const top = row - 1;
  if (completes && top >= first && isStaged(job, row) && isStaged(job, top)) return pairStaged<V>(job, out, stagedRow(job, top, first), stagedRow(job, row, first));
  const upper = load<usize>(job, ENTERED);
  const lower = upper + load<usize>(job, ENTERED_STRIDE);
  if (completes && top >= first) enterBytes(job, upper, top, stagedRow(job, top, first));
  enterBytes(job, completes ? lower : upper, row, stagedRow(job, row, first));
  pairRun<V>(out, upper, lower, <usize>(load<i32>(job, EXTENDED_COLUMNS) * load<i32>(job, CHANNELS)));
}

/** Pointer table of the pairs that result rows `row` (even) and row + 1 need. */
// @ts-ignore: decorator
@inline
export function pairsFrom(job: usize, row: i32): usize {
  return load<usize>(job, ROW_TABLE) + (<usize>((row >> 1) % load<i32>(job, RING_ROWS)) << 2);
}

/** Puts the alpha of the bordered image at the same place into a result row. */
export function keepAlpha(job: usize, row: i32, from: i32): void {
  const channels = <usize>load<i32>(job, CHANNELS);
  const colours = <usize>load<i32>(job, COLOURS);
  const kept = load<usize>(job, KEEP_ROW);
  enterBytes(job, kept, row + load<i32>(job, ANCHOR_ROW), keptRow(job, row, from));
  let alpha = kept + <usize>load<i32>(job, ANCHOR_COLUMN) * channels + colours;
  let out = outputRow(job, row, from) + colours;
  for (const end = out + <usize>load<i32>(job, OUTPUT_COLUMNS) * channels; out < end; out += channels, alpha += channels) store<u8>(out, load<u8>(alpha));
}
