import { boxBytes, directBytes, fftBytes, separableBytes } from "../cases.js";

/** What is held against two processes: 1080p RGBA bytes in and out. */
export const threadCases = {
  direct9: directBytes(9),
  separable31: separableBytes(31),
  fft63: fftBytes(63),
  box31: boxBytes(31),
} as const;

export type ThreadCase = keyof typeof threadCases;

/** The share of two processes' scaling that two threads are to reach; none where most of the time goes into copying. */
export const least: Partial<Record<ThreadCase, number>> = { direct9: 0.88, separable31: 0.88, fft63: 0.88 };
