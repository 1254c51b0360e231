import { decode } from "./curve";
import { laneBytes, loadLanes, storeLanes, widen16_u8, widen8_u16, withoutTiny } from "./lanes";
import { assertEnterRow, assertSource } from "./promises";
import {
  CHANNELS, COLOURS, CONSTANT_COLUMN, CONSTANT_PIXELS, CONSTANT_ROW, CURVE, DECODE, EXTENDED_COLUMNS, HALO, HALO_COUNT, PREMULTIPLY, ROW_MAP,
  RUN_COLUMN, RUN_COUNT, RUN_SOURCE, SOURCE_FULL, SOURCE_KIND, WORKING_FULL,
} from "./record";

/** 2⁻¹⁰⁰: smaller floats count as 0, since arithmetic with denormal ones takes a hundred times as long. */
const tiny: f32 = 7.888609052210118e-31;

/** Floats as they are, but tiny ones as 0. The source may lie on any multiple of four bytes. */
function copyFloats<V>(out: usize, source: usize, bytes: usize): void {
  const vector = laneBytes<V>();
  let k: usize = 0;
  for (; k + 4 * vector <= bytes; k += 4 * vector) {
    const a = loadLanes<V>(source + k), b = loadLanes<V>(source + k + vector);
    const c = loadLanes<V>(source + k + 2 * vector), d = loadLanes<V>(source + k + 3 * vector);
    storeLanes<V>(out + k, withoutTiny<V>(a, tiny));
    storeLanes<V>(out + k + vector, withoutTiny<V>(b, tiny));
    storeLanes<V>(out + k + 2 * vector, withoutTiny<V>(c, tiny));
    storeLanes<V>(out + k + 3 * vector, withoutTiny<V>(d, tiny));
  }
  for (; k < bytes; k += 4) store<f32>(out + k, withoutTiny<f32>(load<f32>(source + k), tiny));
}

/** Source samples → floats in the source's own units. */
function widen<V>(kind: i32, out: usize, source: usize, count: i32): void {
  let k: usize = 0;
  const end = <usize>count;
  if (kind == 0) {
    for (; k + 16 <= end; k += 16) widen16_u8<V>(out + (k << 2), source + k);
    for (; k < end; k++) store<f32>(out + (k << 2), <f32>(<i32>load<u8>(source + k)));
  } else if (kind == 1) {
    for (; k + 8 <= end; k += 8) widen8_u16<V>(out + (k << 2), source + (k << 1));
    for (; k < end; k++) store<f32>(out + (k << 2), <f32>(<i32>load<u16>(source + (k << 1))));
  } else {
    copyFloats<V>(out, source, end << 2);
  }
}

/** Replaces the colours of widened pixels by their linear values, by table for integer samples, else by the formula; alpha goes to 0 … 1 with them. */
function decodePixels(job: usize, out: usize, pixels: i32): void {
  const kind = load<i32>(job, SOURCE_KIND);
  const channels = load<i32>(job, CHANNELS);
  const colours = load<i32>(job, COLOURS);
  const curve = load<usize>(job, CURVE);
  const full = load<f32>(job, SOURCE_FULL);
  for (let p = 0; p < pixels; p++) {
    for (let c = 0; c < colours; c++) {
      const at = out + (<usize>(p * channels + c) << 2);
      const x = load<f32>(at);
      store<f32>(at, kind == 2 ? decode(x) : load<f32>(curve + (<usize>x << 2)));
    }
    if (colours < channels) {
      const alpha = out + (<usize>(p * channels + colours) << 2);
      store<f32>(alpha, load<f32>(alpha) / full);
    }
  }
}

/** colour ← a · colour with a = alpha ÷ full, exactly 1 where opaque. */
function premultiplyPixels(job: usize, out: usize, pixels: i32): void {
  const channels = load<i32>(job, CHANNELS);
  const full = load<f32>(job, WORKING_FULL);
  for (let p = 0; p < pixels; p++) {
    const pixel = out + (<usize>(p * channels) << 2);
    const last = pixel + (<usize>(channels - 1) << 2);
    const alpha = load<f32>(last) / full;
    for (let at = pixel; at < last; at += 4) store<f32>(at, alpha * load<f32>(at));
  }
}

