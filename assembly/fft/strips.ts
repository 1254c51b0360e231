import { enterRow } from "../enter";
import { anyNonFinite, deinterleave4, loadLanes } from "../lanes";
import { assertEnterStrip, assertLeaveStrip } from "../promises";
import {
  CHANNELS, ENTERED, EXTENDED_COLUMNS, EXTENDED_ROWS, KERNEL_COLUMNS, KERNEL_ROWS, MARKS, MARK_COUNTS, MARK_ROW, MARK_STRIDE, OUTPUT_COLUMNS,
  PLANES, PLANE_BYTES, PLANE_STRIDE, RESULT, STRIP_ROWS, TILE_ROWS,
} from "../record";
import { scaleRow } from "../rows";
import { leaveStaged, stagedRow } from "../sweep";

/*
 * A strip is TILE_ROWS extended rows, of which STRIP_ROWS result rows come. With an even number of channels a complex plane holds two
 * channels of one strip; with an odd number it holds one channel of two neighbouring strips: the real parts belong to the upper one.
 */

/** First float of row `row` of channel `channel` in the planes; `half` 1 is the lower strip of two. */
// @ts-ignore: decorator
@inline
function planeRow(job: usize, row: i32, channel: i32, half: i32): usize {
  const planeBytes = load<usize>(job, PLANE_BYTES);
  const even = (load<i32>(job, CHANNELS) & 1) == 0;
  const plane = even ? channel : 2 * channel + half;
  return load<usize>(job, PLANES) + <usize>plane * planeBytes + <usize>row * load<usize>(job, PLANE_STRIDE);
}

/** Row of marks: one bit a float of the extended row, `half` as above. */
// @ts-ignore: decorator
@inline
function markRow(job: usize, row: i32, half: i32): usize {
  return load<usize>(job, MARKS) + <usize>(half * load<i32>(job, TILE_ROWS) + row) * load<usize>(job, MARK_STRIDE);
}

// @ts-ignore: decorator
@inline
function markCount(job: usize, row: i32, half: i32): usize {
  return load<usize>(job, MARK_COUNTS) + (<usize>(half * load<i32>(job, TILE_ROWS) + row) << 2);
}

/** 2⁻²⁰: samples as large as floats can be still have finite sums all the way through a tile; results are scaled back as they leave. */
const HEADROOM: f32 = 9.5367431640625e-7;

/**
 * Makes an entered row of floats fit for a transform, which would carry what is not finite to the whole tile: sets it to 0 and marks
 * where it stood, and scales the rest down by a power of two.
 */
function tameFloats<V>(job: usize, entered: usize, floats: i32, row: i32, half: i32): void {
  const marks = markRow(job, row, half);
  let count = 0;
  memory.fill(marks, 0, load<usize>(job, MARK_STRIDE));
  for (let x = 0; x < floats; x += 4) {
    const at = entered + (<usize>x << 2);
    if (isVector<V>() && !anyNonFinite<V>(loadLanes<V>(at))) continue;
    for (let k = x; k < min<i32>(x + 4, floats); k++) {
      const p = entered + (<usize>k << 2);
      if (!anyNonFinite<f32>(load<f32>(p))) continue;
      store<f32>(p, 0);
      store<u8>(marks + (k >> 3), load<u8>(marks + (k >> 3)) | <u8>(<u32>1 << (k & 7)));
      count++;
    }
  }
  store<i32>(markCount(job, row, half), count);
  scaleRow<V>(entered, floats, HEADROOM);
}

/** Spreads an entered row over the planes of its channels, zeros behind it. */
function spread<V>(job: usize, entered: usize, row: i32, half: i32): void {
  const channels = load<i32>(job, CHANNELS);
  const columns = load<i32>(job, EXTENDED_COLUMNS);
  const stride = load<usize>(job, PLANE_STRIDE);
  let done = 0;
  if (channels == 4) {
    const p0 = planeRow(job, row, 0, half), p1 = planeRow(job, row, 1, half), p2 = planeRow(job, row, 2, half), p3 = planeRow(job, row, 3, half);
    for (; done + 4 <= columns; done += 4) {
      const x = <usize>done << 2;
      deinterleave4<V>(p0 + x, p1 + x, p2 + x, p3 + x, entered + (x << 2));
    }
  }
  for (let c = 0; c < channels; c++) {
    const plane = planeRow(job, row, c, half);
    if (channels == 1) memory.copy(plane, entered, <usize>columns << 2);
    else for (let x = done; x < columns; x++) store<f32>(plane + (<usize>x << 2), load<f32>(entered + (<usize>(x * channels + c) << 2)));
    memory.fill(plane + (<usize>columns << 2), 0, stride - (<usize>columns << 2));
  }
}

