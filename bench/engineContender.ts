import type { Engine, Filter, Raster, ResultRaster } from "../src/index.js";
import type { Case } from "./cases.js";
import type { Contender } from "./contender.js";
import { planesOf } from "./inputs.js";
import { processorMilliseconds } from "./processorTime.js";
import { verify } from "./verify.js";

/** A prepared filter that runs a case into a target of its own. */
export class EngineContender implements Contender {
  readonly name: string;
  readonly case: Case;
  readonly planes: readonly Raster[];
  readonly target: ResultRaster;
  readonly filter: Filter;

  constructor(engine: Engine, one: Case, planes: readonly Raster[] = planesOf(one.layout)) {
    this.name = one.name;
    this.case = one;
    this.planes = planes;
    this.filter = engine.prepare(one.kernel, one.layout, one.options);
    this.target = this.filter.run(planes[0]!);
  }

  run(plane: number): number {
    const begun = processorMilliseconds();
    this.filterPlane(plane);
    return processorMilliseconds() - begun;
  }

  /** Filters one plane, counted round. */
  filterPlane(plane: number): void {
    this.filter.run(this.planes[plane % this.planes.length]!, this.target);
  }

  /** Largest difference from the definition; throws where it is above the filter's own bound. */
  verify(): number {
    this.filter.run(this.planes[0]!, this.target);
    return this.verified(this.target.data);
  }

  verified(result: ArrayLike<number>): number {
    return verify(this.case, this.planes[0]!, result, this.filter.explanation.errorBound);
  }

  /** Other ways to run the same filter: between views of engine memory, which a page draws into and out of. */
  asides(): Contender[] {
    const load = (plane: number): void => this.filter.source.data.set(this.planes[plane % this.planes.length]!.data);
    return [
      {
        name: "views",
        run: (plane) => {
          load(plane);
          const begun = processorMilliseconds();
          this.filter.run();
          return processorMilliseconds() - begun;
        },
        verify: () => {
          load(0);
          return this.verified(this.filter.run().data);
        },
      },
    ];
  }
}
