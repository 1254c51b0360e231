/**
 * The only file that spells v128.
 *
 * Every routine is generic over V, its working vector: v128 (four floats) in SIMD builds, f32 (one float) in scalar ones.
 * `lanes<V>()` tells how many floats V holds. All arithmetic is lane by lane in the same order, so both builds give the same bytes.
 */

/** Floats held by one V. */
// @ts-ignore: decorator
@inline
export function lanes<V>(): i32 {
  return isVector<V>() ? 4 : 1;
}

/** Bytes held by one V. */
// @ts-ignore: decorator
@inline
export function laneBytes<V>(): usize {
  return isVector<V>() ? 16 : 4;
}

// @ts-ignore: decorator
@inline
export function loadLanes<V>(pointer: usize): V {
  if (isVector<V>()) return changetype<V>(v128.load(pointer));
  return load<V>(pointer);
}

// @ts-ignore: decorator
@inline
export function storeLanes<V>(pointer: usize, value: V): void {
  if (isVector<V>()) v128.store(pointer, changetype<v128>(value));
  else store<V>(pointer, value);
}

/** One float of memory in every lane. */
// @ts-ignore: decorator
@inline
export function splatFrom<V>(pointer: usize): V {
  if (isVector<V>()) return changetype<V>(v128.load_splat<f32>(pointer));
  return load<V>(pointer);
}

// @ts-ignore: decorator
@inline
export function splat<V>(value: f32): V {
  if (isVector<V>()) return changetype<V>(f32x4.splat(value));
  return <V>value;
}

// @ts-ignore: decorator
@inline
export function add<V>(a: V, b: V): V {
  if (isVector<V>()) return changetype<V>(f32x4.add(changetype<v128>(a), changetype<v128>(b)));
  return <V>((<f32>a) + (<f32>b));
}

// @ts-ignore: decorator
@inline
export function subtract<V>(a: V, b: V): V {
  if (isVector<V>()) return changetype<V>(f32x4.sub(changetype<v128>(a), changetype<v128>(b)));
  return <V>((<f32>a) - (<f32>b));
}

// @ts-ignore: decorator
@inline
export function multiply<V>(a: V, b: V): V {
  if (isVector<V>()) return changetype<V>(f32x4.mul(changetype<v128>(a), changetype<v128>(b)));
  return <V>((<f32>a) * (<f32>b));
}

/** a + h · x: with both roundings, the same bytes on every processor; in the relaxed build with one, where the processor can. */
// @ts-ignore: decorator
@inline
export function multiplyAdd<V>(a: V, h: V, x: V): V {
  if (isVector<V>() && ASC_FEATURE_RELAXED_SIMD) return changetype<V>(v128.relaxed_madd<f32>(changetype<v128>(h), changetype<v128>(x), changetype<v128>(a)));
  return add<V>(a, multiply<V>(h, x));
}

/** x, or 0 where |x| < least; NaN and ∞ stay. */
// @ts-ignore: decorator
@inline
export function withoutTiny<V>(x: V, least: f32): V {
  if (isVector<V>()) return changetype<V>(v128.andnot(changetype<v128>(x), f32x4.lt(f32x4.abs(changetype<v128>(x)), f32x4.splat(least))));
  return <V>(abs<f32>(<f32>x) < least ? <f32>0 : <f32>x);
}

/** Widens 16 bytes to 16 floats. */
// @ts-ignore: decorator
@inline
export function widen16_u8<V>(out: usize, source: usize): void {
  if (isVector<V>()) {
    const bytes = v128.load(source);
    const low = i16x8.extend_low_i8x16_u(bytes);
    const high = i16x8.extend_high_i8x16_u(bytes);
    v128.store(out, f32x4.convert_i32x4_s(i32x4.extend_low_i16x8_u(low)));
    v128.store(out, f32x4.convert_i32x4_s(i32x4.extend_high_i16x8_u(low)), 16);
    v128.store(out, f32x4.convert_i32x4_s(i32x4.extend_low_i16x8_u(high)), 32);
    v128.store(out, f32x4.convert_i32x4_s(i32x4.extend_high_i16x8_u(high)), 48);
  } else {
    for (let k: usize = 0; k < 16; k++) store<f32>(out + (k << 2), <f32>(<i32>load<u8>(source + k)));
  }
}

