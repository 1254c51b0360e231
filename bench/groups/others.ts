import { findChromium } from "../../.build/chromium.mjs";
import { boxFloats, directFloats, separableFloats, withZeroBorder, type Case } from "../cases.js";
import { hold, turns, type ContestResult } from "../contest.js";
import type { Contender } from "../contender.js";
import { coreTransform } from "../coreTransform.js";
import { EngineContender } from "../engineContender.js";
import { spreadOf } from "../spread.js";
import { timeBlurs } from "../yardsticks/canvasBlur.js";
import { fftJsTransforms } from "../yardsticks/fftJs.js";
import { plainLoops } from "../yardsticks/plainLoops.js";
import { scipyContenders, startScipy } from "../yardsticks/scipy.js";
import { findTfjs, tfjsConvolution } from "../yardsticks/tfjs.js";
import { nothing, type Ground, type Group } from "./group.js";

async function against({ engine }: Ground, one: Case, rival: (planes: EngineContender["planes"]) => Contender): Promise<ContestResult> {
  const subject = new EngineContender(engine, one);
  try {
    return await hold({ work: one.name, subject, rivals: [rival(subject.planes)] });
  } finally {
    subject.filter.dispose();
  }
}

async function againstNdimage(ground: Ground, one: Case, form: string): Promise<ContestResult> {
  const subject = new EngineContender(ground.engine, one);
  const process = startScipy(ground.folder, one, subject.planes);
  try {
    return await hold({ work: one.name, subject, rivals: scipyContenders(process, one, subject.planes, [form]) });
  } finally {
    await process.end();
    subject.filter.dispose();
  }
}

const blur = { width: 1920, height: 1080, sigma: 5, turns };

async function againstCanvas(executablePath: string): Promise<ContestResult> {
  const { version, ours, canvas } = await timeBlurs(executablePath, blur);
  const [subject, rival] = [ours, canvas].map(spreadOf);
  const ratio = Number((subject!.median / rival!.median).toFixed(3));
  return {
    work: `in Chromium: RGBA bytes, Gaussian of sigma ${blur.sigma}`,
    ratio,
    ratioByTurns: [ratio, ratio],
    bar: null,
    verdict: "for information",
    subject: { name: "prepared filter", milliseconds: subject! },
    rivals: [{ name: `ctx.filter of Chromium ${version}`, milliseconds: rival! }],
    asides: [],
  };
}

export const others: Group = {
  name: "others",
  title: "other ways, for information",
  async measure(ground) {
    const { say, tools } = ground;
    const contests: ContestResult[] = [];
    const direct = withZeroBorder(directFloats(9, 1));
    contests.push(await against(ground, direct, (planes) => plainLoops(direct, planes)));
    const tfjs = await findTfjs();
    if (!tfjs) say("tfjs is skipped: install @tensorflow/tfjs-core and @tensorflow/tfjs-backend-wasm in a folder and name it in TAPWISE_TFJS");
    else
      for (const one of [withZeroBorder(directFloats(3, 1)), direct]) contests.push(await against(ground, one, (planes) => tfjsConvolution(tfjs, one, planes)));
    if (tools["scipy"] === undefined) say("SciPy ndimage is skipped: there is no python3 with scipy");
    else {
      contests.push(await againstNdimage(ground, directFloats(9, 1), "ndimage"));
      contests.push(await againstNdimage(ground, separableFloats(31, 1), "ndimage-separable"));
      contests.push(await againstNdimage(ground, boxFloats(101), "ndimage-box"));
    }
    for (const [points, batch] of [
      [256, 1024],
      [512, 512],
      [1024, 256],
    ] as const)
      contests.push(await hold({ work: `${batch} × ${points} points`, subject: await coreTransform(points, batch), rivals: [fftJsTransforms(points, batch)] }));
    const executablePath = findChromium();
    if (executablePath === undefined) say("the canvas's blur is skipped: there is no Chromium");
    else contests.push(await againstCanvas(executablePath));
    return { ...nothing(), contests };
  },
};
