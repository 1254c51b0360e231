import { kernel, type Kernel } from "../kernels/index.js";

/**
 * A kernel without structure: no tap is 0, no two lines are alike, and the taps sum to about a half.
 *
 * Source    the taps' generator: Park & Miller, Comm. ACM 31: 1192, 1988
 */
export function structureless(width: number, height: number): Kernel {
  let state = 1;
  const tap = (): number => (state = (state * 48_271) % 2_147_483_647) / 2_147_483_647 / (width * height);
  return kernel(Array.from({ length: height }, () => Array.from({ length: width }, tap)));
}