/** Widens eight 16-bit integers to eight floats. */
// @ts-ignore: decorator
@inline
export function widen8_u16<V>(out: usize, source: usize): void {
  if (isVector<V>()) {
    const words = v128.load(source);
    v128.store(out, f32x4.convert_i32x4_s(i32x4.extend_low_i16x8_u(words)));
    v128.store(out, f32x4.convert_i32x4_s(i32x4.extend_high_i16x8_u(words)), 16);
  } else {
    for (let k: usize = 0; k < 8; k++) store<f32>(out + (k << 2), <f32>(<i32>load<u16>(source + (k << 1))));
  }
}

/**
 * ⌊y + ½⌋ held within 0 … limit, NaN as 0, as 32-bit integers in V's lanes.
 * y − ⌊y⌋ is exact, so the comparison with ½ is; adding 2²³ puts an integer below 2²³ into the low bits of the float.
 */
// @ts-ignore: decorator
@inline
function roundHalfUp(y: v128, limit: v128): v128 {
  const held = f32x4.pmin(limit, f32x4.pmax(f32x4.splat(0), y));
  const whole = f32x4.floor(held);
  const up = f32x4.ge(f32x4.sub(held, whole), f32x4.splat(0.5));
  const integer = i32x4.sub(f32x4.add(whole, f32x4.splat(8388608)), i32x4.splat(0x4b000000));
  return i32x4.sub(integer, up);
}

/** ⌊y + ½⌋ held within 0 … limit, NaN as 0. */
// @ts-ignore: decorator
@inline
export function roundHalfUpOne(y: f32, limit: f32): i32 {
  let held: f32 = y > 0 ? y : 0;
  held = held < limit ? held : limit;
  const whole = floor<f32>(held);
  return <i32>whole + (held - whole >= 0.5 ? 1 : 0);
}

/** Rounds 16 floats to bytes. */
// @ts-ignore: decorator
@inline
export function narrow16_u8<V>(out: usize, source: usize): void {
  if (isVector<V>()) {
    const limit = f32x4.splat(255);
    const low = i16x8.narrow_i32x4_s(roundHalfUp(v128.load(source), limit), roundHalfUp(v128.load(source, 16), limit));
    const high = i16x8.narrow_i32x4_s(roundHalfUp(v128.load(source, 32), limit), roundHalfUp(v128.load(source, 48), limit));
    v128.store(out, i8x16.narrow_i16x8_u(low, high));
  } else {
    for (let k: usize = 0; k < 16; k++) store<u8>(out + k, roundHalfUpOne(load<f32>(source + (k << 2)), 255));
  }
}

/** Rounds eight floats to 16-bit integers. */
// @ts-ignore: decorator
@inline
export function narrow8_u16<V>(out: usize, source: usize): void {
  if (isVector<V>()) {
    const limit = f32x4.splat(65535);
    v128.store(out, i16x8.narrow_i32x4_u(roundHalfUp(v128.load(source), limit), roundHalfUp(v128.load(source, 16), limit)));
  } else {
    for (let k: usize = 0; k < 8; k++) store<u16>(out + (k << 1), roundHalfUpOne(load<f32>(source + (k << 2)), 65535));
  }
}

/** True where one of V's floats is NaN or infinite: x − x is then NaN, which differs from itself. */
// @ts-ignore: decorator
@inline
export function anyNonFinite<V>(x: V): bool {
  if (isVector<V>()) {
    const difference = f32x4.sub(changetype<v128>(x), changetype<v128>(x));
    return v128.any_true(f32x4.ne(difference, difference));
  }
  const difference = (<f32>x) - (<f32>x);
  return difference != difference;
}

/**
 * Moves a block of V's lanes² floats from rows to columns: out[c][r] = source[r][c], strides in bytes. A copy in scalar builds.
 */
