import { encode } from "./curve";
import { add, laneBytes, loadLanes, multiply, narrow16_u8, narrow8_u16, roundHalfUpOne, splat, storeLanes } from "./lanes";
import { assertLeaveRow } from "./promises";
import {
  ALPHA, ALPHA_BOUND, ALPHA_NOISE, ANCHOR_COLUMN, CHANNELS, COLOURS, DECODE, GAIN, KEEP_ROW, OPAQUE_SUM, OFFSET, OUTPUT_COLUMNS, OUTPUT_FULL, OUTPUT_KIND,
  ROUND, SOURCE_FULL, WEIGHTS, WEIGHT_COLUMNS, WEIGHT_ROWS, WEIGHT_STRIDE, WORKING_FULL,
} from "./record";

/** Working floats → samples: ⌊y + ½⌋ held in range for integers, as they are for floats. */
function narrow<V>(kind: i32, out: usize, y: usize, count: i32): void {
  let k: usize = 0;
  const end = <usize>count;
  if (kind == 0) {
    for (; k + 16 <= end; k += 16) narrow16_u8<V>(out + k, y + (k << 2));
    for (; k < end; k++) store<u8>(out + k, roundHalfUpOne(load<f32>(y + (k << 2)), 255));
  } else if (kind == 1) {
    for (; k + 8 <= end; k += 8) narrow8_u16<V>(out + (k << 1), y + (k << 2));
    for (; k < end; k++) store<u16>(out + (k << 1), roundHalfUpOne(load<f32>(y + (k << 2)), 65535));
  } else {
    memory.copy(out, y, end << 2);
  }
}

/** y ← gain · y + offset. The row's floats are padded to whole vectors. */
function gainAndOffset<V>(job: usize, y: usize, count: i32): void {
  const gain = load<f32>(job, GAIN);
  const offset = load<f32>(job, OFFSET);
  if (gain == 1 && offset == 0) return;
  const end = y + (<usize>count << 2);
  for (; y < end; y += laneBytes<V>()) storeLanes<V>(y, add<V>(multiply<V>(splat<V>(gain), loadLanes<V>(y)), splat<V>(offset)));
}

/** Renormalised border: y ← y · Σh ÷ (the weight that fell inside), by the patterns of its row and column. */
function renormalise(job: usize, y: usize, row: i32): void {
  const channels = load<i32>(job, CHANNELS);
  const pattern = load<i32>(load<usize>(job, WEIGHT_ROWS) + (<usize>row << 2));
  const weights = load<usize>(job, WEIGHTS) + <usize>(pattern * load<i32>(job, WEIGHT_STRIDE)) * 4;
  const columns = load<usize>(job, WEIGHT_COLUMNS);
  const count = load<i32>(job, OUTPUT_COLUMNS);
  for (let c = 0; c < count; c++) {
    const weight = load<f32>(weights + (<usize>load<i32>(columns + (<usize>c << 2)) << 2));
    if (weight != 1) for (let k = 0; k < channels; k++, y += 4) store<f32>(y, weight == 0 ? 0 : load<f32>(y) * weight);
    else y += <usize>channels << 2;
  }
}

function roundAll(y: usize, count: i32): void {
  for (let k: usize = 0; k < <usize>count; k++) store<f32>(y + (k << 2), floor<f32>(load<f32>(y + (k << 2)) + 0.5));
}

/** Encodes linear light: y in 0…1 → the source type's units. */
// @ts-ignore: decorator
@inline
function encoded(job: usize, y: f32): f32 {
  return load<i32>(job, DECODE) ? encode(y) * load<f32>(job, SOURCE_FULL) : y;
}

/** The alpha that the output will hold, 0 … full, before it is narrowed. */
// @ts-ignore: decorator
@inline
function writtenAlpha(job: usize, alpha: f32): f32 {
  const full = load<f32>(job, OUTPUT_FULL);
  return load<i32>(job, OUTPUT_KIND) == 2 ? alpha : <f32>roundHalfUpOne(alpha * full, full);
}

/** x′ = Σh · (h∗(a·x)) ÷ (h∗a), a′ = (h∗a) ÷ Σh; the quotient is exactly 1 where h∗a is Σh within its error. */
function leaveStraight(job: usize, y: usize): void {
  const colours = load<i32>(job, COLOURS);
  const sum = load<f32>(job, OPAQUE_SUM);
  const gain = load<f32>(job, GAIN);
  const offset = load<f32>(job, OFFSET);
  const end = y + (<usize>(load<i32>(job, OUTPUT_COLUMNS) * (colours + 1)) << 2);
  while (y < end) {
    const found = load<f32>(y + (<usize>colours << 2));
    const weight: f32 = abs<f32>(found) <= load<f32>(job, ALPHA_NOISE) ? 0 : found;
    const opaque = abs<f32>(weight - sum) <= load<f32>(job, ALPHA_BOUND);
    const alpha: f32 = opaque ? 1 : weight / sum;
    const written = writtenAlpha(job, alpha);
    for (let c = 0; c < colours; c++, y += 4) {
      const x = opaque ? load<f32>(y) : sum * (load<f32>(y) / weight);
      store<f32>(y, written > 0 ? gain * encoded(job, x) + offset : 0);
    }
    store<f32>(y, written);
    y += 4;
  }
}

