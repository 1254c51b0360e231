import { mkdir } from "node:fs/promises";
import { fileURLToPath } from "node:url";
import { parseArgs } from "node:util";
import { asConvolutionError, exitCodeOf, exitCodes } from "../../src/cli/failure.js";
import { ConvolutionError, createEngine } from "../../src/index.js";
import { drawnImage, readPhotograph, type DemoImage } from "./image.js";
import { show } from "./show.js";

const help = `Three filters over one photograph: what the engine chooses, why, and what every other method would have taken.

  npm run demo                    over a herbarium sheet, drawn by code
  npm run demo -- photo.png       over a PNG of yours: 8 or 16 bits, grey, RGB or palette, with or without alpha

Writes into bench/out/demo: the image and the three results as PNG, and report.html, one file that needs nothing else.
Exit code: 0 done, 1 failed (a file cannot be read or written, or two methods differ by more than they may), 2 wrong usage.
`;

/** What the command line asks for. @throws ConvolutionError `usage` */
function readArguments(words: readonly string[]): { help: boolean; photograph?: string } {
  try {
    const { values, positionals } = parseArgs({ args: [...words], options: { help: { type: "boolean", short: "h", default: false } }, allowPositionals: true });
    if (positionals.length > 1) throw new TypeError(`one photograph at a time, ${positionals.length} were named`);
    return positionals[0] === undefined ? { help: values.help } : { help: values.help, photograph: positionals[0] };
  } catch (error) {
    const reason = error instanceof Error ? error.message : String(error);
    throw new ConvolutionError("usage", `The demo's command is not understood: ${reason}. See "npm run demo -- --help".`, {
      expected: "nothing, one PNG file, or --help",
      received: words.join(" "),
      cause: error,
    });
  }
}

async function main(): Promise<number> {
  const wanted = readArguments(process.argv.slice(2));
  if (wanted.help) {
    console.log(help);
    return exitCodes.done;
  }
  const folder = fileURLToPath(new URL("../out/demo/", import.meta.url));
  const image: DemoImage = wanted.photograph === undefined ? drawnImage() : await readPhotograph(wanted.photograph);
  const engine = await createEngine();
  try {
    await mkdir(folder, { recursive: true });
    const agreed = await show(engine, image, folder, console.log);
    return agreed ? exitCodes.done : exitCodes.failed;
  } finally {
    engine.dispose();
  }
}

try {
  process.exitCode = await main();
} catch (error) {
  const failure = asConvolutionError(error);
  console.error(failure.message);
  process.exitCode = exitCodeOf(failure);
}
