import { readdirSync, readFileSync } from "node:fs";
import { fileURLToPath } from "node:url";
import type { ContestResult, Mean } from "../../contest.js";
import type { CurvePoint } from "../../curve.js";
import type { Host } from "../../host.js";

const folder = new URL("../../results/", import.meta.url);

export interface CasesFile {
  host: Host;
  curve: CurvePoint[];
}

export interface YardsticksFile {
  host: Host;
  groups: Record<string, { title: string; host: Host; contests: ContestResult[]; means: Mean[] }>;
}

/** The newest result file of a kind, with its path in the repository. */
export function newest<T extends { host: Host }>(what: string): { path: string; content: T } {
  const files = readdirSync(fileURLToPath(folder))
    .filter((name) => name.startsWith(`${what}-`) && name.endsWith(".json"))
    .map((name) => ({ path: `bench/results/${name}`, content: JSON.parse(readFileSync(new URL(name, folder), "utf8")) as T }));
  const last = files.toSorted((a, b) => a.content.host.date.localeCompare(b.content.host.date)).at(-1);
  if (!last) throw new Error(`there is no result file of the kind "${what}" yet`);
  return last;
}
