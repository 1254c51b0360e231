import { playwright } from "@vitest/browser-playwright";
import { defineConfig } from "vitest/config";
import { chromiumLaunchOptions, findChromium } from "./.build/chromium.mjs";

/** Bodies that know neither Node nor a page, and so run in both. */
const shared = ["laws", "published", "reference", "routines", "kernels", "math", "measure"].map((folder) => `test/${folder}/**/*.test.ts`);
const nodeOnly = "test/**/*.node.test.ts";
const browserOnly = "test/**/*.browser.test.ts";

const node = {
  test: { name: "node", include: ["test/**/*.test.ts"], exclude: [browserOnly, "test/pages/**", "test/package/**"], testTimeout: 300_000 },
};

/** The tarball, checked and used from an empty folder: part of `npm run check`. */
const packaged = { test: { name: "package", include: ["test/package/**/*.test.ts"], testTimeout: 120_000, hookTimeout: 240_000 } };

function browserProjects(executablePath: string) {
  const launchOptions = chromiumLaunchOptions(executablePath);
  const browser = {
    server: { headers: { "Cross-Origin-Opener-Policy": "same-origin", "Cross-Origin-Embedder-Policy": "require-corp" } },
    optimizeDeps: { include: ["fast-check", "ml-fcnnls"] },
    test: {
      name: "browser",
      include: [...shared, browserOnly],
      exclude: [nodeOnly],
      testTimeout: 300_000,
      browser: {
        enabled: true,
        headless: true,
        screenshotFailures: false,
        provider: playwright({ launchOptions }),
        instances: [{ browser: "chromium" as const }],
      },
    },
  };
  const pages = { test: { name: "pages", include: ["test/pages/**/*.test.ts"], testTimeout: 300_000 } };
  return [browser, pages];
}

const executablePath = findChromium();

export default defineConfig({
  test: { projects: [node, packaged, ...(executablePath === undefined ? [] : browserProjects(executablePath))] },
});
