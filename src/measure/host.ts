interface SystemModule {
  cpus(): readonly { model: string }[];
}

interface Globals {
  process?: { versions?: { node?: string }; getBuiltinModule?(name: string): unknown };
  navigator?: { userAgent?: string; hardwareConcurrency?: number };
}

/** Names of browsers as they give them, the more special first: most call themselves by the others' names too. */
const browsers = ["Firefox", "Edg", "OPR", "Chrome", "Version"] as const;

function browserName(userAgent: string): string {
  for (const name of browsers) {
    const version = userAgent.match(new RegExp(`${name}/(\\d+)`))?.[1];
    if (version !== undefined) return `${name === "Version" ? "Safari" : name === "Edg" ? "Edge" : name === "OPR" ? "Opera" : name} ${version}`;
  }
  return "a browser";
}

/** The system, as far as a browser tells: what stands first in the parentheses. */
const systemName = (userAgent: string): string =>
  userAgent
    .match(/\(([^;)]+)(?:; ([^;)]+))?/)
    ?.slice(1, 3)
    .filter(Boolean)
    .join(" ") ?? "";

/** Hardware and runtime in a few words for people, as far as the host tells them. */
export function hostName({ process, navigator }: Globals = globalThis as Globals): string {
  const node = process?.versions?.node;
  if (node !== undefined) {
    const model = (process?.getBuiltinModule?.("node:os") as SystemModule | undefined)?.cpus()[0]?.model.trim();
    return `${model ?? "unknown processor"}, node ${node}`;
  }
  const userAgent = navigator?.userAgent ?? "";
  const threads = navigator?.hardwareConcurrency;
  return [browserName(userAgent), systemName(userAgent), threads === undefined ? "" : threads === 1 ? "1 processor" : `${threads} processors`]
    .filter(Boolean)
    .join(", ");
}
