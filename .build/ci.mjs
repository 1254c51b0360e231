/** Runs `npm test` and `npm run check`, whatever the first says, and prints the true totals of both as the last line. */
import { spawnSync } from "node:child_process";
import { dirname, join } from "node:path";
import { fileURLToPath } from "node:url";
import { clearReports, totals } from "./reports.mjs";

const root = join(dirname(fileURLToPath(import.meta.url)), "..");

clearReports();
const statuses = [["test"], ["run", "check"]].map((parameters) => spawnSync("npm", parameters, { cwd: root, stdio: "inherit" }).status);
const { passed, failed } = totals();
/** A run that ended badly without naming a test (a crash, an error outside every test) still counts as a failure. */
const unnamed = failed === 0 ? statuses.filter((status) => status !== 0).length : 0;
console.log(`${passed} passed, ${failed + unnamed} failed`);
process.exitCode = failed + unnamed === 0 && passed > 0 ? 0 : 1;
