import { fftBytes, fftFloats, type Case } from "../cases.js";
import type { Contender } from "../contender.js";
import { hold, type ContestResult } from "../contest.js";
import { EngineContender } from "../engineContender.js";
import { startOverlapSave } from "../yardsticks/overlapSave.js";
import type { YardstickProcess } from "../yardsticks/process.js";
import { scipyContenders, startScipy } from "../yardsticks/scipy.js";
import { joined, nothing, together, type Ground, type Group } from "./group.js";

const sizes = [15, 31, 63, 127, 255];

type Start = (one: Case, subject: EngineContender) => { process: YardstickProcess; contenders: Contender[] };

/** One case against what was started over its images. */
async function against({ engine }: Ground, one: Case, start: Start, work: string, bar: number): Promise<ContestResult> {
  const subject = new EngineContender(engine, one);
  const { process, contenders } = start(one, subject);
  try {
    return await hold({ work, subject, rivals: contenders, shortlist: 1, bar });
  } finally {
    await process.end();
    subject.filter.dispose();
  }
}

export const fft: Group = {
  name: "fft",
  title: "FFT convolution, zero border, against SciPy and an overlap-save in C over FFTW",
  async measure(ground) {
    const { tools, folder, say } = ground;
    const scipy: Start = (one, { planes }) => {
      const process = startScipy(folder, one, planes);
      return { process, contenders: scipyContenders(process, one, planes) };
    };
    const overlapSave: Start = (one, { planes }) => startOverlapSave(folder, one, planes);
    const parts = [];
    if (tools["scipy"] === undefined) say("SciPy is skipped: there is no python3 with scipy");
    else {
      const floats: ContestResult[] = [];
      for (const size of sizes) floats.push(await against(ground, fftFloats(size), scipy, `${fftFloats(size).name}: SciPy`, 0.34));
      parts.push(together("SciPy", floats, 0.28));
      const bytes: ContestResult[] = [];
      for (const size of [31, 127])
        bytes.push(await against(ground, fftBytes(size), scipy, `${fftBytes(size).name}: SciPy by planes, conversion included`, 0.3));
      parts.push({ ...nothing(), contests: bytes });
    }
    if (tools["fftw"] === undefined) say("FFTW is skipped: there is no gcc with FFTW");
    else {
      const floats: ContestResult[] = [];
      for (const size of sizes) floats.push(await against(ground, fftFloats(size), overlapSave, `${fftFloats(size).name}: overlap-save`, 1.2));
      parts.push(together("overlap-save over FFTW", floats, 1));
    }
    return joined(parts);
  },
};
