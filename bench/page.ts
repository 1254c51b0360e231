/** `npm run page`: builds the page that measures the device it is open on, and serves it until it is stopped. */
import { Command, InvalidArgumentError } from "commander";
import { networkAddresses } from "./page/addresses.js";
import { buildPage } from "./page/build.js";
import { servePage, ServingError } from "./page/serve.js";

const usualPort = 8321;

function portOf(text: string): number {
  const port = Number(text);
  if (!/^\d+$/.test(text) || port > 65_535) throw new InvalidArgumentError("A port is a whole number from 0 to 65535.");
  return port;
}

const command = new Command("npm run page --")
  .description("Builds the page that measures the device it is open on, and serves it until Ctrl+C.")
  .option("--host", "also for other devices on the local network, such as a phone", false)
  .option("--port <number>", "where to serve it; 0 for any free port", portOf, usualPort)
  .allowExcessArguments(false)
  .showHelpAfterError("Try: npm run page -- --help");

/** Lines for the person who wants to open it. */
function invitation(port: number, everywhere: boolean): string[] {
  const here = `  on this machine   http://localhost:${port}/`;
  if (!everywhere) return ["The page is served. Open", "", here, "", "For a phone on the same network: npm run page -- --host"];
  const addresses = networkAddresses();
  if (addresses.length === 0) return ["The page is served, but this machine is on no network. Open", "", here];
  return [
    "The page is served. Open",
    "",
    here,
    ...addresses.map((address, index) => `  ${index === 0 ? "on another one    " : "                  "}http://${address}:${port}/`),
    "",
    "On another device it measures one thread, and its clock is coarser: browsers give threads and",
    "the fine clock to secure addresses alone, and an http:// address on the network is none.",
    "Anyone on this network can open it while it is served.",
  ];
}

const { host, port: wanted } = command.parse().opts<{ host: boolean; port: number }>();
try {
  const { port, stop } = await servePage(await buildPage(), wanted, host);
  console.log([...invitation(port, host), "", "Stop with Ctrl+C."].join("\n"));
  for (const signal of ["SIGINT", "SIGTERM"] as const) process.once(signal, () => void stop());
} catch (error) {
  if (!(error instanceof ServingError)) throw error;
  console.error(error.message);
  process.exitCode = 1;
}
