import type { HardwareProfile } from "../types.js";

/**
 * The shipped prices, in nanoseconds. Rough values until the fit (npm run bench:fit) writes measured ones.
 */
export const shippedProfiles: readonly HardwareProfile[] = (["simd", "scalar"] as const).map((build) => {
  const factor = build === "simd" ? 1 : 3.5;
  return {
    version: 1,
    host: "unfitted",
    build,
    date: "2026-12-01",
    nanoseconds: {
      run: 500, step: 300, row: 60,
      enter_u8: 0.15, enter_u16: 0.2, enter_f32: 0.2, leave_u8: 0.2, leave_u16: 0.25, leave_f32: 0.2,
      haloPixel: 3, convertPixel: 5,
      directTap: 0.07 * factor, directLoop: 1, rowTap: 0.07 * factor, rowLoop: 2, columnTap: 0.07 * factor, columnLoop: 2,
      integerSum: 0.5, floatSum: 1.5, planeSample: 0.6, columnPass: 0.5 * factor, rowPass: 0.5 * factor,
      setup: 30000, setupTap: 20, setupByte: 0.15,
    },
  };
});
