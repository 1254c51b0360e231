import { execFile } from "node:child_process";
import { fileURLToPath } from "node:url";
import { describe, expect, it } from "vitest";

interface Ended {
  exitCode: number;
  output: string;
  errors: string;
}

function demo(...words: string[]): Promise<Ended> {
  const script = fileURLToPath(new URL("../../bench/demo/demo.ts", import.meta.url));
  return new Promise((resolve) => {
    const child = execFile(process.execPath, ["--import", "tsx", script, ...words], (_error, output, errors) =>
      resolve({ exitCode: child.exitCode ?? -1, output, errors }),
    );
  });
}

describe("the demo's command line", () => {
  it("explains itself", async () => {
    const ended = await demo("--help");
    expect(ended).toMatchObject({ exitCode: 0, errors: "" });
    expect(ended.output).toContain("npm run demo -- photo.png");
  });

  it("ends with 1 and one sentence where the file cannot be read", async () => {
    const ended = await demo("no-such-leaf.png");
    expect(ended).toMatchObject({ exitCode: 1, output: "" });
    expect(ended.errors.trim().split("\n")).toHaveLength(1);
    expect(ended.errors).toContain("no-such-leaf.png cannot be read");
  });

  it.each([["--colour"], ["one.png", "two.png"]])("ends with 2 for %s %s", async (...words) => {
    const ended = await demo(...words);
    expect(ended).toMatchObject({ exitCode: 2, output: "" });
    expect(ended.errors).toContain("--help");
  });
});
