import { writeFileSync } from "node:fs";
import { fileURLToPath } from "node:url";
import type { HardwareProfile } from "../../src/index.js";
import { operationNames } from "../../src/planning/cost.js";

const file = fileURLToPath(new URL("../../src/planning/profile.ts", import.meta.url));

const lineOf = (name: string, nanoseconds: number): string => `      ${name}: ${Number(nanoseconds.toPrecision(4))},`;

function entryOf({ host, build, date, nanoseconds }: HardwareProfile, reason: string): string {
  const prices = operationNames.map((name) => lineOf(name, nanoseconds[name]!));
  return [
    `  // ${reason}.`,
    "  {",
    "    version: 2,",
    `    host: ${JSON.stringify(host)},`,
    `    build: "${build}",`,
    "    threads: 1,",
    `    date: "${date}",`,
    "    nanoseconds: {",
    ...prices,
    "    },",
    "  },",
  ].join("\n");
}

/** Writes the shipped profiles as a source file, each with the reason why it and no other is shipped. */
export function writeProfiles(profiles: readonly HardwareProfile[], reasons: readonly string[]): void {
  const text = `import type { HardwareProfile } from "../types.js";

/**
 * What each counted operation costs on the machine that \`host\` names, in nanoseconds: engines use it until they are given another.
 * Written by \`npm run bench:fit\` from the runs in bench/results, which judge several profiles by the time that their choices lose; not to be edited.
 */
export const shippedProfiles: readonly HardwareProfile[] = [
${profiles.map((profile, k) => entryOf(profile, reasons[k]!)).join("\n")}
];
`;
  writeFileSync(file, text);
  console.log("written: src/planning/profile.ts");
}
