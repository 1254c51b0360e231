import {
  agreementBars,
  bars,
  choicesOf,
  judgeAuto,
  judgeOnce,
  judgeRuns,
  missed,
  summarise,
  type Bars,
  type Choices,
  type Judged,
  type Measured,
  type Named,
} from "./judge.js";
import { agreementOf, summaryOf, type Agreement, type RegretSummary } from "./statistics.js";

/** A line of the table of regrets. */
export interface RegretLine {
  name: string;
  summary: RegretSummary;
  bars: Bars;
}

export interface Judgement {
  judged: (Named & { runs: Judged[] })[];
  lines: RegretLine[];
  /** Among the profiles that were measured here, where there are several. */
  agreement?: Agreement;
  /** What those choose. */
  choices: Choices[];
  passes: boolean;
  /** The lines in round numbers, for the file. */
  told: Record<string, unknown>[];
}

const inRoundNumbers = (parts: object): Record<string, number> =>
  Object.fromEntries(Object.entries(parts).map(([part, value]) => [part, Number((value as number).toFixed(4))]));

const isMeasured = ({ name }: Named): boolean => name.startsWith("measured");

const barsFor = (named: Named): Bars => (named.name === "shipped" ? bars.shipped : isMeasured(named) ? bars.measured : {});

/** All profiles on all problems: prepared filters for each profile; single calls for each, those of the measured ones taken together. */
export function judgement(all: readonly Measured[], profiles: readonly Named[]): Judgement {
  const judged = profiles.map((named) => ({ ...named, runs: judgeRuns(all, named.profile) }));
  const lines = judged.map((named): RegretLine => ({ name: `${named.name}, prepared`, summary: summarise(named.runs), bars: barsFor(named) }));
  const single = (name: string, regrets: readonly number[], limits: Bars): void => {
    if (regrets.length > 0) lines.push({ name: `${name}, single calls`, summary: summaryOf(regrets), bars: limits });
  };
  for (const named of profiles.filter((one) => !isMeasured(one))) single(named.name, judgeOnce(all, named.profile), barsFor(named));
  const own = profiles.filter(isMeasured);
  single(
    "all measured",
    own.flatMap(({ profile }) => judgeOnce(all, profile)),
    bars.measured,
  );
  single("auto as it was called", judgeAuto(all), bars.shipped);
  const choices = choicesOf(
    all,
    own.map(({ profile }) => profile),
  );
  const agreement = own.length > 1 ? agreementOf(choices.map(({ chosen }) => chosen)) : undefined;
  const agrees = agreement === undefined || (agreement.changed <= agreementBars.changed && agreement.apart <= agreementBars.apart);
  return {
    judged,
    lines,
    ...(agreement ? { agreement } : {}),
    choices,
    passes: agrees && lines.every(({ summary, bars: limits }) => missed(summary, limits).length === 0),
    told: [
      ...lines.map(({ name, summary }) => ({ name, ...inRoundNumbers(summary) })),
      ...(agreement ? [{ name: "agreement", ...inRoundNumbers(agreement) }] : []),
    ],
  };
}
