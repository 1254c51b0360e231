import { accessSync, constants } from "node:fs";
import { delimiter, join } from "node:path";

const names = ["chromium", "chromium-browser", "google-chrome", "google-chrome-stable"];

function isExecutable(path) {
  try {
    accessSync(path, constants.X_OK);
    return true;
  } catch {
    return false;
  }
}

/** The Chromium that the browser tests drive: TAPWISE_CHROMIUM, else the first of the usual names on PATH, else undefined. */
export function findChromium(environment = process.env) {
  const named = environment.TAPWISE_CHROMIUM;
  if (named !== undefined && named !== "") {
    if (!isExecutable(named)) throw new Error(`TAPWISE_CHROMIUM names ${named}, which is not an executable file.`);
    return named;
  }
  const folders = (environment.PATH ?? "").split(delimiter).filter((folder) => folder !== "");
  return names.flatMap((name) => folders.map((folder) => join(folder, name))).find(isExecutable);
}

/** How playwright starts it: Chromium's sandbox refuses to run as root. */
export function chromiumLaunchOptions(executablePath) {
  return { executablePath, headless: true, args: process.getuid?.() === 0 ? ["--no-sandbox"] : [] };
}