// @ts-ignore: decorator
@inline
export function transpose<V>(out: usize, outStride: usize, source: usize, sourceStride: usize): void {
  if (isVector<V>()) {
    const a = v128.load(source);
    const b = v128.load(source + sourceStride);
    const c = v128.load(source + 2 * sourceStride);
    const d = v128.load(source + 3 * sourceStride);
    const ab = v128.shuffle<f32>(a, b, 0, 4, 1, 5);
    const cd = v128.shuffle<f32>(c, d, 0, 4, 1, 5);
    const ef = v128.shuffle<f32>(a, b, 2, 6, 3, 7);
    const gh = v128.shuffle<f32>(c, d, 2, 6, 3, 7);
    v128.store(out, v128.shuffle<f64>(ab, cd, 0, 2));
    v128.store(out + outStride, v128.shuffle<f64>(ab, cd, 1, 3));
    v128.store(out + 2 * outStride, v128.shuffle<f64>(ef, gh, 0, 2));
    v128.store(out + 3 * outStride, v128.shuffle<f64>(ef, gh, 1, 3));
  } else {
    store<f32>(out, load<f32>(source));
  }
}

/** Splits rows of interleaved pixels: plane k receives channel k of `count` pixels (a multiple of four), 2 or 4 channels. */
// @ts-ignore: decorator
@inline
export function deinterleave4<V>(plane0: usize, plane1: usize, plane2: usize, plane3: usize, source: usize): void {
  if (isVector<V>()) {
    const a = v128.load(source);
    const b = v128.load(source, 16);
    const c = v128.load(source, 32);
    const d = v128.load(source, 48);
    const ab = v128.shuffle<f32>(a, b, 0, 4, 1, 5);
    const cd = v128.shuffle<f32>(c, d, 0, 4, 1, 5);
    const ef = v128.shuffle<f32>(a, b, 2, 6, 3, 7);
    const gh = v128.shuffle<f32>(c, d, 2, 6, 3, 7);
    v128.store(plane0, v128.shuffle<f64>(ab, cd, 0, 2));
    v128.store(plane1, v128.shuffle<f64>(ab, cd, 1, 3));
    v128.store(plane2, v128.shuffle<f64>(ef, gh, 0, 2));
    v128.store(plane3, v128.shuffle<f64>(ef, gh, 1, 3));
  } else {
    for (let k: usize = 0; k < 4; k++) {
      store<f32>(plane0 + (k << 2), load<f32>(source + (k << 4)));
      store<f32>(plane1 + (k << 2), load<f32>(source + (k << 4), 4));
      store<f32>(plane2 + (k << 2), load<f32>(source + (k << 4), 8));
      store<f32>(plane3 + (k << 2), load<f32>(source + (k << 4), 12));
    }
  }
}

/** 32-bit unsigned integers → floats in the same lanes. */
// @ts-ignore: decorator
@inline
export function integersToFloats<V>(x: V): V {
  if (isVector<V>()) return changetype<V>(f32x4.convert_i32x4_u(changetype<v128>(x)));
  return <V>(<f32>reinterpret<u32>(<f32>x));
}

// @ts-ignore: decorator
@inline
export function integerAdd<V>(a: V, b: V): V {
  if (isVector<V>()) return changetype<V>(i32x4.add(changetype<v128>(a), changetype<v128>(b)));
  return <V>reinterpret<f32>(reinterpret<i32>(<f32>a) + reinterpret<i32>(<f32>b));
}

// @ts-ignore: decorator
@inline
export function integerSubtract<V>(a: V, b: V): V {
  if (isVector<V>()) return changetype<V>(i32x4.sub(changetype<v128>(a), changetype<v128>(b)));
  return <V>reinterpret<f32>(reinterpret<i32>(<f32>a) - reinterpret<i32>(<f32>b));
}

/** sums[k] += incoming[k] − outgoing[k] for 16 bytes; sums are 32-bit integers. */
// @ts-ignore: decorator
@inline
export function addDifference16_u8<V>(sums: usize, incoming: usize, outgoing: usize): void {
  if (isVector<V>()) {
    const a = v128.load(incoming);
    const b = v128.load(outgoing);
    const low = i16x8.sub(i16x8.extend_low_i8x16_u(a), i16x8.extend_low_i8x16_u(b));
    const high = i16x8.sub(i16x8.extend_high_i8x16_u(a), i16x8.extend_high_i8x16_u(b));
    v128.store(sums, i32x4.add(v128.load(sums), i32x4.extend_low_i16x8_s(low)));
    v128.store(sums, i32x4.add(v128.load(sums, 16), i32x4.extend_high_i16x8_s(low)), 16);
    v128.store(sums, i32x4.add(v128.load(sums, 32), i32x4.extend_low_i16x8_s(high)), 32);
    v128.store(sums, i32x4.add(v128.load(sums, 48), i32x4.extend_high_i16x8_s(high)), 48);
  } else {
    for (let k: usize = 0; k < 16; k++) {
      const at = sums + (k << 2);
      store<i32>(at, load<i32>(at) + <i32>load<u8>(incoming + k) - <i32>load<u8>(outgoing + k));
    }
  }
}

