/** The page: what was asked for, the measurement under way, what was found, what it is compared with. */
import type { HardwareProfile } from "../../../src/index.js";
import type { Crossover } from "../../../src/measure/index.js";
import { download, fileName } from "./download.js";
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

/** The last measurement that gave something: what is on show, and what is saved. */
let last: { crossover: Crossover; profile: HardwareProfile } | undefined;

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

function save(kind: "results" | "profile"): void {
  if (last === undefined) return;
  const { crossover, profile } = last;
  if (kind === "profile") return download(profile, fileName(kind, profile.date));
  const { width, height, channels, sample } = crossover.layout;
  download(crossover, fileName(kind, crossover.date, `${width}x${height}x${channels}-${sample}`));
}

say(surroundingsInWords(), element("surroundings"));
form.onSubmit(start);
earlier.listen();
element("save-results").addEventListener("click", () => save("results"));
element("save-profile").addEventListener("click", () => save("profile"));
