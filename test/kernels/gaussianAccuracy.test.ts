import { describe, expect, test } from "vitest";
import { gaussian, type GaussianSampling } from "../../src/kernels/index.js";
import { exactErrorFunction, exactExponential, exactly, one, product, quotient, squareRoot, toNumber, ulpError } from "../math/highPrecision.js";

/** The formulas of the builder in whole numbers of 2^−1700. */
const heights: Record<GaussianSampling, (k: number, sigma: bigint) => bigint> = {
  point: (k, sigma) => exactExponential(-quotient(exactly(k * k), 2n * product(sigma, sigma))),
  area: (k, sigma) => {
    const unit = product(sigma, squareRoot(2n * one));
    return (exactErrorFunction(quotient(exactly(k + 0.5), unit)) - exactErrorFunction(quotient(exactly(k - 0.5), unit))) / 2n;
  },
};

function exactTaps(sigma: number, radius: number, sampling: GaussianSampling): bigint[] {
  const found = Array.from({ length: radius + 1 }, (_, k) => heights[sampling](k, exactly(sigma)));
  const total = found.reduce((sum, height) => sum + 2n * height, -found[0]!);
  return found.map((height) => quotient(height, total));
}

const cases = (["point", "area"] as const).flatMap((sampling) => [0.5, 0.7, 1, 1.1, Math.PI, 12.34].map((sigma) => ({ sampling, sigma })));

describe.each(cases)("gaussian { sigma: $sigma, sampling: $sampling }", ({ sampling, sigma }) => {
  const { taps, origin } = gaussian({ sigma: { x: sigma, y: 0 }, sampling });
  const exact = exactTaps(sigma, origin.x, sampling);

  test("has the formula's taps within the ulp that it states", () => {
    const allowed = sampling === "point" ? 2 : 16 + 8 * sigma;
    for (let k = 1; k <= origin.x; k++) expect(ulpError(taps[origin.x + k]!, exact[k]!), `tap ${k}`).toBeLessThan(allowed);
  });

  test("has its middle tap within 2⁻⁵²", () => {
    expect(Math.abs(toNumber(exactly(taps[origin.x]!) - exact[0]!))).toBeLessThan(2 ** -52);
  });
});
