import { add, laneBytes, loadLanes, multiply, splat, splatFrom, storeLanes, subtract } from "../lanes";

/*
 * Butterflies of radix 2, 3, 4 and 5 on V's lanes at once. Real parts at p + k·leg, imaginary parts `apart` bytes behind them.
 *
 *   forward   y_k = w^k · Σ_r x_r · e^(−2πi·kr/R)     decimation in frequency: turned after the sum
 *   inverse   y_k = Σ_r (conj(w)^r · x_r) · e^(+2πi·kr/R)     decimation in time: turned before the sum
 *
 * w^k, k = 1 … R − 1, lie in memory as pairs (cosine, −sine); `turned` false stands for w = 1.
 * Forward passes leave frequencies in digit-reversed places, inverse passes take them back: nothing is ever reordered.
 */

/** Re(z·w) with w = (c, s). */
// @ts-ignore: decorator
@inline
function turnedReal<V>(re: V, im: V, w: usize): V {
  return subtract<V>(multiply<V>(re, splatFrom<V>(w)), multiply<V>(im, splatFrom<V>(w + 4)));
}

/** Im(z·w). */
// @ts-ignore: decorator
@inline
function turnedImaginary<V>(re: V, im: V, w: usize): V {
  return add<V>(multiply<V>(re, splatFrom<V>(w + 4)), multiply<V>(im, splatFrom<V>(w)));
}

/** Re(z·conj w). */
// @ts-ignore: decorator
@inline
function turnedBackReal<V>(re: V, im: V, w: usize): V {
  return add<V>(multiply<V>(re, splatFrom<V>(w)), multiply<V>(im, splatFrom<V>(w + 4)));
}

/** Im(z·conj w). */
// @ts-ignore: decorator
@inline
function turnedBackImaginary<V>(re: V, im: V, w: usize): V {
  return subtract<V>(multiply<V>(im, splatFrom<V>(w)), multiply<V>(re, splatFrom<V>(w + 4)));
}

// @ts-ignore: decorator
@inline
function storeForward<V>(p: usize, apart: usize, re: V, im: V, w: usize, turned: bool): void {
  storeLanes<V>(p, turned ? turnedReal<V>(re, im, w) : re);
  storeLanes<V>(p + apart, turned ? turnedImaginary<V>(re, im, w) : im);
}

// @ts-ignore: decorator
@inline
export function forward2<V>(p: usize, leg: usize, apart: usize, w: usize, turned: bool): void {
  const q = p + leg;
  const ar = loadLanes<V>(p), ai = loadLanes<V>(p + apart);
  const br = loadLanes<V>(q), bi = loadLanes<V>(q + apart);
  storeForward<V>(p, apart, add<V>(ar, br), add<V>(ai, bi), w, false);
  storeForward<V>(q, apart, subtract<V>(ar, br), subtract<V>(ai, bi), w, turned);
}

// @ts-ignore: decorator
@inline
export function inverse2<V>(p: usize, leg: usize, apart: usize, w: usize, turned: bool): void {
  const q = p + leg;
  const ar = loadLanes<V>(p), ai = loadLanes<V>(p + apart);
  const xr = loadLanes<V>(q), xi = loadLanes<V>(q + apart);
  const br = turned ? turnedBackReal<V>(xr, xi, w) : xr;
  const bi = turned ? turnedBackImaginary<V>(xr, xi, w) : xi;
  storeForward<V>(p, apart, add<V>(ar, br), add<V>(ai, bi), w, false);
  storeForward<V>(q, apart, subtract<V>(ar, br), subtract<V>(ai, bi), w, false);
}

/** √3 ÷ 2 */
const HALF_ROOT_3: f32 = 0.8660254037844386;

