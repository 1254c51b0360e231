import { run } from "../../src/cli/run.js";

export interface Outcome {
  exitCode: number;
  stdout: string;
  stderr: string;
}

/** Runs one command line in this process. */
export async function tapwise(...argv: string[]): Promise<Outcome> {
  const written = { stdout: "", stderr: "" };
  const stream = (name: keyof typeof written) => ({ write: (text: string) => (written[name] += text) });
  const exitCode = await run(argv, { stdout: stream("stdout"), stderr: stream("stderr") });
  return { exitCode, ...written };
}
