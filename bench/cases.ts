import { box, gaussian, kernel, sharpen, type Kernel } from "../src/index.js";
import type { Layout, PrepareOptions } from "../src/index.js";
import { noise } from "../test/support/noise.js";

/** One piece of work that benchmarks speak of by name. */
export interface Case {
  name: string;
  layout: Required<Layout>;
  kernel: Kernel;
  options: PrepareOptions;
}

const plane = { width: 1920, height: 1080, channels: 1, sample: "f32" } as const;
const photograph = { width: 1920, height: 1080, channels: 4, sample: "u8" } as const;
const icon = { width: 64, height: 64, channels: 4, sample: "u8" } as const;

/** Positive taps without any structure that add up to 1: no sum of few separable terms comes near them. */
export function structureless(width: number, height = width): Kernel {
  const next = noise(width * 1000 + height);
  const rows = Array.from({ length: height }, () => Array.from({ length: width }, () => 0.05 + next()));
  const sum = rows.flat().reduce((total, tap) => total + tap, 0);
  return kernel(rows.map((row) => row.map((tap) => tap / sum)));
}

/** A Gaussian of that many taps on each axis. */
const bell = (taps: number): Kernel => gaussian({ sigma: taps / 6, radius: (taps - 1) / 2 });

/** Layouts that are measured at 1080p, by channels of floats. */
const floats = (channels: 1 | 4): Case["layout"] => ({ ...plane, channels });
const channelsName = (channels: 1 | 4): string => `${channels} channel${channels === 1 ? "" : "s"}`;

/** Direct, of floats, without alpha: what the C yardsticks do too. */
export const directFloats = (taps: number, channels: 1 | 4): Case => ({
  name: `direct f32 ${taps}×${taps}, ${channelsName(channels)}`,
  layout: floats(channels),
  kernel: structureless(taps),
  options: { method: "direct", alpha: "none" },
});

export const separableFloats = (taps: number, channels: 1 | 4): Case => ({
  name: `separable f32 ${taps} taps, ${channelsName(channels)}`,
  layout: floats(channels),
  kernel: bell(taps),
  options: { method: "separable", alpha: "none" },
});

/** The border is zero, as SciPy's transforms have it. */
export const fftFloats = (taps: number): Case => ({
  name: `FFT f32 ${taps}×${taps}`,
  layout: plane,
  kernel: structureless(taps),
  options: { method: "fft", border: "zero" },
});

export const fftBytes = (taps: number): Case => ({
  name: `FFT RGBA bytes ${taps}×${taps}`,
  layout: photograph,
  kernel: structureless(taps),
  options: { method: "fft", alpha: "none", border: "zero" },
});

export const directBytes = (taps: number): Case => ({
  name: `direct RGBA bytes ${taps}×${taps}`,
  layout: photograph,
  kernel: structureless(taps),
  options: { method: "direct", alpha: "none" },
});

export const separableBytes = (taps: number): Case => ({
  name: `separable RGBA bytes ${taps} taps`,
  layout: photograph,
  kernel: bell(taps),
  options: { method: "separable", alpha: "none" },
});

export const boxBytes = (taps: number): Case => ({
  name: `running sums RGBA bytes box ${taps}`,
  layout: photograph,
  kernel: box(taps),
  options: { method: "running-sum", alpha: "none" },
});

export const boxFloats = (taps: number): Case => ({
  name: `running sums f32 box ${taps}`,
  layout: plane,
  kernel: box(taps),
  options: { method: "running-sum" },
});

export const withZeroBorder = (one: Case): Case => ({ ...one, name: `${one.name}, zero border`, options: { ...one.options, border: "zero" } });

/** The same work on an image of another shape. */
export const resized = (one: Case, width: number, height: number): Case => ({
  ...one,
  name: `${one.name}, ${width}×${height}`,
  layout: { ...one.layout, width, height },
});

/** The same work on an image of floats. */
export const onFloats = (one: Case): Case => ({ ...one, name: `${one.name}, of floats`, layout: { ...one.layout, sample: "f32" } });

/** The same work on the same bytes with floats in between: no tap may be rounded. */
export const inFloats = (one: Case): Case => ({ ...one, name: `${one.name}, in floats`, options: { ...one.options, tolerance: 0 } });

const listed = {
  direct3: { name: "direct f32 3×3", layout: plane, kernel: structureless(3), options: { method: "direct" } },
  direct9: { name: "direct f32 9×9", layout: plane, kernel: structureless(9), options: { method: "direct" } },
  directBytes3: { name: "direct RGBA bytes 3×3", layout: photograph, kernel: structureless(3), options: { method: "direct", alpha: "none" } },
  directStraight3: { name: "direct RGBA bytes 3×3, straight alpha", layout: photograph, kernel: structureless(3), options: { method: "direct" } },
  separable31: { name: "separable f32 31 taps", layout: plane, kernel: bell(31), options: { method: "separable" } },
  separableBytes31: { name: "separable RGBA bytes 31 taps", layout: photograph, kernel: bell(31), options: { method: "separable", alpha: "none" } },
  separableLinear9: {
    name: "separable RGBA bytes 9 taps, linear light",
    layout: photograph,
    kernel: bell(9),
    options: { method: "separable", light: "linear" },
  },
  fft31: { name: "FFT f32 31×31", layout: plane, kernel: structureless(31), options: { method: "fft", border: "zero" } },
  fft127: { name: "FFT f32 127×127", layout: plane, kernel: structureless(127), options: { method: "fft", border: "zero" } },
  fftBytes65: { name: "FFT RGBA bytes 65×65", layout: photograph, kernel: structureless(65), options: { method: "fft", alpha: "none" } },
  box9: { name: "running sums f32 box 9", layout: plane, kernel: box(9), options: { method: "running-sum" } },
  box101: { name: "running sums f32 box 101", layout: plane, kernel: box(101), options: { method: "running-sum" } },
  boxBytes9: { name: "running sums RGBA bytes box 9", layout: photograph, kernel: box(9), options: { method: "running-sum", alpha: "none" } },
  boxBytes101: { name: "running sums RGBA bytes box 101", layout: photograph, kernel: box(101), options: { method: "running-sum", alpha: "none" } },
  iconSharpen: { name: "direct RGBA bytes 64×64, sharpen", layout: icon, kernel: sharpen(), options: { method: "direct" } },
  iconBell: { name: "separable RGBA bytes 64×64, 9 taps", layout: icon, kernel: bell(9), options: { method: "separable" } },
} satisfies Record<string, Case>;

export const cases: Record<keyof typeof listed, Case> = listed;

/** The case's samples to read and to compute: width · height · channels. */
export const samplesOf = ({ layout }: Case): number => layout.width * layout.height * layout.channels;