// @ts-ignore: decorator
@inline
export function forward3<V>(p: usize, leg: usize, apart: usize, w: usize, turned: bool): void {
  const q = p + leg, s = q + leg;
  const ar = loadLanes<V>(p), ai = loadLanes<V>(p + apart);
  const br = loadLanes<V>(q), bi = loadLanes<V>(q + apart);
  const cr = loadLanes<V>(s), ci = loadLanes<V>(s + apart);
  const half = splat<V>(0.5), root = splat<V>(HALF_ROOT_3);
  const tr = add<V>(br, cr), ti = add<V>(bi, ci);
  const mr = subtract<V>(ar, multiply<V>(half, tr)), mi = subtract<V>(ai, multiply<V>(half, ti));
  const dr = multiply<V>(root, subtract<V>(br, cr)), di = multiply<V>(root, subtract<V>(bi, ci));
  storeForward<V>(p, apart, add<V>(ar, tr), add<V>(ai, ti), w, false);
  storeForward<V>(q, apart, add<V>(mr, di), subtract<V>(mi, dr), w, turned);
  storeForward<V>(s, apart, subtract<V>(mr, di), add<V>(mi, dr), w + 8, turned);
}

// @ts-ignore: decorator
@inline
export function inverse3<V>(p: usize, leg: usize, apart: usize, w: usize, turned: bool): void {
  const q = p + leg, s = q + leg;
  const ar = loadLanes<V>(p), ai = loadLanes<V>(p + apart);
  const xr = loadLanes<V>(q), xi = loadLanes<V>(q + apart);
  const yr = loadLanes<V>(s), yi = loadLanes<V>(s + apart);
  const br = turned ? turnedBackReal<V>(xr, xi, w) : xr, bi = turned ? turnedBackImaginary<V>(xr, xi, w) : xi;
  const cr = turned ? turnedBackReal<V>(yr, yi, w + 8) : yr, ci = turned ? turnedBackImaginary<V>(yr, yi, w + 8) : yi;
  const half = splat<V>(0.5), root = splat<V>(HALF_ROOT_3);
  const tr = add<V>(br, cr), ti = add<V>(bi, ci);
  const mr = subtract<V>(ar, multiply<V>(half, tr)), mi = subtract<V>(ai, multiply<V>(half, ti));
  const dr = multiply<V>(root, subtract<V>(br, cr)), di = multiply<V>(root, subtract<V>(bi, ci));
  storeForward<V>(p, apart, add<V>(ar, tr), add<V>(ai, ti), w, false);
  storeForward<V>(q, apart, subtract<V>(mr, di), add<V>(mi, dr), w, false);
  storeForward<V>(s, apart, add<V>(mr, di), subtract<V>(mi, dr), w, false);
}

// @ts-ignore: decorator
@inline
export function forward4<V>(p: usize, leg: usize, apart: usize, w: usize, turned: bool): void {
  const q = p + leg, s = q + leg, t = s + leg;
  const ar = loadLanes<V>(p), cr = loadLanes<V>(s);
  const br = loadLanes<V>(q), dr = loadLanes<V>(t);
  const acr = add<V>(ar, cr), amr = subtract<V>(ar, cr);
  const bdr = add<V>(br, dr), bmr = subtract<V>(br, dr);
  const ai = loadLanes<V>(p + apart), ci = loadLanes<V>(s + apart);
  const bi = loadLanes<V>(q + apart), di = loadLanes<V>(t + apart);
  const aci = add<V>(ai, ci), ami = subtract<V>(ai, ci);
  const bdi = add<V>(bi, di), bmi = subtract<V>(bi, di);
  storeForward<V>(p, apart, add<V>(acr, bdr), add<V>(aci, bdi), w, false);
  storeForward<V>(s, apart, subtract<V>(acr, bdr), subtract<V>(aci, bdi), w + 8, turned);
  storeForward<V>(q, apart, add<V>(amr, bmi), subtract<V>(ami, bmr), w, turned);
  storeForward<V>(t, apart, subtract<V>(amr, bmi), add<V>(ami, bmr), w + 16, turned);
}

