/** The page: what was asked for, the measurement under way, what was found, what it is compared with. */
import type { HardwareProfile } from "../../../src/index.js";
import type { Crossover } from "../../../src/measure/index.js";
import { reportHtml } from "../../../src/report/report.js";
import { download, jsonFile, nameOf, type SavedFile } from "./download.js";
import { EarlierView } from "./earlierView.js";
import { element, say } from "./element.js";
import { FindingsView } from "./findingsView.js";
import { Remembered } from "./remembered.js";
import { startSession, type Ending } from "./session.js";
import { surroundingsInWords, threadsAvailable } from "./surroundings.js";
import { WantedForm } from "./wantedForm.js";
import type { Wanted } from "./wanted.js";

/** For who listens: one sentence at a time, at the beginning, the middle and the end. */
function tell(words: string): void {
  element("told").textContent = words;
}

const form = new WantedForm(threadsAvailable());
const remembered = new Remembered();
const findings = new FindingsView();
const earlier = new EarlierView((results) => findings.compareWith(results), tell);

interface Measured {
  crossover: Crossover;
  profile: HardwareProfile;
}

/** The last measurement that gave something: what is on show, and what is saved. */
let last: Measured | undefined;

function start(wanted: Wanted): void {
  form.rest();
  say(undefined, element("trouble"));
  startSession(wanted, remembered.profileFor(wanted.threads), {
    profile: (profile) => remembered.measured(profile),
    growing: (crossover) => findings.show({ crossover, complete: false }),
    ended,
    told: tell,
  });
  element("stop").focus({ preventScroll: true });
  element("underway").scrollIntoView();
}

function ended({ crossover, profile, stopped, trouble }: Ending): void {
  const focusIsFree = document.activeElement === document.body || document.activeElement === element("stop");
  form.wake();
  if (trouble !== undefined) say(`The measurement ended early: ${trouble}`, element("trouble"));
  if (crossover !== undefined && profile !== undefined) last = { crossover, profile };
  if (last !== undefined) findings.show({ crossover: last.crossover, complete: true });
  if (focusIsFree) element(crossover === undefined ? "measure" : "findings-title").focus();
  if (trouble === undefined) tell(`${stopped ? "Stopped." : "Done."} ${crossover === undefined ? "" : findings.verdict}`);
}

/** What was measured last, as the file that a button saves. */
const files: Record<"results" | "profile" | "report", (measured: Measured) => SavedFile> = {
  results: ({ crossover }) => jsonFile(nameOf("results", crossover.date, layoutOf(crossover)), crossover),
  profile: ({ profile }) => jsonFile(nameOf("profile", profile.date), profile),
  report: ({ crossover, profile }) => ({
    name: `${nameOf("report", crossover.date, layoutOf(crossover))}.html`,
    mediaType: "text/html",
    text: reportHtml({ crossover, profile, document, ...(findings.earlier === undefined ? {} : { earlier: findings.earlier }) }),
  }),
};

function layoutOf({ layout: { width, height, channels, sample } }: Crossover): string {
  return `${width}x${height}x${channels}-${sample}`;
}

say(surroundingsInWords(), element("surroundings"));
form.onSubmit(start);
earlier.listen();
for (const kind of ["results", "profile", "report"] as const)
  element(`save-${kind}`).addEventListener("click", () => last !== undefined && download(files[kind](last)));
