import { cases, type Case } from "./cases.js";
import type { PlainLoops } from "./yardsticks/plainC.js";

/** What a case is held against: another case, plain C loops (with the padded copy or without), SciPy's transforms. */
export type Against = { kind: "case"; case: Case } | { kind: "plain C"; loops: PlainLoops; padding: boolean } | { kind: "SciPy" };

/** A figure of the speed floor: the case's time over the other's, at most `limit`. */
export interface Figure {
  subject: Case;
  against: Against;
  /** Compares times of one sample. */
  perSample?: boolean;
  /** Absent where the figure is told for information. */
  limit?: number;
}

export const figures: readonly Figure[] = [
  { subject: cases.direct9, against: { kind: "plain C", loops: "direct", padding: true }, limit: 1 },
  { subject: cases.direct9, against: { kind: "plain C", loops: "direct", padding: false } },
  { subject: cases.separable31, against: { kind: "plain C", loops: "separable", padding: true }, limit: 1 },
  { subject: cases.separable31, against: { kind: "plain C", loops: "separable", padding: false } },
  { subject: cases.fft31, against: { kind: "SciPy" }, limit: 0.5 },
  { subject: cases.fft127, against: { kind: "SciPy" }, limit: 0.5 },
  { subject: cases.directBytes3, against: { kind: "case", case: cases.direct3 }, perSample: true, limit: 1.6 },
  { subject: cases.box101, against: { kind: "case", case: cases.box9 }, limit: 1.2 },
  { subject: cases.boxBytes101, against: { kind: "case", case: cases.boxBytes9 }, limit: 1.2 },
];