// @ts-ignore: decorator
@inline
export function inverse4<V>(p: usize, leg: usize, apart: usize, w: usize, turned: bool): void {
  const q = p + leg, s = q + leg, t = s + leg;
  const xr = loadLanes<V>(q), xi = loadLanes<V>(q + apart);
  const zr = loadLanes<V>(t), zi = loadLanes<V>(t + apart);
  const br = turned ? turnedBackReal<V>(xr, xi, w) : xr, bi = turned ? turnedBackImaginary<V>(xr, xi, w) : xi;
  const dr = turned ? turnedBackReal<V>(zr, zi, w + 16) : zr, di = turned ? turnedBackImaginary<V>(zr, zi, w + 16) : zi;
  const bdr = add<V>(br, dr), bmr = subtract<V>(br, dr);
  const bdi = add<V>(bi, di), bmi = subtract<V>(bi, di);
  const yr = loadLanes<V>(s), yi = loadLanes<V>(s + apart);
  const cr = turned ? turnedBackReal<V>(yr, yi, w + 8) : yr, ci = turned ? turnedBackImaginary<V>(yr, yi, w + 8) : yi;
  const ar = loadLanes<V>(p), ai = loadLanes<V>(p + apart);
  const acr = add<V>(ar, cr), amr = subtract<V>(ar, cr);
  const aci = add<V>(ai, ci), ami = subtract<V>(ai, ci);
  storeForward<V>(p, apart, add<V>(acr, bdr), add<V>(aci, bdi), w, false);
  storeForward<V>(s, apart, subtract<V>(acr, bdr), subtract<V>(aci, bdi), w, false);
  storeForward<V>(q, apart, subtract<V>(amr, bmi), add<V>(ami, bmr), w, false);
  storeForward<V>(t, apart, add<V>(amr, bmi), subtract<V>(ami, bmr), w, false);
}

/**
 * The middle of a filtered row: four points of a last forward pass, times the spectrum, and the first pass back, without leaving the registers.
 *
 * @param spectrum four times a vector of real parts and one of imaginary parts
 */
// @ts-ignore: decorator
@inline
export function filter4<V>(p: usize, apart: usize, spectrum: usize): void {
  const v = laneBytes<V>();
  const ar = loadLanes<V>(p), br = loadLanes<V>(p + v), cr = loadLanes<V>(p + 2 * v), dr = loadLanes<V>(p + 3 * v);
  const ai = loadLanes<V>(p + apart), bi = loadLanes<V>(p + apart + v), ci = loadLanes<V>(p + apart + 2 * v), di = loadLanes<V>(p + apart + 3 * v);
  const acr = add<V>(ar, cr), amr = subtract<V>(ar, cr), bdr = add<V>(br, dr), bmr = subtract<V>(br, dr);
  const aci = add<V>(ai, ci), ami = subtract<V>(ai, ci), bdi = add<V>(bi, di), bmi = subtract<V>(bi, di);
  const pr = add<V>(acr, bdr), pi = add<V>(aci, bdi), sr = subtract<V>(acr, bdr), si = subtract<V>(aci, bdi);
  const qr = add<V>(amr, bmi), qi = subtract<V>(ami, bmr), tr = subtract<V>(amr, bmi), ti = add<V>(ami, bmr);
  const a2r = timesReal<V>(pr, pi, spectrum), a2i = timesImaginary<V>(pr, pi, spectrum);
  const b2r = timesReal<V>(qr, qi, spectrum + 2 * v), b2i = timesImaginary<V>(qr, qi, spectrum + 2 * v);
  const c2r = timesReal<V>(sr, si, spectrum + 4 * v), c2i = timesImaginary<V>(sr, si, spectrum + 4 * v);
  const d2r = timesReal<V>(tr, ti, spectrum + 6 * v), d2i = timesImaginary<V>(tr, ti, spectrum + 6 * v);
  const xr = add<V>(a2r, c2r), yr = subtract<V>(a2r, c2r), zr = add<V>(b2r, d2r), wr = subtract<V>(b2r, d2r);
  const xi = add<V>(a2i, c2i), yi = subtract<V>(a2i, c2i), zi = add<V>(b2i, d2i), wi = subtract<V>(b2i, d2i);
  storeLanes<V>(p, add<V>(xr, zr));
  storeLanes<V>(p + apart, add<V>(xi, zi));
  storeLanes<V>(p + 2 * v, subtract<V>(xr, zr));
  storeLanes<V>(p + apart + 2 * v, subtract<V>(xi, zi));
  storeLanes<V>(p + v, subtract<V>(yr, wi));
  storeLanes<V>(p + apart + v, add<V>(yi, wr));
  storeLanes<V>(p + 3 * v, add<V>(yr, wi));
  storeLanes<V>(p + apart + 3 * v, subtract<V>(yi, wr));
}

// @ts-ignore: decorator
@inline
function timesReal<V>(re: V, im: V, h: usize): V {
  return subtract<V>(multiply<V>(re, loadLanes<V>(h)), multiply<V>(im, loadLanes<V>(h + laneBytes<V>())));
}

