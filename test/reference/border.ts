import type { Border, BorderRule } from "../../src/types.js";

/** What a place outside the image holds on one axis: a sample of the image, a constant, or nothing at all. */
export type Resolved = { kind: "index"; index: number } | { kind: "constant"; value: number | readonly number[] } | { kind: "left-out" };

/** The rule of each axis: one rule stands for both, an axis that is not named replicates. */
export function rulesOfAxes(border: Border | undefined): { rows: BorderRule; columns: BorderRule } {
  if (border === undefined) return { rows: "replicate", columns: "replicate" };
  if (typeof border === "string" || "constant" in border) return { rows: border, columns: border };
  return { rows: border.rows ?? "replicate", columns: border.columns ?? "replicate" };
}

/** The remainder that is never negative: a mod⁺ b. */
function modulo(a: number, b: number): number {
  return ((a % b) + b) % b;
}

/**
 * Resolves index i of an axis of `count` samples; the symmetric rules are written as one period of the extended signal.
 *
 * Source   S. A. Martucci, Symmetric convolution and the discrete sine and cosine transforms, IEEE Trans. Signal Process. 42(5), 1994 (names and periods)
 */
export function resolve(i: number, count: number, rule: BorderRule): Resolved {
  if (i >= 0 && i < count) return { kind: "index", index: i };
  if (typeof rule === "object") return { kind: "constant", value: rule.constant };
  switch (rule) {
    case "zero":
      return { kind: "constant", value: 0 };
    case "renormalised":
      return { kind: "left-out" };
    case "replicate":
      return { kind: "index", index: i < 0 ? 0 : count - 1 };
    case "periodic":
      return { kind: "index", index: modulo(i, count) };
    case "half-sample-symmetric": {
      const place = modulo(i, 2 * count);
      return { kind: "index", index: place < count ? place : 2 * count - 1 - place };
    }
    case "whole-sample-symmetric": {
      if (count === 1) return { kind: "index", index: 0 };
      const place = modulo(i, 2 * count - 2);
      return { kind: "index", index: place < count ? place : 2 * count - 2 - place };
    }
  }
}
