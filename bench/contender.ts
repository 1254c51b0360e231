/** Something that does a case's work when told to, and says how long it took. */
export interface Contender {
  readonly name: string;
  /** Filters one of the case's planes and resolves with milliseconds of processor time. */
  run(plane: number): Promise<number> | number;
  /** Largest difference of its result from the definition, where it can be told; throws where it is more than allowed. */
  verify?(): Promise<number> | number;
}

/** Times of each contender, in the order in which the contenders were given. */
export type Times = number[][];

const warmMilliseconds = 150;
const warmRuns = 3;

/** Runs that are not measured: the first ones compile, fault pages in and fill caches. */
export async function warm(contenders: readonly Contender[], planes: number): Promise<void> {
  for (const contender of contenders) {
    let spent = 0;
    for (let run = 0; run < warmRuns || spent < warmMilliseconds; run += 1) spent += await contender.run(run % planes);
  }
}

/**
 * Runs contenders in turns, A B A B …, so that a slow moment of the machine meets all of them alike.
 * Every turn takes another plane; in odd turns the order is reversed.
 */
export async function inTurns(contenders: readonly Contender[], planes: number, turns: number): Promise<Times> {
  const times: Times = contenders.map(() => []);
  for (let turn = 0; turn < turns; turn += 1) {
    const order = [...contenders.keys()];
    if (turn % 2 === 1) order.reverse();
    for (const one of order) times[one]!.push(await contenders[one]!.run(turn % planes));
  }
  return times;
}

/** The fastest of many by the better of two runs after a first one: those worth a longer look. */
export async function fastest(contenders: readonly Contender[], planes: number, count: number): Promise<Contender[]> {
  if (contenders.length <= count) return contenders.slice();
  const looks: { contender: Contender; milliseconds: number }[] = [];
  for (const contender of contenders) {
    await contender.run(0);
    looks.push({ contender, milliseconds: Math.min(await contender.run(1 % planes), await contender.run(2 % planes)) });
  }
  return looks
    .toSorted((a, b) => a.milliseconds - b.milliseconds)
    .slice(0, count)
    .map(({ contender }) => contender);
}
