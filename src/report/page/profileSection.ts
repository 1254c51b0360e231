import type { HardwareProfile, ProfileCheck } from "../../index.js";
import { operationWords } from "../../measure/index.js";
import { dateInWords, percent, threadsInWords, threeDigits } from "../figures.js";
import { methodOrder, shortName } from "../methodNames.js";
import { escaped, facts, list, paragraph, plainTable } from "./markup.js";

/** The profile that predicted: where it comes from, its prices, how it held against problems that it was not fitted to. */
export function profileSection(profile: HardwareProfile): string {
  const { host, build, threads, date, checks = [], notes = [] } = profile;
  const origin: [string, string][] = [
    ["Profile", host],
    ["Measured", dateInWords(date)],
    ["Engine", `${build} build, ${threadsInWords(threads)}`],
  ];
  return `<section aria-labelledby="profile"><h2 id="profile">The profile</h2>
${paragraph("Predictions multiply how often each operation occurs, which is known exactly, by what one costs on this machine, which the profile holds.")}
${facts(origin)}
${checks.length === 0 ? "" : checkTable(checks)}
${notes.length === 0 ? "" : list(notes)}
<details><summary>All ${Object.keys(profile.nanoseconds).length} prices</summary>
${priceTable(profile)}
</details>
${verdictDetails(profile)}</section>`;
}

function checkTable(checks: readonly ProfileCheck[]): string {
  const rows = checks.map(({ problem, method, predicted, measured }) => [
    problem,
    shortName(method),
    threeDigits(predicted),
    threeDigits(measured),
    signedPercent(predicted / measured - 1),
  ]);
  const columns = [
    { heading: "problem" },
    { heading: "method" },
    { heading: "predicted, ms", isFigure: true },
    { heading: "measured, ms", isFigure: true },
    { heading: "off by", isFigure: true },
  ];
  return plainTable("Checks: problems that the profile was not fitted to", columns, rows);
}

/** "+3.4 %", "−12 %". */
function signedPercent(share: number): string {
  const text = percent(share).replace("-", "−");
  return share > 0 ? `+${text}` : text;
}

function priceTable({ nanoseconds, spread = {} }: HardwareProfile): string {
  const words: Readonly<Record<string, string>> = operationWords;
  const rows = Object.entries(nanoseconds).map(([name, price]) => [
    Object.hasOwn(words, name) ? words[name]! : name,
    threeDigits(price),
    Object.hasOwn(spread, name) ? `± ${percent(spread[name]!)}` : "taken over in proportion",
  ]);
  return plainTable(
    "Nanoseconds for one of each operation",
    [{ heading: "operation" }, { heading: "ns", isFigure: true }, { heading: "spread", isFigure: true }],
    rows,
  );
}

function verdictDetails({ verdicts = [] }: HardwareProfile): string {
  if (verdicts.length === 0) return "";
  const rows = verdicts.map(({ shape, method, milliseconds, date }) => {
    const times = methodOrder.flatMap((one) => (milliseconds[one] === undefined ? [] : [`${shortName(one)} ${threeDigits(milliseconds[one])} ms`]));
    return [shape, shortName(method), times.join(", "), dateInWords(date)];
  });
  const columns = ["problem", "fastest", "measured", "date"].map((heading) => ({ heading }));
  return `<details><summary>Decided by measuring: ${escaped(String(verdicts.length))}</summary>
${plainTable("Problems that were timed; what was found is used for such problems instead of predictions", columns, rows)}
</details>`;
}
