import { hold, type ContestResult } from "../contest.js";
import { coreTransform } from "../coreTransform.js";
import { startTransforms, vectorWidths } from "../yardsticks/transforms.js";
import { nothing, together, type Group } from "./group.js";

/** Lengths as the tiles of 15×15 to 255×255 kernels take them, and the ends of the range. */
const lengths = [64, 80, 108, 144, 180, 256, 320, 480, 540, 720, 1024, 1080, 1536, 2048, 4096];

/** Points of one batch: two megabytes of complex numbers. Batches are whole vectors of columns. */
const pointsOfBatch = 2 ** 18;
const batchOf = (points: number): number => 16 * Math.max(1, Math.round(pointsOfBatch / points / 16));

const most = { byColumns: 1.2, ofFaster: 2.5 };

export const transforms: Group = {
  name: "transforms",
  title: "complex transforms down the columns, against FFTW in single precision, FFTW_MEASURE",
  async measure({ tools, say }) {
    if (tools["fftw"] === undefined) {
      say("skipped: there is no gcc with FFTW");
      return nothing();
    }
    const fftw = startTransforms();
    const byColumns: ContestResult[] = [];
    const faster: ContestResult[] = [];
    const widths: Record<string, string[]> = {};
    try {
      for (const points of lengths) {
        const batch = batchOf(points);
        const subject = await coreTransform(points, batch);
        const columns = ["in", "out"].map((place) => fftw.contender("columns", place, points, batch));
        const rows = ["in", "out"].map((place) => fftw.contender("rows", place, points, batch));
        const work = `${batch} × ${points} points`;
        byColumns.push(await hold({ work: `${work}, columns`, subject, rivals: columns, bar: most.byColumns }));
        faster.push(await hold({ work: `${work}, its faster layout`, subject, rivals: [...columns, ...rows], bar: most.ofFaster }));
        for (const layout of ["columns", "rows"]) widths[`${points} ${layout}`] = vectorWidths(await fftw.plan(layout, "in", points, batch));
      }
    } finally {
      await fftw.end();
    }
    const kinds = [...new Set(Object.values(widths).flat())];
    say(`FFTW used: ${kinds.join(", ")}`);
    const columnTable = together("by columns", byColumns, most.byColumns);
    const fasterTable = together("its faster layout", faster, most.ofFaster);
    return {
      contests: [...columnTable.contests, ...fasterTable.contests],
      means: [...columnTable.means, ...fasterTable.means],
      notes: { vectorWidths: widths },
    };
  },
};
