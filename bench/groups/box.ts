import { boxBytes, type Case } from "../cases.js";
import { hold } from "../contest.js";
import type { Contender } from "../contender.js";
import { EngineContender } from "../engineContender.js";
import { processorMilliseconds } from "../processorTime.js";
import { nothing, type Group } from "./group.js";

/** `TypedArray.set` of the image into a buffer that is used again and again: what reading and writing it once takes. */
function copying(planes: EngineContender["planes"]): Contender {
  const buffer = planes[0]!.data.slice();
  return {
    name: "TypedArray.set",
    run(plane) {
      const begun = processorMilliseconds();
      buffer.set(planes[plane % planes.length]!.data);
      return processorMilliseconds() - begun;
    },
  };
}

export const box: Group = {
  name: "box",
  title: "running sums of RGBA bytes: any radius costs the same, and little more than copying",
  async measure({ engine }) {
    const contender = (one: Case, planes?: EngineContender["planes"]): EngineContender => new EngineContender(engine, one, planes);
    const small = contender(boxBytes(9));
    const large = contender(boxBytes(101), small.planes);
    try {
      return {
        ...nothing(),
        contests: [
          await hold({ work: "box of 101 against box of 9", subject: large, rivals: [small], bar: 1.1 }),
          await hold({ work: "box of 9 against a copy", subject: small, rivals: [copying(small.planes)], asides: small.asides(), bar: 5 }),
          await hold({ work: "box of 101 against a copy", subject: large, rivals: [copying(small.planes)], asides: large.asides(), bar: 5 }),
        ],
      };
    } finally {
      small.filter.dispose();
      large.filter.dispose();
    }
  },
};