/** The same for eight 16-bit samples. */
// @ts-ignore: decorator
@inline
export function addDifference8_u16<V>(sums: usize, incoming: usize, outgoing: usize): void {
  if (isVector<V>()) {
    const a = v128.load(incoming);
    const b = v128.load(outgoing);
    const low = i32x4.sub(i32x4.extend_low_i16x8_u(a), i32x4.extend_low_i16x8_u(b));
    const high = i32x4.sub(i32x4.extend_high_i16x8_u(a), i32x4.extend_high_i16x8_u(b));
    v128.store(sums, i32x4.add(v128.load(sums), low));
    v128.store(sums, i32x4.add(v128.load(sums, 16), high), 16);
  } else {
    for (let k: usize = 0; k < 8; k++) {
      const at = sums + (k << 2);
      store<i32>(at, load<i32>(at) + <i32>load<u16>(incoming + (k << 1)) - <i32>load<u16>(outgoing + (k << 1)));
    }
  }
}

// ---- 32-bit integers: V is v128 (four of them) or i32 ----

// @ts-ignore: decorator
@inline
export function splatInteger<V>(value: i32): V {
  if (isVector<V>()) return changetype<V>(i32x4.splat(value));
  return <V>value;
}

/** sum + tap₀ · x₀ + tap₁ · x₁ in each lane: taps and samples are pairs of signed 16-bit integers. */
// @ts-ignore: decorator
@inline
export function dotAdd<V>(sum: V, taps: V, pairs: V): V {
  if (isVector<V>()) return changetype<V>(i32x4.add(changetype<v128>(sum), i32x4.dot_i16x8_s(changetype<v128>(taps), changetype<v128>(pairs))));
  const low = <i32>(<i16>(<i32>taps)) * <i32>(<i16>(<i32>pairs));
  return <V>((<i32>sum) + low + ((<i32>taps) >> 16) * ((<i32>pairs) >> 16));
}

/** ⌊sum ÷ 2^shift⌋ held within 0 … 255: four vectors of sums to as many bytes. */
// @ts-ignore: decorator
@inline
export function storeBytes<V>(out: usize, a: V, b: V, c: V, d: V, shift: i32): void {
  if (isVector<V>()) {
    const low = i16x8.narrow_i32x4_s(i32x4.shr_s(changetype<v128>(a), shift), i32x4.shr_s(changetype<v128>(b), shift));
    const high = i16x8.narrow_i32x4_s(i32x4.shr_s(changetype<v128>(c), shift), i32x4.shr_s(changetype<v128>(d), shift));
    v128.store(out, i8x16.narrow_i16x8_u(low, high));
  } else {
    store<u8>(out, heldByte((<i32>a) >> shift));
    store<u8>(out, heldByte((<i32>b) >> shift), 1);
    store<u8>(out, heldByte((<i32>c) >> shift), 2);
    store<u8>(out, heldByte((<i32>d) >> shift), 3);
  }
}

// @ts-ignore: decorator
@inline
function heldByte(value: i32): i32 {
  return max<i32>(0, min<i32>(255, value));
}

/** ⌊sum ÷ 2^shift⌋ as signed 16-bit integers, which they fit: two vectors of sums. */
// @ts-ignore: decorator
@inline
export function storeWords<V>(out: usize, a: V, b: V, shift: i32): void {
  if (isVector<V>()) {
    v128.store(out, i16x8.narrow_i32x4_s(i32x4.shr_s(changetype<v128>(a), shift), i32x4.shr_s(changetype<v128>(b), shift)));
  } else {
    store<i16>(out, (<i32>a) >> shift);
    store<i16>(out, (<i32>b) >> shift, 2);
  }
}

