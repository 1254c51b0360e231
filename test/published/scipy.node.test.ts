import { spawnSync } from "node:child_process";
import { fileURLToPath } from "node:url";
import { describe, expect, test } from "vitest";
import type { BorderRule, Extent } from "../../src/index.js";
import { kernel } from "../../src/kernels/index.js";
import { allAnswers } from "../support/answers.js";
import { noise, noiseImage } from "../support/noise.js";
import { difference } from "../support/publishedCase.js";
import type { Question } from "../support/questions.js";

/** Debian's own Python comes first: another one on the path may lack SciPy. */
const python = ["/usr/bin/python3", "python3"].find((command) => spawnSync(command, ["-c", "import scipy.ndimage, scipy.signal"]).status === 0);
const required = process.env["TAPWISE_REQUIRE_SCIPY"] === "1";

const rules: BorderRule[] = ["zero", "replicate", "periodic", "half-sample-symmetric", "whole-sample-symmetric", { constant: 0.375 }];
const extents: Extent[] = ["same", "same", "same", "full", "valid"];

interface Problem {
  question: Question;
  asked: Record<string, unknown>;
}

/** A random problem: any origin inside the kernel, kernels larger than the image among them. */
function problem(seed: number): Problem {
  const next = noise(seed);
  for (let warm = 0; warm < 8; warm++) next();
  const below = (limit: number): number => Math.floor(next() * limit);
  const [width, height] = [1 + below(28), 1 + below(24)];
  const extent = extents[below(extents.length)]!;
  const [m, n] = extent === "valid" ? [1 + below(width), 1 + below(height)] : [1 + below(12), 1 + below(12)];
  const border = extent === "same" ? rules[below(rules.length)]! : "zero";
  const correlate = next() < 0.5;
  const image = noiseImage("f32", width, height, 1, seed);
  const rows = Array.from({ length: n }, () => Array.from({ length: m }, () => 2 * next() - 1));
  const taps = rows.flat();
  const [ox, oy] = [below(m), below(n)];
  const options = extent === "valid" ? { extent } : { extent, border };
  return {
    question: { image, kernel: kernel(rows, { origin: { x: ox, y: oy } }), options, correlate },
    asked: { width, height, m, n, taps, border, extent, correlate, ox, oy, image: Array.from(image.data) },
  };
}

describe("SciPy, run beside", () => {
  if (python === undefined && !required) {
    console.info("SciPy is not installed: the problems it would answer are left out.");
    return;
  }

  /** Source   scipy.ndimage.convolve and correlate, scipy.signal.convolve2d and correlate2d, as installed. */
  test("gives the same results on random problems", () => {
    expect(python, "python3 with scipy.ndimage").toBeDefined();
    const problems = Array.from({ length: 120 }, (_, index) => problem(1000 + index));
    const input = problems.map(({ asked }) => JSON.stringify(asked)).join("\n");
    const script = fileURLToPath(new URL("askScipy.py", import.meta.url));
    const { stdout, stderr, status } = spawnSync(python!, [script], { input, encoding: "utf8", maxBuffer: 2 ** 28 });
    expect(status, stderr).toBe(0);
    const answered = stdout
      .trim()
      .split("\n")
      .map((line) => JSON.parse(line) as number[]);
    expect(answered).toHaveLength(problems.length);
    problems.forEach(({ question, asked }, index) => {
      const where = `problem ${index}: ${JSON.stringify({ ...asked, image: "…", taps: "…" })}`;
      // SciPy sums in double precision, which rounds too.
      const own = question.kernel.taps.length * 2 ** -52 * question.kernel.taps.reduce((sum, tap) => sum + Math.abs(tap), 0);
      for (const answer of allAnswers(question)) expect(difference(answer, answered[index]!, 1, own), where).toBeUndefined();
    });
  });
});
