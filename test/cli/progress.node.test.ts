import { describe, expect, it } from "vitest";
import { run } from "../../src/cli/run.js";
import { useTemporaryFolder } from "./temporaryFolder.js";
import { writeLeaves } from "./batch/leaves.js";
import { showProgress } from "../../src/cli/progress.js";

const { at } = useTemporaryFolder();

function terminal(isTTY: boolean) {
  const written: string[] = [];
  const write = (text: string): boolean => {
    written.push(text);
    return true;
  };
  return { stderr: { write, isTTY, columns: 100 }, stdout: { write: () => true }, shown: () => written.join("") };
}

describe("progress", () => {
  it("shows a bar, words, the part that is done and the time left on a terminal", async () => {
    const { shown, ...streams } = terminal(true);
    const progress = showProgress(streams, "0 of 4 images");
    await new Promise((resolve) => setTimeout(resolve, 250));
    progress.reach(0.5, "2 of 4 images");
    await new Promise((resolve) => setTimeout(resolve, 250));
    progress.end();
    progress.end();
    expect(shown()).toContain("0 of 4 images [------------------------] 0 %");
    expect(shown()).toMatch(/2 of 4 images \[={12}-{12}\] 50 % {2}[01] s left/);
    // Control sequences of ECMA-48: the line is cleared (EL), and no mode of the terminal is changed (SM, RM).
    expect(shown().endsWith("\u001b[1G\u001b[2K")).toBe(true);
    expect(shown()).not.toContain("\u001b[?");
  });

  it("shows nothing elsewhere", () => {
    const { shown, ...streams } = terminal(false);
    const progress = showProgress(streams, "0 of 4 images");
    progress.reach(0.5, "2 of 4 images");
    progress.end();
    expect(shown()).toBe("");
  });

  it.each([true, false])("of a batch is seen where standard error is a terminal: %s", async (isTTY) => {
    await writeLeaves(at("sheets"), ["a.png", "b.png"]);
    const { shown, ...streams } = terminal(isTTY);
    expect(await run(["filter", at("sheets"), at("soft"), "--kernel", "gaussian 1"], streams)).toBe(0);
    expect(shown().includes("of 2 images [")).toBe(isTTY);
    if (!isTTY) expect(shown()).toBe("");
  });
});
