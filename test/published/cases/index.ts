import type { PublishedCase } from "../../support/publishedCase.js";
import { borderTables } from "./borderTables.js";
import { openVx } from "./openVx.js";
import { w3cFilterEffects } from "./w3cFilterEffects.js";
import { boxes, circular, jpeg2000, matrixLanguages, scipyDocumentation } from "./workedExamples.js";

/** All tables of published results, by what they are taken from. */
export const publishedCases: Record<string, PublishedCase[]> = {
  "W3C Filter Effects": w3cFilterEffects,
  OpenVX: openVx,
  "border tables": borderTables,
  "SciPy documentation": scipyDocumentation,
  "matrix languages": matrixLanguages,
  "circular convolution": circular,
  boxes,
  "JPEG 2000": jpeg2000,
};
