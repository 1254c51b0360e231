import { isExperimentWidth } from "../src/measure/experiments.js";

/**
 * Which problems prices are fitted to and which they are judged by, told apart by the width of the image: even widths are for fitting
 * (bench/fit, src/measure), odd ones are held out (bench/regret). No problem can be among both, however either set is drawn.
 */
export const isHeldOut = ({ width }: { width: number }): boolean => !isExperimentWidth(width);

/** The nearest even width, at least 2: for experiments that prices are fitted to. */
export const fittedWidth = (width: number): number => Math.max(2, 2 * Math.round(width / 2));

/** The nearest odd width, at least 1: for problems that are held out. */
export const heldOutWidth = (width: number): number => 2 * Math.floor(Math.max(0, width) / 2) + 1;
