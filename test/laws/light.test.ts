import { expect, test } from "vitest";
import { delta, kernel } from "../../src/kernels/index.js";
import { firstDifference, ways } from "../support/methods.js";
import type { Question } from "../support/questions.js";

test("all 256 codes survive linear light", () => {
  const image = { data: Uint8Array.from({ length: 256 }, (_, code) => code), width: 16, height: 16, channels: 1 as const };
  const question: Question = { image, kernel: delta(), options: { light: "linear" } };
  for (const way of ways(question)) expect(firstDifference(way.answer(question), image.data), `${way.build} ${way.method}`).toBeUndefined();
});

test("all 65,536 codes survive linear light", () => {
  const image = { data: Uint16Array.from({ length: 65536 }, (_, code) => code), width: 256, height: 256, channels: 1 as const };
  const question: Question = { image, kernel: delta(), options: { light: "linear" } };
  for (const way of ways(question)) {
    // The transform's rounding is larger than a level where the curve is steepest (12.92 near black): its own bound says so.
    if (12.92 * way.errorBound >= 0.5) continue;
    expect(firstDifference(way.answer(question), image.data), `${way.build} ${way.method}`).toBeUndefined();
  }
});

test("with alpha none every channel is decoded, otherwise alpha never is", () => {
  const image = { data: Uint8Array.of(0, 0, 255, 255), width: 2, height: 1, channels: 2 as const };
  const half = kernel([[0.5, 0.5]]);
  const ask = (alpha: "none" | "straight"): Question => ({ image, kernel: half, options: { light: "linear", alpha, border: "periodic" } });
  for (const way of ways(ask("none"))) expect(Array.from(way.answer(ask("none"))), `${way.build} ${way.method}`).toEqual([188, 188, 188, 188]);
  for (const way of ways(ask("straight"))) expect(Array.from(way.answer(ask("straight"))), `${way.build} ${way.method}`).toEqual([255, 128, 255, 128]);
});