/** Clears a row of the planes: rows below the image's last one. */
function clearRow(job: usize, row: i32, half: i32): void {
  for (let c = 0; c < load<i32>(job, CHANNELS); c++) memory.fill(planeRow(job, row, c, half), 0, load<usize>(job, PLANE_STRIDE));
  if (load<usize>(job, MARKS)) store<i32>(markCount(job, row, half), 0);
}

/**
 * Brings rows from … to − 1 of a strip in; rows past the extended image become zeros.
 *
 * Units     rows; the first extended row of strip `strip` is strip · STRIP_ROWS. Staged: its rows from … to − 1
 * Requires  to ≤ TILE_ROWS; planes of TILE_ROWS rows, PLANE_STRIDE a multiple of 16   (promised by planning/fft)
 * Cost      EXTENDED_COLUMNS · CHANNELS samples a row; allocates nothing
 * Accuracy  as enterRow: spreading and scaling by a power of two are exact (but for denormal results)
 */
export function enterStrip<V>(job: usize, from: i32, to: i32, strip: i32): void {
  assertEnterStrip(job, from, to, strip);
  const half = load<i32>(job, CHANNELS) & 1 ? strip & 1 : 0;
  const top = strip * load<i32>(job, STRIP_ROWS);
  const entered = load<usize>(job, ENTERED);
  for (let row = from; row < to; row++) {
    if (top + row >= load<i32>(job, EXTENDED_ROWS)) {
      clearRow(job, row, half);
      continue;
    }
    enterRow<V>(job, entered, top + row, stagedRow(job, top + row, top + from));
    if (load<usize>(job, MARKS)) tameFloats<V>(job, entered, load<i32>(job, EXTENDED_COLUMNS) * load<i32>(job, CHANNELS), row, half);
    spread<V>(job, entered, row, half);
  }
}

/** Gathers a result row from the planes of its channels. */
function gather<V>(job: usize, y: usize, row: i32, half: i32): void {
  const channels = load<i32>(job, CHANNELS);
  const columns = load<i32>(job, OUTPUT_COLUMNS);
  for (let c = 0; c < channels; c++) {
    const plane = planeRow(job, row, c, half);
    if (channels == 1) memory.copy(y, plane, <usize>columns << 2);
    else for (let x = 0; x < columns; x++) store<f32>(y + (<usize>(x * channels + c) << 2), load<f32>(plane + (<usize>x << 2)));
  }
}

/** Ors the marks of the rows that a result row reads; false where none is set. */
function gatherMarks(job: usize, row: i32, half: i32): bool {
  const out = load<usize>(job, MARK_ROW);
  const stride = load<usize>(job, MARK_STRIDE);
  let any = false;
  for (let k = row; k < row + load<i32>(job, KERNEL_ROWS); k++) {
    if (load<i32>(markCount(job, k, half)) == 0) continue;
    if (!any) memory.fill(out, 0, stride);
    any = true;
    const marks = markRow(job, k, half);
    for (let x: usize = 0; x < stride; x += 8) store<u64>(out + x, load<u64>(out + x) | load<u64>(marks + x));
  }
  return any;
}

/** Writes NaN into every result whose rectangle of taps holds a marked sample. */
function patch(job: usize, y: usize): void {
  const channels = load<i32>(job, CHANNELS);
  const reach = load<i32>(job, KERNEL_COLUMNS) - 1;
  const columns = load<i32>(job, OUTPUT_COLUMNS);
  const marks = load<usize>(job, MARK_ROW);
  for (let c = 0; c < channels; c++) {
    let nearest = columns + reach + 1;
    for (let x = columns + reach - 1; x >= 0; x--) {
      const k = x * channels + c;
      if ((load<u8>(marks + (k >> 3)) >> (k & 7)) & 1) nearest = x;
      if (x < columns && nearest - x <= reach) store<f32>(y + (<usize>k << 2), NaN);
    }
  }
}

/**
 * Result rows from … to − 1 of a strip leave. Staged output starts at the first of them.
 *
 * Requires  to ≤ STRIP_ROWS, and strip · STRIP_ROWS + to ≤ OUTPUT_ROWS   (promised by planning/fft)
 * Cost      OUTPUT_COLUMNS · CHANNELS samples a row, and the marks of the rows it reads; allocates nothing
 */
export function leaveStrip<V>(job: usize, from: i32, to: i32, strip: i32): void {
  assertLeaveStrip(job, from, to, strip);
  const half = load<i32>(job, CHANNELS) & 1 ? strip & 1 : 0;
  const top = strip * load<i32>(job, STRIP_ROWS);
  const y = load<usize>(job, RESULT);
  for (let row = from; row < to; row++) {
    gather<V>(job, y, row, half);
    if (load<usize>(job, MARKS)) {
      scaleRow<V>(y, load<i32>(job, OUTPUT_COLUMNS) * load<i32>(job, CHANNELS), 1 / HEADROOM);
      if (gatherMarks(job, row, half)) patch(job, y);
    }
    leaveStaged<V>(job, y, top + row, top + from);
  }
}