/** Pairs of 16-bit integers (a[k], b[k]) from eight bytes of each. */
// @ts-ignore: decorator
@inline
export function pairBytes8<V>(out: usize, a: usize, b: usize): void {
  if (isVector<V>()) storePairs(out, v128.load_ext<u8>(a), v128.load_ext<u8>(b));
  else for (let k: usize = 0; k < 8; k++) store<i32>(out + (k << 2), <i32>load<u8>(a + k) | (<i32>load<u8>(b + k) << 16));
}

/** Pairs of 16-bit integers (a[k], b[k]) from eight of each. */
// @ts-ignore: decorator
@inline
export function pairWords8<V>(out: usize, a: usize, b: usize): void {
  if (isVector<V>()) storePairs(out, v128.load(a), v128.load(b));
  else for (let k: usize = 0; k < 8; k++) store<i32>(out + (k << 2), <i32>load<u16>(a + (k << 1)) | (<i32>load<u16>(b + (k << 1)) << 16));
}

// @ts-ignore: decorator
@inline
function storePairs(out: usize, a: v128, b: v128): void {
  v128.store(out, v128.shuffle<i16>(a, b, 0, 8, 1, 9, 2, 10, 3, 11));
  v128.store(out, v128.shuffle<i16>(a, b, 4, 12, 5, 13, 6, 14, 7, 15), 16);
}

// ---- running sums of bytes: V is v128 (four 32-bit integers, or eight 16-bit ones) ----

/** sums[k] += incoming[k] − outgoing[k] for 16 bytes; T is how wide sums are: u16 (modulo 2¹⁶) or i32. */
// @ts-ignore: decorator
@inline
export function slideSixteen<V, T>(sums: usize, incoming: usize, outgoing: usize): void {
  if (isVector<V>() && sizeof<T>() == 2) {
    const low = i16x8.sub(v128.load_ext<u8>(incoming), v128.load_ext<u8>(outgoing));
    const high = i16x8.sub(v128.load_ext<u8>(incoming, 8), v128.load_ext<u8>(outgoing, 8));
    v128.store(sums, i16x8.add(v128.load(sums), low));
    v128.store(sums, i16x8.add(v128.load(sums, 16), high), 16);
  } else if (isVector<V>()) {
    addDifference16_u8<V>(sums, incoming, outgoing);
  } else {
    for (let k: usize = 0; k < 16; k++) slideOne<T>(sums + k * sizeof<T>(), incoming + k, outgoing + k);
  }
}

// @ts-ignore: decorator
@inline
export function slideOne<T>(sum: usize, incoming: usize, outgoing: usize): void {
  store<T>(sum, <T>(<i32>load<T>(sum) + <i32>load<u8>(incoming) - <i32>load<u8>(outgoing)));
}

/** Sixteen bytes from one place to another. */
// @ts-ignore: decorator
@inline
export function copySixteen(out: usize, source: usize): void {
  store<u64>(out, load<u64>(source));
  store<u64>(out, load<u64>(source, 8), 8);
}

/** ahead[k] − behind[k] of eight 16-bit integers, modulo 2¹⁶. */
// @ts-ignore: decorator
@inline
export function wordDifferences<V>(ahead: usize, behind: usize): V {
  return changetype<V>(i16x8.sub(v128.load(ahead), v128.load(behind)));
}

/** The lower and the upper four of eight signed 16-bit integers, as 32-bit ones. */
// @ts-ignore: decorator
@inline
export function lowerWords<V>(x: V): V {
  return changetype<V>(i32x4.extend_low_i16x8_s(changetype<v128>(x)));
}

// @ts-ignore: decorator
@inline
export function upperWords<V>(x: V): V {
  return changetype<V>(i32x4.extend_high_i16x8_s(changetype<v128>(x)));
}

/** ahead[k] − behind[k] of four column sums, T wide, as 32-bit integers; 16-bit ones differ by less than 2¹⁵. */
// @ts-ignore: decorator
@inline
export function fourDifferences<V, T>(ahead: usize, behind: usize): V {
  if (sizeof<T>() == 2) {
    const difference = i16x8.sub(v128.load_zero<u64>(ahead), v128.load_zero<u64>(behind));
    return changetype<V>(i32x4.extend_low_i16x8_s(difference));
  }
  return changetype<V>(i32x4.sub(v128.load(ahead), v128.load(behind)));
}