/** Colours that are already premultiplied are held within 0 … a′ of the source's full value. */
function leavePremultiplied(job: usize, y: usize): void {
  const colours = load<i32>(job, COLOURS);
  const full = load<f32>(job, SOURCE_FULL);
  const gain = load<f32>(job, GAIN);
  const offset = load<f32>(job, OFFSET);
  const end = y + (<usize>(load<i32>(job, OUTPUT_COLUMNS) * (colours + 1)) << 2);
  while (y < end) {
    const alpha = load<f32>(y + (<usize>colours << 2)) / load<f32>(job, WORKING_FULL);
    const most = alpha * full;
    for (let c = 0; c < colours; c++, y += 4) {
      const x = encoded(job, load<f32>(y));
      store<f32>(y, gain * (x < 0 ? 0 : x > most ? max<f32>(most, 0) : x) + offset);
    }
    store<f32>(y, alpha * load<f32>(job, OUTPUT_FULL));
    y += 4;
  }
}

/** Colours as they are; alpha from the bordered image at the same place (the row that KEEP_ROW holds). */
function leaveKept(job: usize, y: usize): void {
  const colours = load<i32>(job, COLOURS);
  const full = load<f32>(job, WORKING_FULL);
  const gain = load<f32>(job, GAIN);
  const offset = load<f32>(job, OFFSET);
  const pixelBytes = <usize>(colours + 1) << 2;
  let kept = load<usize>(job, KEEP_ROW) + <usize>load<i32>(job, ANCHOR_COLUMN) * pixelBytes + (<usize>colours << 2);
  const end = y + <usize>load<i32>(job, OUTPUT_COLUMNS) * pixelBytes;
  for (; y < end; kept += pixelBytes) {
    for (let c = 0; c < colours; c++, y += 4) store<f32>(y, gain * encoded(job, load<f32>(y)) + offset);
    store<f32>(y, (load<f32>(kept) / full) * load<f32>(job, OUTPUT_FULL));
    y += 4;
  }
}

/** True where working floats are the samples that are written: a method may then compute them where they go. */
export function leavesAsIs(job: usize): bool {
  const plain = load<i32>(job, ALPHA) == 0 && !load<i32>(job, DECODE) && !load<i32>(job, ROUND) && !load<usize>(job, WEIGHTS);
  return plain && load<i32>(job, OUTPUT_KIND) == 2 && load<f32>(job, GAIN) == 1 && load<f32>(job, OFFSET) == 0;
}

/**
 * One result row leaves: divided, encoded, gain and offset, rounded. Works in place on y, which is scratch afterwards.
 *
 *     out[x] = narrow(gain · encoded(y[x]) + offset),   narrow(v) = ⌊v + ½⌋ held in range for integers, v for floats
 *
 * Shapes    y OUTPUT_COLUMNS · CHANNELS working floats, padded to whole vectors; out OUTPUT_STRIDE bytes
 * Units     pointers: bytes, y 16-byte aligned, out aligned to its samples; row: index of the result row
 * Requires  y and out do not overlap; alpha modes only with an alpha channel   (promised by planning/frame)
 * Cost      OUTPUT_COLUMNS · CHANNELS samples; allocates nothing
 * Accuracy  gain and offset two roundings, division two, encoding within 1 ulp; narrowing is exact, ties up, NaN to 0
 */
export function leaveRow<V>(job: usize, y: usize, row: i32, out: usize): void {
  assertLeaveRow(job, y, row, out);
  const count = load<i32>(job, OUTPUT_COLUMNS) * load<i32>(job, CHANNELS);
  const alpha = load<i32>(job, ALPHA);
  if (load<i32>(job, ROUND)) roundAll(y, count);
  if (load<usize>(job, WEIGHTS)) renormalise(job, y, row);
  if (alpha == 0) {
    if (load<i32>(job, DECODE)) for (let k: usize = 0; k < <usize>count; k++) store<f32>(y + (k << 2), encoded(job, load<f32>(y + (k << 2))));
    gainAndOffset<V>(job, y, count);
  } else if (alpha == 1) leaveStraight(job, y);
  else if (alpha == 2) leavePremultiplied(job, y);
  else leaveKept(job, y);
  narrow<V>(load<i32>(job, OUTPUT_KIND), out, y, count);
}