/** Brings neighbouring pixels in: widened, decoded, premultiplied. */
export function enterPixels<V>(job: usize, out: usize, source: usize, pixels: i32): void {
  assert(pixels >= 0 && (out & 3) == 0);
  widen<V>(load<i32>(job, SOURCE_KIND), out, source, pixels * load<i32>(job, CHANNELS));
  if (load<i32>(job, DECODE)) decodePixels(job, out, pixels);
  if (load<i32>(job, PREMULTIPLY)) premultiplyPixels(job, out, pixels);
}

// @ts-ignore: decorator
@inline
function copyPixel(out: usize, source: usize, channels: i32): void {
  for (let c = 0; c < channels; c++) store<f32>(out + (<usize>c << 2), load<f32>(source + (<usize>c << 2)));
}

/**
 * One row of the extended image: the stretch that lies in the source, then the halo through the index map.
 *
 *     out[x] = working(source[column(x)]),   working: widened, decoded, times alpha ÷ full, as the job asks
 *
 * Shapes    out EXTENDED_COLUMNS · CHANNELS floats; source STAGING_STRIDE bytes, not read where the row map says "outside"
 * Units     pointers: bytes, out 16-byte aligned; row: index in the extended image
 * Requires  stretch and halo fill every column once; out and source do not overlap   (promised by planning/frame)
 * Cost      EXTENDED_COLUMNS · CHANNELS samples, halo pixels one by one; allocates nothing
 * Accuracy  exact; decoded floats within 1 ulp; premultiplied ones two roundings more
 */
export function enterRow<V>(job: usize, out: usize, row: i32, source: usize): void {
  assertEnterRow(job, out, row, source);
  const channels = load<i32>(job, CHANNELS);
  const pixelBytes = <usize>channels << 2;
  if (load<i32>(load<usize>(job, ROW_MAP) + (<usize>row << 2)) < 0) {
    memory.copy(out, load<usize>(job, CONSTANT_ROW), <usize>load<i32>(job, EXTENDED_COLUMNS) * pixelBytes);
    return;
  }
  const sampleShift = load<i32>(job, SOURCE_KIND);
  const run = source + ((<usize>load<i32>(job, RUN_SOURCE) * channels) << sampleShift);
  enterPixels<V>(job, out + <usize>load<i32>(job, RUN_COLUMN) * pixelBytes, run, load<i32>(job, RUN_COUNT));
  const end = load<usize>(job, HALO) + (<usize>load<i32>(job, HALO_COUNT) << 3);
  for (let entry = load<usize>(job, HALO); entry < end; entry += 8) {
    const target = out + <usize>load<i32>(entry) * pixelBytes;
    const from = load<i32>(entry, 4);
    if (from >= 0) copyPixel(target, out + <usize>from * pixelBytes, channels);
    else if (from == -1) copyPixel(target, load<usize>(job, CONSTANT_COLUMN), channels);
    else enterPixels<V>(job, target, source + ((<usize>(-2 - from) * channels) << sampleShift), 1);
  }
}

/**
 * Set-up: the constant pixels, entered like any other samples: one all along an extended row, one for the halo of columns.
 *
 * Requires  CONSTANT_PIXELS holds two pixels of samples; the curve, where there is one, is filled
 */
export function enterConstants<V>(job: usize): void {
  assertSource(job);
  const channels = load<i32>(job, CHANNELS);
  const pixelBytes = <usize>channels << 2;
  const row = load<usize>(job, CONSTANT_ROW);
  const pixels = load<usize>(job, CONSTANT_PIXELS);
  enterPixels<V>(job, row, pixels, 1);
  enterPixels<V>(job, load<usize>(job, CONSTANT_COLUMN), pixels + (<usize>channels << load<i32>(job, SOURCE_KIND)), 1);
  const end = row + <usize>load<i32>(job, EXTENDED_COLUMNS) * pixelBytes;
  for (let out = row + pixelBytes; out < end; out += 4) store<f32>(out, load<f32>(out - pixelBytes));
}