// @ts-ignore: decorator
@inline
function timesImaginary<V>(re: V, im: V, h: usize): V {
  return add<V>(multiply<V>(re, loadLanes<V>(h + laneBytes<V>())), multiply<V>(im, loadLanes<V>(h)));
}

/** cos 72°, cos 144°, sin 72°, sin 144° */
const COS_72: f32 = 0.30901699437494745;
const COS_144: f32 = -0.8090169943749475;
const SIN_72: f32 = 0.9510565162951535;
const SIN_144: f32 = 0.5877852522924731;

/** The sum of a radix-5 butterfly whose five legs lie in memory; direction +1 forward, −1 inverse. In place, turned after it where asked. */
// @ts-ignore: decorator
@inline
function sum5<V>(p: usize, leg: usize, apart: usize, direction: f32, w: usize, turned: bool): void {
  const p1 = p + leg, p2 = p1 + leg, p3 = p2 + leg, p4 = p3 + leg;
  const ar = loadLanes<V>(p), ai = loadLanes<V>(p + apart);
  const br = loadLanes<V>(p1), bi = loadLanes<V>(p1 + apart), er = loadLanes<V>(p4), ei = loadLanes<V>(p4 + apart);
  const cr = loadLanes<V>(p2), ci = loadLanes<V>(p2 + apart), dr = loadLanes<V>(p3), di = loadLanes<V>(p3 + apart);
  const ber = add<V>(br, er), bei = add<V>(bi, ei), cdr = add<V>(cr, dr), cdi = add<V>(ci, di);
  const bmr = subtract<V>(br, er), bmi = subtract<V>(bi, ei), cmr = subtract<V>(cr, dr), cmi = subtract<V>(ci, di);
  const c1 = splat<V>(COS_72), c2 = splat<V>(COS_144), s1 = splat<V>(direction * SIN_72), s2 = splat<V>(direction * SIN_144);
  const m1r = add<V>(ar, add<V>(multiply<V>(c1, ber), multiply<V>(c2, cdr)));
  const m1i = add<V>(ai, add<V>(multiply<V>(c1, bei), multiply<V>(c2, cdi)));
  const n1r = add<V>(multiply<V>(s1, bmr), multiply<V>(s2, cmr)), n1i = add<V>(multiply<V>(s1, bmi), multiply<V>(s2, cmi));
  storeForward<V>(p, apart, add<V>(ar, add<V>(ber, cdr)), add<V>(ai, add<V>(bei, cdi)), w, false);
  storeForward<V>(p1, apart, add<V>(m1r, n1i), subtract<V>(m1i, n1r), w, turned);
  storeForward<V>(p4, apart, subtract<V>(m1r, n1i), add<V>(m1i, n1r), w + 24, turned);
  const m2r = add<V>(ar, add<V>(multiply<V>(c2, ber), multiply<V>(c1, cdr)));
  const m2i = add<V>(ai, add<V>(multiply<V>(c2, bei), multiply<V>(c1, cdi)));
  const n2r = subtract<V>(multiply<V>(s2, bmr), multiply<V>(s1, cmr)), n2i = subtract<V>(multiply<V>(s2, bmi), multiply<V>(s1, cmi));
  storeForward<V>(p2, apart, add<V>(m2r, n2i), subtract<V>(m2i, n2r), w + 8, turned);
  storeForward<V>(p3, apart, subtract<V>(m2r, n2i), add<V>(m2i, n2r), w + 16, turned);
}

// @ts-ignore: decorator
@inline
export function forward5<V>(p: usize, leg: usize, apart: usize, w: usize, turned: bool): void {
  sum5<V>(p, leg, apart, 1, w, turned);
}

// @ts-ignore: decorator
@inline
export function inverse5<V>(p: usize, leg: usize, apart: usize, w: usize, turned: bool): void {
  if (turned) {
    for (let k: usize = 1; k < 5; k++) {
      const at = p + k * leg;
      const re = loadLanes<V>(at), im = loadLanes<V>(at + apart);
      storeLanes<V>(at, turnedBackReal<V>(re, im, w + 8 * (k - 1)));
      storeLanes<V>(at + apart, turnedBackImaginary<V>(re, im, w + 8 * (k - 1)));
    }
  }
  sum5<V>(p, leg, apart, -1, w, false);
}
