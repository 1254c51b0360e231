import { writeFileSync } from "node:fs";
import { fileURLToPath } from "node:url";
import type { HardwareProfile } from "../../src/index.js";
import { operationNames } from "../../src/planning/cost.js";

const lineOf = (name: string, nanoseconds: number): string => `    ${name}: ${Number(nanoseconds.toPrecision(4))},`;

const buildWords: Readonly<Record<string, string>> = { simd: "SIMD" };

function textOf({ host, build, date, nanoseconds }: HardwareProfile, reason: string): string {
  return `import type { HardwareProfile } from "../types.js";

/**
 * What each counted operation costs in the ${buildWords[build] ?? build} build on the machine that \`host\` names, in nanoseconds: engines use it until they are given another.
 * Written by \`npm run bench:fit\` from the runs in bench/results, which judge several profiles by the time that their choices lose; not to be edited.
 *
 * ${reason}.
 */
export const ${build}Profile: HardwareProfile = {
  version: 2,
  host: ${JSON.stringify(host)},
  build: "${build}",
  threads: 1,
  date: "${date}",
  nanoseconds: {
${operationNames.map((name) => lineOf(name, nanoseconds[name]!)).join("\n")}
  },
};
`;
}

/** Writes the shipped profiles as source files, each with the reason why it and no other is shipped. */
export function writeProfiles(profiles: readonly HardwareProfile[], reasons: readonly string[]): void {
  for (const [k, profile] of profiles.entries()) {
    const path = `src/planning/${profile.build}Profile.ts`;
    writeFileSync(fileURLToPath(new URL(`../../${path}`, import.meta.url)), textOf(profile, reasons[k]!));
    console.log(`written: ${path}`);
  }
}
