export { measureCrossover } from "./crossover.js";
export { keepProfile, keptProfile, type ProfileStore } from "./keeping.js";
export { operationWords } from "./operationWords.js";
export { measureProfile } from "./profile.js";
export type { ByMethod, Crossing, Crossover, CrossoverRow, MeasureCrossoverOptions, MeasureProfileOptions } from "./types.js";
