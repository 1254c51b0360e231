import { expect, test } from "vitest";
import { bench, forms, inner } from "./debugCore.js";
import { samplesOf } from "./enterJob.js";

test.each(forms)("transpose, $form: out[c][r] = source[r][c], strides apart", ({ wide, lanes }) => {
  for (const [outFloats, sourceFloats] of [
    [lanes, lanes],
    [lanes + 3, lanes],
    [lanes, lanes + 5],
  ] as const) {
    bench.clear();
    const values = Float32Array.from(samplesOf("f32", lanes * sourceFloats, 3));
    const out = bench.take(4 * lanes * outFloats);
    inner.transpose(wide, out, 4 * outFloats, bench.place(values), 4 * sourceFloats);
    const found = bench.floats(out, lanes * outFloats);
    for (let r = 0; r < lanes; r++) for (let c = 0; c < lanes; c++) expect(found[c * outFloats + r]).toBe(values[r * sourceFloats + c]);
    expect(bench.damage()).toBeUndefined();
  }
});

test.each(forms)("deinterleave4, $form: plane k gets channel k of four pixels", ({ wide }) => {
  bench.clear();
  const pixels = Float32Array.from({ length: 16 }, (_, k) => k);
  const planes = [0, 1, 2, 3].map(() => bench.take(16));
  inner.deinterleave4(wide, planes[0]!, planes[1]!, planes[2]!, planes[3]!, bench.place(pixels));
  planes.forEach((plane, k) => expect(Array.from(bench.floats(plane, 4))).toEqual([k, 4 + k, 8 + k, 12 + k]));
  expect(bench.damage()).toBeUndefined();
});