/** Four column sums, T wide, as 32-bit integers. */
// @ts-ignore: decorator
@inline
export function fourSums<V, T>(pointer: usize): V {
  if (sizeof<T>() == 2) return changetype<V>(v128.load_ext<u16>(pointer));
  return changetype<V>(v128.load(pointer));
}

/** a + b, 32-bit integers. */
// @ts-ignore: decorator
@inline
export function sumOf<V>(a: V, b: V): V {
  return changetype<V>(i32x4.add(changetype<v128>(a), changetype<v128>(b)));
}

/** Sums over the first samples of each channel: lane k holds Σ x[i] for i ≤ k of its channel, with 1 or 2 channels in turn. */
// @ts-ignore: decorator
@inline
export function prefixSums<V>(x: V, channels: i32): V {
  const none = i32x4.splat(0);
  let sums = changetype<v128>(x);
  if (channels == 1) sums = i32x4.add(sums, v128.shuffle<i32>(none, sums, 3, 4, 5, 6));
  return changetype<V>(i32x4.add(sums, v128.shuffle<i32>(none, sums, 2, 3, 4, 5)));
}

/** The last sample of each channel in all of its lanes. */
// @ts-ignore: decorator
@inline
export function lastOfEach<V>(x: V, channels: i32): V {
  if (channels == 1) return changetype<V>(v128.shuffle<i32>(changetype<v128>(x), changetype<v128>(x), 3, 3, 3, 3));
  return changetype<V>(v128.shuffle<i32>(changetype<v128>(x), changetype<v128>(x), 2, 3, 2, 3));
}

/**
 * The integer nearest to scale · sum in the lower 16 bits of each lane: adding 2²³ to a float below it leaves no bits for a fraction.
 * With a divisor that integer is ⌊sum ÷ divisor⌋ or one more; the sign of the remainder tells which.
 */
// @ts-ignore: decorator
@inline
function quotientBits(sum: v128, scale: f32, divisor: i32): v128 {
  const bits = f32x4.add(f32x4.mul(f32x4.convert_i32x4_s(sum), f32x4.splat(scale)), f32x4.splat(8388608));
  if (!divisor) return bits;
  const quotient = i32x4.sub(bits, i32x4.splat(0x4b000000));
  return i32x4.add(quotient, i32x4.shr_s(i32x4.sub(sum, i32x4.mul(quotient, i32x4.splat(divisor))), 31));
}

/** The same for one sum. */
// @ts-ignore: decorator
@inline
export function quotientOf(sum: i32, scale: f32, divisor: i32): i32 {
  const bits = reinterpret<i32>(<f32>sum * scale + 8388608) - 0x4b000000;
  return divisor ? bits + ((sum - bits * divisor) >> 31) : bits;
}

/** Quotients below 256 of four vectors of sums as 16 bytes; of the first three lanes of each, as 12 bytes and four more of no meaning, where `three`. */
// @ts-ignore: decorator
@inline
export function storeQuotients<V>(out: usize, a: V, b: V, c: V, d: V, scale: f32, divisor: i32, three: bool): void {
  const upper = i32x4.shl(quotientBits(changetype<v128>(b), scale, divisor), 16);
  const ab = v128.shuffle<i16>(quotientBits(changetype<v128>(a), scale, divisor), upper, 0, 9, 2, 11, 4, 13, 6, 15);
  const last = i32x4.shl(quotientBits(changetype<v128>(d), scale, divisor), 16);
  const cd = v128.shuffle<i16>(quotientBits(changetype<v128>(c), scale, divisor), last, 0, 9, 2, 11, 4, 13, 6, 15);
  const mixed = i8x16.narrow_i16x8_u(ab, cd);
  if (three) v128.store(out, v128.shuffle<i8>(mixed, mixed, 0, 2, 4, 1, 3, 5, 8, 10, 12, 9, 11, 13, 6, 7, 14, 15));
  else v128.store(out, v128.shuffle<i8>(mixed, mixed, 0, 2, 4, 6, 1, 3, 5, 7, 8, 10, 12, 14, 9, 11, 13, 15));
}
